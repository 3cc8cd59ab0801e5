import { describe, expect, it } from 'vitest';
import { asymmetry, isInertiallyStable, kepert2001, type LayerWind, stability } from '../../src/surface/kepert2001.js';

const input = {
  radiusM: 40_000,
  windMps: 40,
  slopePerS: -5e-4,
  coriolisPerS: 5e-5,
  translationMps: 0,
  diffusivityM2ps: 50,
  dragCoefficient: 0.002,
};
const RIGHT = Math.PI / 2;

/** Outward and along the circle at an azimuth from the heading. */
const windAt = ({ outward, along }: LayerWind, azimuth: number): [number, number] => {
  const at = ([mean, cosine, sine]: LayerWind['along']): number =>
    mean + cosine * Math.cos(azimuth) + sine * Math.sin(azimuth);
  return [at(outward), at(along)];
};

describe('the linear boundary layer of Kepert', () => {
  it('turns and slows the wind of a resting vortex as worked out', () => {
    // independent: arithmetic script of the stated system
    const [outward, along] = windAt(kepert2001(input)!, 0);
    expect(outward).toBeCloseTo(-9.58686, 5);
    expect(along).toBeCloseTo(32.596083, 5);
    expect(Math.hypot(outward, along) / 40).toBeCloseTo(0.849416, 6);
    expect((Math.atan2(-outward, along) * 180) / Math.PI).toBeCloseTo(16.3892, 4);
  });

  it('gives a vortex that moves its strong side right of the heading', () => {
    // independent: arithmetic script; λ = 0, 45 … 315° runs anticlockwise from the heading
    const wind = kepert2001({ ...input, translationMps: 5 })!;
    const expected = [34.4275, 32.6821, 31.7004, 32.0368, 33.5268, 35.3139, 36.3207, 35.9425];
    for (const [k, speed] of expected.entries())
      expect(Math.hypot(...windAt(wind, (-k * Math.PI) / 4))).toBeCloseTo(speed, 4);
    expect(Math.hypot(...windAt(wind, RIGHT))).toBeGreaterThan(Math.hypot(...windAt(wind, -RIGHT)));
  });

  it('solves its system for the two waves', () => {
    const alpha = 2.05e-5;
    const beta = 5.5e-6;
    const [root, q] = [Math.sqrt(alpha * beta), Math.sqrt(beta / alpha)];
    const { plus, minusOne } = asymmetry({ root, gamma: 1e-5, drag: 0.0016, q, translationMps: 5 });
    // independent: arithmetic script
    expect(plus[0]).toBeCloseTo(0.3236222, 6);
    expect(plus[1]).toBeCloseTo(-0.3025453, 6);
    expect(minusOne[0]).toBeCloseTo(-2.8851993, 6);
    expect(minusOne[1]).toBeCloseTo(0.7880044, 6);
    // identity: what is left of the first equation, (p₁ + 1.5s)A₁ − 0.5sB + sU(q/2 − 1), B the conjugate of A₋₁
    const [s, p] = [0.0016, Math.sqrt(root + 1e-5)];
    const real = (p + 1.5 * s) * plus[0] - p * plus[1] - 0.5 * s * minusOne[0] + s * 5 * (q / 2 - 1);
    const imaginary = (p + 1.5 * s) * plus[1] + p * plus[0] + 0.5 * s * minusOne[1];
    expect(Math.hypot(real, imaginary)).toBeLessThan(1e-9);
  });

  it('has no solution where the vortex is inertially unstable', () => {
    const unstable = { ...input, slopePerS: -2e-3 };
    expect(isInertiallyStable(unstable)).toBe(false);
    expect(kepert2001(unstable)).toBeNull();
    expect(stability(unstable)).toBe(0);
    expect(stability(input)).toBe(1);
    expect(stability({ ...input, slopePerS: -1.0e-3 })).toBeGreaterThan(0);
    expect(stability({ ...input, slopePerS: -1.0e-3 })).toBeLessThan(1);
  });
});
