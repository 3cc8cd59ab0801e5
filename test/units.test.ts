import { describe, expect, it } from 'vitest';
import { UsageError } from '../src/errors.js';
import { KNOT_MPS, knots, parseQuantity, quantityOf, tidy, toKnots } from '../src/units.js';

describe('units', () => {
  it('knows the knot', () => {
    // published: the international nautical mile is 1852 m, the statute mile 1609.344 m (SI brochure; NIST SP 811, from memory)
    expect(KNOT_MPS).toBeCloseTo(0.5144444, 7);
    expect(toKnots(1)).toBeCloseTo(1.9438445, 7);
    expect(knots(1) * 3.6).toBeCloseTo(1.852, 12);
    expect(knots(1) / quantityOf('speed', '1mph', { name: '--wind' })).toBeCloseTo(1.150779, 6);
  });

  it('reads a quantity in every unit of its kind', () => {
    const read = (kind: Parameters<typeof quantityOf>[0], text: string) => quantityOf(kind, text, { name: '--x' });
    // identity: definitions
    expect(read('speed', '36 km/h')).toBeCloseTo(10, 12);
    expect(read('length', '.5nmi')).toBe(926);
    expect(read('length', '2KM')).toBe(2000);
    expect(read('pressure', '950hPa')).toBe(95_000);
    expect(read('duration', '10min')).toBe(600);
    expect(read('angle', '2e-2°')).toBe(0.02);
    expect(read('speed', '-3m/s')).toBe(-3);
  });

  it('takes the stated unit for a bare number and tells kinds apart', () => {
    expect(parseQuantity('34', ['speed'], { bareUnit: 'kt', name: '--levels' }).value).toBeCloseTo(knots(34), 12);
    expect(parseQuantity('0.02deg', ['angle', 'length'], { name: '--cell' })).toEqual({ value: 0.02, kind: 'angle' });
    expect(parseQuantity('2km', ['angle', 'length'], { name: '--cell' })).toEqual({ value: 2000, kind: 'length' });
  });

  it.each(['', 'fast', '34', '34 parsec', '34km', '1.2.3kt', '1e999x'])('refuses %j as a speed', (text) => {
    expect(() => quantityOf('speed', text, { name: '--levels' })).toThrow(UsageError);
    expect(() => quantityOf('speed', text, { name: '--levels' })).toThrow(/^--levels: /);
  });

  it('writes numbers without trailing zeros', () => {
    expect(tidy(1.5, 3)).toBe('1.5');
    expect(tidy(-0.0001, 2)).toBe('0');
  });
});
