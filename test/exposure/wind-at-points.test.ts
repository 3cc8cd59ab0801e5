import { describe, expect, it } from 'vitest';
import { hilbertKey, spaceOrder } from '../../src/exposure/space-order.js';
import { windAtPoints } from '../../src/exposure/wind-at-points.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { type WindModel, windModel, windOf } from '../../src/model/wind.js';
import { shareAbove, stepTimes } from '../../src/swath/exact.js';
import { gridOver } from '../../src/swath/grid.js';
import { peakSwath } from '../../src/swath/peak.js';
import { knots } from '../../src/units.js';
import { mirrored, recurving, shifted, trackOf } from '../storms.js';
import { seeded } from './seeded.js';

/** independent: the plain model at one-minute steps, and at two seconds around the peak */
function plain(model: WindModel, place: { lonDeg: number; latDeg: number }, thresholds: readonly number[]) {
  let [peak, fromDeg, timeMs, before] = [0, Number.NaN, Number.NaN, 0];
  const hours = thresholds.map(() => 0);
  const times = stepTimes(model.path.startMs, model.path.endMs, 60);
  for (const [i, time] of times.entries()) {
    const wind = windOf(model.fieldAt(time), place);
    if (wind.speedMps > peak) [peak, fromDeg, timeMs] = [wind.speedMps, wind.fromDeg, time];
    if (i > 0)
      for (const [h, threshold] of thresholds.entries())
        hours[h]! += (shareAbove(before, wind.speedMps, threshold) * (time - times[i - 1]!)) / 3_600_000;
    before = wind.speedMps;
  }
  // the peak over continuous time: where the eyewall passes a minute is worth 0.05 m/s
  for (let time = timeMs - 58_000; time < timeMs + 60_000; time += 2000)
    if (time >= model.path.startMs && time <= model.path.endMs)
      peak = Math.max(peak, windOf(model.fieldAt(time), place).speedMps);
  return { peak, fromDeg, timeMs, hours };
}

function around(model: WindModel, { count, seed }: { count: number; seed: number }) {
  const random = seeded(seed);
  const lonDeg = new Float64Array(count);
  const latDeg = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const { startMs, endMs } = model.path;
    const centre = model.path.at(startMs + random() * (endMs - startMs));
    const spread = random() < 0.5 ? 1 : 4;
    latDeg[i] = centre.latDeg + spread * (random() - 0.5);
    const lon = centre.lonDeg + spread * (random() - 0.5);
    lonDeg[i] = lon > 180 ? lon - 360 : lon < -180 ? lon + 360 : lon;
  }
  return { lonDeg, latDeg };
}

const thresholds = [34, 50, 64].map(knots);
const lower = thresholds.map((threshold) => threshold - 0.05);
const higher = thresholds.map((threshold) => threshold + 0.05);
const storms = {
  'a storm of the north': windModel(recurving, makeRecipe()),
  'a storm of the south across ±180°': windModel(shifted(mirrored(recurving), -122), makeRecipe()),
};

describe('wind at places', () => {
  for (const [name, model] of Object.entries(storms)) {
    describe(name, () => {
      const points = around(model, { count: 200, seed: 7 });
      const placeOf = (i: number) => ({ lonDeg: points.lonDeg[i]!, latDeg: points.latDeg[i]! });
      const found = windAtPoints(model, points, { thresholdsMps: thresholds });
      const judged = Array.from({ length: 200 }, (_, i) =>
        plain(model, placeOf(i), [...thresholds, ...lower, ...higher]),
      );

      it('is the plain model’s to 0.05 m/s at 200 places', async () => {
        const { windMps } = await found;
        let worst = 0;
        for (const [i, judge] of judged.entries())
          if (judge.peak >= 8) worst = Math.max(worst, Math.abs(windMps[i]! - judge.peak));
        expect(worst).toBeLessThan(0.05);
      });

      it('blows from where the plain model has it at that time', async () => {
        const { windMps, windFromDeg, peakTimeS, originMs } = await found;
        for (let i = 0; i < 200; i++) {
          if (windMps[i]! < 15) continue;
          const { fromDeg } = windOf(model.fieldAt(originMs + 1000 * peakTimeS[i]!), placeOf(i));
          expect(Math.abs(((windFromDeg[i]! - fromDeg + 540) % 360) - 180)).toBeLessThan(1);
        }
      });

      it('lasts as long as the plain model has it at a wind at most 0.05 m/s off', async () => {
        const { hours, windMps } = await found;
        let worst = 0;
        for (const [i, judge] of judged.entries()) {
          for (const [h, threshold] of thresholds.entries()) {
            expect(hours[h]![i]!).toBeLessThanOrEqual(judge.hours[3 + h]! + 1 / 60);
            expect(hours[h]![i]!).toBeGreaterThanOrEqual(judge.hours[6 + h]! - 1 / 60);
            if (hours[h]![i]! > 0) expect(windMps[i]).toBeGreaterThanOrEqual(threshold);
            worst = Math.max(worst, Math.abs(hours[h]![i]! - judge.hours[h]!));
          }
        }
        expect(worst).toBeLessThan(0.25);
      });
    });
  }

  it('is a grid’s to what the help says of one of 0.02°', async () => {
    const model = storms['a storm of the north'];
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-60.8, 22, -59.3, 23.5], cell: 0.02 });
    const { windMps } = await peakSwath(model, grid);
    const random = seeded(31);
    const n = 2000;
    const lonDeg = Float64Array.from({ length: n }, () => -60.7 + 1.3 * random());
    const latDeg = Float64Array.from({ length: n }, () => 22.1 + 1.3 * random());
    const found = await windAtPoints(model, { lonDeg, latDeg });
    const off = Array.from({ length: n }, (_, i) => {
      const [column, row] = [(lonDeg[i]! + 60.8) / 0.02 - 0.5, (23.5 - latDeg[i]!) / 0.02 - 0.5];
      const [c, r] = [Math.floor(column), Math.floor(row)];
      const [tx, ty] = [column - c, row - r];
      const at = (j: number, k: number): number => windMps[j * grid.nx + k]!;
      const above = (1 - tx) * at(r, c) + tx * at(r, c + 1);
      const below = (1 - tx) * at(r + 1, c) + tx * at(r + 1, c + 1);
      return Math.abs((1 - ty) * above + ty * below - found.windMps[i]!);
    }).sort((a, b) => a - b);
    expect(off[Math.floor(0.99 * n)]).toBeLessThan(0.3 + 0.05);
    expect(off[n - 1]).toBeLessThan(0.5 + 0.05);
  });

  it('does not depend on the company of a place', async () => {
    const model = storms['a storm of the north'];
    const points = around(model, { count: 60, seed: 3 });
    const together = await windAtPoints(model, points, { thresholdsMps: thresholds });
    for (const i of [0, 17, 42]) {
      const alone = await windAtPoints(
        model,
        { lonDeg: points.lonDeg.slice(i, i + 1), latDeg: points.latDeg.slice(i, i + 1) },
        { thresholdsMps: thresholds },
      );
      expect(Math.abs(alone.windMps[0]! - together.windMps[i]!)).toBeLessThan(0.03);
    }
  });

  it('counts more thresholds than the kernel takes at once, never rising with the threshold', async () => {
    const model = storms['a storm of the north'];
    const points = around(model, { count: 40, seed: 5 });
    const many = Array.from({ length: 12 }, (_, i) => 15 + 4 * i);
    const found = await windAtPoints(model, points, { thresholdsMps: many });
    const few = await windAtPoints(model, points, { thresholdsMps: many.slice(8) });
    for (let i = 0; i < 40; i++) {
      for (let h = 1; h < many.length; h++)
        expect(found.hours[h]![i]!).toBeLessThanOrEqual(found.hours[h - 1]![i]! + 1e-6);
      for (let h = 8; h < 12; h++) expect(found.hours[h]![i]).toBeCloseTo(few.hours[h - 8]![i]!, 5);
      expect(found.hours.some((hours) => hours[i]! > 0)).toBe(found.windMps[i]! >= 15);
    }
  });

  it('takes places at a pole, at ±180° under either name, and far away', async () => {
    const polar = windModel(
      trackOf([
        { hours: 0, latDeg: 88.5, lonDeg: 170, maxWindMps: 40, radiusOfMaxWindM: 60_000 },
        { hours: 12, latDeg: 89.5, lonDeg: 178, maxWindMps: 40, radiusOfMaxWindM: 60_000 },
      ]),
      makeRecipe(),
    );
    const points = {
      lonDeg: Float64Array.of(0, 120, 180, -180, 10, 179.99, -179.99),
      latDeg: Float64Array.of(90, 90, 88, 88, -40, 89, 89),
    };
    const found = await windAtPoints(polar, points);
    for (let i = 0; i < 7; i++) {
      const judge = plain(polar, { lonDeg: points.lonDeg[i]!, latDeg: points.latDeg[i]! }, []);
      expect(Math.abs(found.windMps[i]! - judge.peak)).toBeLessThan(0.05);
    }
    // identity: one place under two names
    expect(Math.abs(found.windMps[2]! - found.windMps[3]!)).toBeLessThan(0.02);
    expect(found.windMps[4]).toBe(0);
    expect(found.windFromDeg[4]).toBeNaN();
  });

  it('has nothing to say about no place', async () => {
    const none = await windAtPoints(storms['a storm of the north'], {
      lonDeg: new Float64Array(0),
      latDeg: new Float64Array(0),
    });
    expect(none.windMps.length).toBe(0);
  });
});

describe('the order of places', () => {
  it('visits every cell of a block once, one step at a time', () => {
    const cells: [number, number, number][] = [];
    for (let row = 0; row < 32; row++)
      for (let column = 0; column < 32; column++) cells.push([hilbertKey(column, row), column, row]);
    cells.sort((a, b) => a[0] - b[0]);
    // identity: consecutive cells of a Hilbert curve share an edge
    for (let i = 1; i < cells.length; i++) {
      const [a, b] = [cells[i - 1]!, cells[i]!];
      expect(b[0] - a[0]).toBe(1);
      expect(Math.abs(a[1] - b[1]) + Math.abs(a[2] - b[2])).toBe(1);
    }
  });

  it('holds each index once', () => {
    const random = seeded(1);
    const lon = Float64Array.from({ length: 5000 }, () => random() * 720 - 360);
    const lat = Float64Array.from({ length: 5000 }, () => random() * 180 - 90);
    expect(Uint32Array.from(spaceOrder(lon, lat)).sort()).toEqual(Uint32Array.from({ length: 5000 }, (_, i) => i));
  });
});
