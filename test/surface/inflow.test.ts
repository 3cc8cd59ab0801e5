import { describe, expect, it } from 'vitest';
import { INFLOWS, type InflowInput } from '../../src/surface/inflow.js';

const angle = (id: string, input: Partial<InflowInput>): number =>
  INFLOWS.find((method) => method.id === id)!.angleDeg({
    radiusRatio: 1,
    maxWindMps: 50,
    translationMps: 5,
    azimuthFromHeadingDeg: 0,
    ...input,
  });

describe('inflow', () => {
  it('follows Sobey, Harper and Stark', () => {
    // independent: arithmetic script of the stated formula
    const expected = { 0.5: 5, 1: 10, 1.1: 17.5, 1.2: 25, 3: 25 };
    for (const [s, deg] of Object.entries(expected))
      expect(angle('sobey-1977', { radiusRatio: Number(s) })).toBeCloseTo(deg, 10);
  });

  it('follows Bretschneider', () => {
    // independent: arithmetic script of the stated formula
    const expected = { 0.5: 15, 1: 20, 1.1: 22.5, 1.2: 25, 3: 25 };
    for (const [s, deg] of Object.entries(expected))
      expect(angle('bretschneider-1972', { radiusRatio: Number(s) })).toBeCloseTo(deg, 10);
  });

  it('follows Zhang and Uhlhorn around the storm', () => {
    // independent: arithmetic script of the stated formula, 50 m/s, 5 m/s; their angles are negative inward
    const expected = { 0: 13.6468, 90: 13.8164, 180: 25.8132, 270: 25.6436 };
    for (const [azimuth, deg] of Object.entries(expected))
      expect(angle('zhang-uhlhorn-2012', { azimuthFromHeadingDeg: Number(azimuth) })).toBeCloseTo(deg, 4);
    // identity: the mean around the circle is −A₀, 21.53° at 3 R; published: the sample mean is 22.6 ± 2.2° (abstract)
    let sum = 0;
    for (let azimuth = 0; azimuth < 360; azimuth += 10)
      sum += angle('zhang-uhlhorn-2012', { radiusRatio: 3, azimuthFromHeadingDeg: azimuth });
    expect(sum / 36).toBeCloseTo(21.53, 10);
    expect(Math.abs(sum / 36 - 22.6)).toBeLessThan(2.2);
  });

  it('turns the wind inward by less than a right angle and without a jump', () => {
    for (const { id } of INFLOWS) {
      for (let azimuth = 0; azimuth < 360; azimuth += 45) {
        for (const translationMps of [0, 5, 15]) {
          let before = angle(id, { radiusRatio: 0, azimuthFromHeadingDeg: azimuth, translationMps });
          for (let s = 0.01; s < 30; s += 0.01) {
            const deg = angle(id, { radiusRatio: s, azimuthFromHeadingDeg: azimuth, translationMps });
            expect(Math.abs(deg)).toBeLessThan(90);
            expect(Math.abs(deg - before)).toBeLessThan(2);
            before = deg;
          }
        }
      }
    }
  });
});
