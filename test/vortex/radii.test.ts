import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { aroundCircle, type Quadrants, stretchThrough } from '../../src/vortex/radii.js';
import { type ObservedLevel, radiiState } from '../../src/vortex/radii-state.js';

const storm = { maxWindMps: 45, radiusOfMaxWindM: 30_000 };
const level = (windMps: number, radiiKm: Quadrants<number | null>, baseKm: number): ObservedLevel => ({
  windMps,
  radiiM: radiiKm.map((r) => (r === null ? null : r * 1000)) as unknown as Quadrants<number | null>,
  baseLogRatio: Math.log(baseKm / 30),
});
const quadrants = fc.tuple(
  ...Array.from({ length: 4 }, () => fc.double({ min: -1, max: 3, noNaN: true })),
) as fc.Arbitrary<[number, number, number, number]>;

describe('the curve around the circle', () => {
  it('has each value as the maximum of its quadrant, and is smooth', () => {
    fc.assert(
      fc.property(quadrants, (values) => {
        const curve = aroundCircle(values);
        for (let j = 0; j < 4; j++) {
          const within = Array.from({ length: 201 }, (_, i) => curve(2 * j + i / 100));
          // identity: the farthest place of a quadrant is the given one
          expect(Math.max(...within)).toBeCloseTo(values[j]!, 9);
        }
        const range = Math.max(...values) - Math.min(...values);
        for (let i = 0; i < 8; i++) {
          const left = (curve(i) - curve(i - 1e-5)) / 1e-5;
          const right = (curve(i + 1e-5) - curve(i)) / 1e-5;
          expect(Math.abs(left - right)).toBeLessThan(1e-3 * (1 + range));
        }
        expect(curve(8)).toBeCloseTo(curve(0), 12);
      }),
    );
  });
});

describe('the stretch along an azimuth', () => {
  it('passes through its points, rises, and is a plain stretch outside', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.tuple(fc.double({ min: 0.02, max: 1, noNaN: true }), fc.double({ min: 0.02, max: 1, noNaN: true })),
          {
            minLength: 1,
            maxLength: 5,
          },
        ),
        fc.double({ min: 0.05, max: 3, noNaN: true }),
        (gaps, inner) => {
          let [sx, sq] = [0, 0];
          const x: number[] = [];
          const q: number[] = [];
          for (const [dx, dq] of gaps) {
            sx += dx;
            sq += dq;
            x.push(sx);
            q.push(sq);
          }
          const stretch = stretchThrough(x, q, inner);
          for (let i = 0; i < x.length; i++) expect(stretch(x[i]!)).toBeCloseTo(q[i]!, 10);
          let last = Number.NEGATIVE_INFINITY;
          for (let at = -0.5; at < sx + 1; at += 0.01) {
            expect(stretch(at)).toBeGreaterThanOrEqual(last - 1e-12);
            last = stretch(at);
          }
          expect(stretch(sx + 2) - stretch(sx + 1)).toBeCloseTo(1, 9);
        },
      ),
    );
  });
});

describe('a set of radii', () => {
  it('keeps what was observed and fills in the rest between', () => {
    const { state, conflicts } = radiiState(
      [
        level(17.5, [200, 180, 120, 160], 150),
        level(25.7, [null, null, null, null], 80),
        level(32.9, [60, 60, 40, 50], 50),
      ],
      storm,
    );
    expect(conflicts).toEqual([]);
    const [inner, between, outer] = state.levels.map(({ logRatio }) => logRatio.map((x) => 30 * Math.exp(x)));
    for (const [j, km] of [200, 180, 120, 160].entries()) expect(outer![j]).toBeCloseTo(km, 9);
    for (const [j, km] of [60, 60, 40, 50].entries()) expect(inner![j]).toBeCloseTo(km, 9);
    for (let j = 0; j < 4; j++) {
      expect(between![j]).toBeGreaterThan(inner![j]!);
      expect(between![j]).toBeLessThan(outer![j]!);
    }
  });

  it('interpolates between two winds of a quadrant even where the higher one lies well inside R', () => {
    const { state } = radiiState(
      [
        level(17.5, [200, 180, 120, 160], 150),
        level(25.7, [null, null, null, null], 80),
        level(32.9, [60, 60, 15, 50], 50),
      ],
      storm,
    );
    const [inner, between] = state.levels.map(({ logRatio }) => 30 * Math.exp(logRatio[2]!));
    expect(inner).toBeCloseTo(15, 9);
    // identity: ln r = ln r₁ + (ln r₂ − ln r₁) t^1.34, t = ln(25.7/17.5)/ln(32.9/17.5)
    const t = Math.log(25.7 / 17.5) / Math.log(32.9 / 17.5);
    expect(between).toBeCloseTo(120 * (15 / 120) ** (t ** 1.34), 9);
  });

  it('takes a wind that is absent from a quadrant for the highest that may blow there', () => {
    const of = (quadrant: number | null): number => {
      const { state } = radiiState(
        [
          level(17.5, [200, 180, 120, 160], 150),
          level(25.7, [null, null, null, null], 80),
          level(32.9, [60, 60, quadrant, 50], 50),
        ],
        storm,
      );
      return state.levels[1]!.logRatio[2]!;
    };
    expect(of(0)).toBeLessThan(of(null));
    expect(of(0)).toBeGreaterThan(0);
  });

  it('takes a missing quadrant from the others and 0 for no such wind', () => {
    const { state } = radiiState([level(17.5, [200, null, 0, 160], 150)], storm);
    expect(30 * Math.exp(state.levels[0]!.logRatio[1]!)).toBeGreaterThan(150);
    expect(state.levels[0]!.logRatio[2]!).toBeLessThan(0);
  });

  it('says which of two contradictory values stands', () => {
    // frozen order: maximum, its radius, lower winds before higher ones
    const crossing = radiiState([level(17.5, [100, 100, 100, 100], 150), level(25.7, [120, 60, 60, 60], 80)], storm);
    expect(crossing.conflicts).toEqual(['crossing']);
    const [high, low] = crossing.state.levels;
    expect(30 * Math.exp(low!.logRatio[0]!)).toBeCloseTo(100, 9);
    expect(high!.logRatio[0]!).toBeLessThan(low!.logRatio[0]!);
    const above = radiiState([level(50, [40, 40, 40, 40], 20)], storm);
    expect(new Set(above.conflicts)).toEqual(new Set(['above-maximum']));
    expect(above.state.levels[0]!.logRatio.every((x) => x < 0)).toBe(true);
    const inside = radiiState([level(32.9, [20, 20, 15, 15], 50)], storm);
    expect(inside.conflicts).toEqual(['inside-maximum']);
    expect(Math.max(...inside.state.levels[0]!.logRatio)).toBeGreaterThan(0);
    const absent = radiiState([level(32.9, [0, 0, 0, 0], 50)], storm);
    expect(absent.conflicts).toEqual(['absent-below-maximum']);
  });

  it('pulls the ridge in where a radius lies inside that of maximum wind', () => {
    const { state, conflicts } = radiiState([level(32.9, [60, 50, 24, 24], 50)], storm);
    expect(conflicts).toEqual([]);
    expect(state.ridge[0]).toBe(0);
    expect(state.ridge[2]).toBeLessThan(Math.log(24 / 30));
    expect(30 * Math.exp(state.levels[0]!.logRatio[2]!)).toBeCloseTo(24, 9);
  });
});
