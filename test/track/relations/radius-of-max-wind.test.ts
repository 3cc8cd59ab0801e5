import { describe, expect, it } from 'vitest';
import { willoughbyRadiusM } from '../../../src/track/relations/radius-of-max-wind.js';

describe('Willoughby, Darling & Rahn 2006', () => {
  it('gives the radius by wind and latitude', () => {
    // independent: arithmetic script
    expect(willoughbyRadiusM(50, 25) / 1000).toBeCloseTo(32.6159, 4);
    expect(willoughbyRadiusM(30, 15) / 1000).toBeCloseTo(37.5547, 4);
    expect(willoughbyRadiusM(50, -25)).toBe(willoughbyRadiusM(50, 25));
  });
});
