import { describe, expect, it } from 'vitest';
import { destination, distanceM } from '../../src/earth.js';
import { siteRecords } from '../../src/exposure/sites.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel, windOf } from '../../src/model/wind.js';
import { stepTimes } from '../../src/swath/exact.js';
import { knots } from '../../src/units.js';
import { mirrored, recurving, trackOf } from '../storms.js';
import { seeded } from './seeded.js';

/** due north along a meridian at 1° in 6 h, a storm that does not change */
const northward = (sign: 1 | -1) =>
  trackOf(
    [0, 6, 12, 18, 24].map((hours) => ({
      hours,
      latDeg: sign * 20 + hours / 6,
      lonDeg: 100,
      maxWindMps: 45,
      radiusOfMaxWindM: 40_000,
      centralPressurePa: 95_000,
      ambientPressurePa: 101_000,
    })),
  );
const levelsMps = [34, 50, 64].map(knots);
const recordsOf = (
  track: typeof recurving,
  sites: { name: string; latDeg: number; lonDeg: number }[],
  everyS?: number,
) => {
  const model = windModel(track, makeRecipe(), { lowestLevelMps: levelsMps[0]! });
  const { startMs, endMs } = model.path;
  return {
    model,
    records: siteRecords(model, sites, {
      levelsMps,
      fromMs: startMs,
      toMs: endMs,
      gustFactor: 1.23,
      ...(everyS === undefined ? {} : { everyS }),
    }),
  };
};

describe('closest approach', () => {
  for (const sign of [1, -1] as const) {
    it(`is where the great circle is square to the way, ${sign === 1 ? 'north' : 'south'} of the equator`, () => {
      const midway = { latDeg: sign * 20 + 2, lonDeg: 100 };
      const east = { name: 'east', ...destination(midway, { bearingDeg: 90, distanceM: 80_000 }) };
      const west = { name: 'west', ...destination(midway, { bearingDeg: 270, distanceM: 150_000 }) };
      const under = { name: 'under', ...midway };
      const before = { name: 'before', latDeg: sign * 20 - 2, lonDeg: 100 };
      const { model, records } = recordsOf(northward(sign), [east, west, under, before]);
      const { startMs, endMs } = model.path;
      // identity: the foot of the perpendicular is the place that both were set out from, reached half-way
      for (const [record, distance, side] of [
        [records[0]!, 80_000, 'right'],
        [records[1]!, 150_000, 'left'],
        [records[2]!, 0, null],
      ] as const) {
        expect(Math.abs(record.closest.distanceM - distance)).toBeLessThan(20);
        expect(Math.abs(record.closest.timeMs - (startMs + endMs) / 2)).toBeLessThan(60_000);
        expect(record.closest.side).toBe(side);
      }
      // behind the first fix: the nearest moment is the first, straight behind is neither left nor right
      expect(records[3]!.closest).toMatchObject({ timeMs: startMs, side: null });
      expect(
        Math.abs(records[3]!.closest.distanceM - distanceM({ latDeg: sign * 20, lonDeg: 100 }, before)),
      ).toBeLessThan(1);
    });
  }

  it('is right in one hemisphere and left in its mirror image, at the same time and distance', () => {
    const random = seeded(21);
    const sites = Array.from({ length: 12 }, (_, i) => ({
      name: String(i),
      latDeg: 18 + 12 * random(),
      lonDeg: -61 + 6 * random(),
    }));
    const north = recordsOf(recurving, sites).records;
    const south = recordsOf(
      mirrored(recurving),
      sites.map((site) => ({ ...site, latDeg: -site.latDeg })),
    ).records;
    const other = { left: 'right', right: 'left' } as const;
    for (const [i, record] of north.entries()) {
      expect(south[i]!.closest.side).toBe(record.closest.side && other[record.closest.side]);
      expect(south[i]!.closest.distanceM).toBeCloseTo(record.closest.distanceM, 3);
      expect(south[i]!.closest.timeMs).toBe(record.closest.timeMs);
      expect(south[i]!.peakWindMps).toBeCloseTo(record.peakWindMps, 6);
    }
  });

  it('has no side for a storm that stands still', () => {
    const still = trackOf(
      [0, 12].map((hours) => ({ hours, latDeg: 15, lonDeg: 130, maxWindMps: 40, radiusOfMaxWindM: 40_000 })),
    );
    const { records } = recordsOf(still, [{ name: 'a', latDeg: 15, lonDeg: 130.5 }]);
    expect(records[0]!.closest.side).toBeNull();
  });
});

describe('wind at a place', () => {
  const random = seeded(8);
  const sites = Array.from({ length: 8 }, (_, i) => ({
    name: String(i),
    latDeg: 19 + 8 * random(),
    lonDeg: -60.5 + 4 * random(),
  }));
  const { model, records } = recordsOf(recurving, sites, 600);

  it('is that of the model, minute by minute', () => {
    const times = stepTimes(model.path.startMs, model.path.endMs, 60);
    for (const record of records) {
      // independent: the plain model asked place by place
      let [peak, peakMs] = [0, 0];
      const minutes = levelsMps.map(() => 0);
      for (const timeMs of times) {
        const { speedMps } = windOf(model.fieldAt(timeMs), record.site);
        if (speedMps > peak) [peak, peakMs] = [speedMps, timeMs];
        for (const [k, level] of levelsMps.entries()) if (speedMps >= level) minutes[k]!++;
      }
      expect(record.peakWindMps).toBe(peak);
      expect(record.peakTimeMs).toBe(peakMs);
      expect(record.peakGustMps).toBeCloseTo(1.23 * peak, 9);
      for (const [k, level] of record.levels.entries()) {
        // a crossing between two minutes counts by its part: two for each spell
        expect(Math.abs(level.hours * 60 - minutes[k]!)).toBeLessThan(2.01);
        expect(level.firstMs === null).toBe(minutes[k] === 0);
        if (level.firstMs !== null) {
          expect(level.lastMs! - level.firstMs).toBeGreaterThanOrEqual(level.hours * 3_600_000 - 1);
          const at = (ms: number): number => windOf(model.fieldAt(ms), record.site).speedMps;
          if (level.firstMs > model.path.startMs)
            expect(Math.abs(at(level.firstMs) - level.thresholdMps)).toBeLessThan(0.05);
          if (level.lastMs! < model.path.endMs)
            expect(Math.abs(at(level.lastMs!) - level.thresholdMps)).toBeLessThan(0.05);
        }
      }
    }
  });

  it('comes as a series at the interval that is asked for', () => {
    for (const record of records) {
      const { series } = record;
      expect(series.length).toBe(48 * 6 + 1);
      for (const [i, row] of series.entries()) {
        expect(row.timeMs).toBe(model.path.startMs + i * 600_000);
        const { speedMps, fromDeg } = windOf(model.fieldAt(row.timeMs), record.site);
        expect(row.windMps).toBe(speedMps);
        expect(row.windFromDeg).toBe(speedMps > 0 ? fromDeg : null);
        expect(row.windMps).toBeLessThanOrEqual(record.peakWindMps);
      }
    }
  });

  it('has the central pressure at the centre, more outward, none beyond the model', () => {
    const track = northward(1);
    const { model: north, records: found } = recordsOf(
      track,
      [
        { name: 'centre', latDeg: 20, lonDeg: 100 },
        { name: 'near', latDeg: 20, lonDeg: 100.5 },
        { name: 'far', latDeg: 20, lonDeg: 103 },
        { name: 'beyond', latDeg: 20, lonDeg: 160 },
      ],
      3600,
    );
    const first = found.map((record) => record.series[0]!.pressurePa);
    // identity: 950 hPa were given
    expect(Math.abs(first[0]! - 95_000)).toBeLessThan(100);
    expect(first[1]!).toBeGreaterThan(first[0]!);
    expect(first[2]!).toBeGreaterThan(first[1]!);
    expect(first[2]!).toBeLessThan(101_500);
    expect(first[3]).toBeNull();
    expect(found[3]).toMatchObject({ peakWindMps: 0, peakTimeMs: null, windFromDeg: null });
    expect(north.path.at(north.path.startMs).centralPressurePa).toBeCloseTo(95_000, 6);
  });
});
