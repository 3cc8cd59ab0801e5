import { describe, expect, it } from 'vitest';
import { HOLLAND_B_RELATIONS, type HollandBInput, vickeryWadheraA } from '../../../src/track/relations/holland-b.js';

const storm: HollandBInput = {
  gradientWindMps: 50,
  radiusOfMaxWindM: 30_000,
  pressureDeficitPa: 6000,
  centralPressurePa: 95_000,
  latDeg: 25,
  seaTemperatureK: 301.15,
};
const b = (id: string, over: Partial<HollandBInput> = {}): number =>
  HOLLAND_B_RELATIONS.find((relation) => relation.id === id)!.hollandB({ ...storm, ...over });

describe('relations for B', () => {
  // independent: an arithmetic script of the stated formulas; their coefficients are from memory
  it.each([
    ['vickery-wadhera-2008', 1.556957],
    ['vickery-wadhera-2008-fr', 1.389704],
    ['powell-2005', 1.441158],
    ['willoughby-rahn-2004', 1.979643],
    ['vickery-2000', 1.3977],
    ['harper-holland-1999', 1.6875],
    ['hubbert-1991', 1.75],
  ])('%s', (id, value) => {
    expect(Math.abs(b(id) - value)).toBeLessThan(id === 'vickery-wadhera-2008' ? 1e-5 : 5e-7);
    expect(b(id, { latDeg: -25 })).toBe(b(id));
  });

  it('Vickery & Wadhera: A of the core', () => {
    // independent: the script; its gas constant of dry air is rounded otherwise, by about 2·10⁻⁴
    expect(Math.abs(vickeryWadheraA(storm) - 0.0293452)).toBeLessThan(3e-6);
    // identity: at the equator A = 0
    expect(b('vickery-wadhera-2008', { latDeg: 0 })).toBe(1.7642);
  });

  it('are all tested', () => expect(HOLLAND_B_RELATIONS).toHaveLength(7));
});
