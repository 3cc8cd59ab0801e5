import { describe, expect, it } from 'vitest';
import { hilbertKey, spaceOrder } from '../../src/exposure/space-order.js';
import { windAtPoints } from '../../src/exposure/wind-at-points.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { type WindModel, windModel, windOf } from '../../src/model/wind.js';
import { shareAbove, stepTimes } from '../../src/swath/exact.js';
import { knots } from '../../src/units.js';
import { mirrored, recurving, shifted, trackOf } from '../storms.js';
import { seeded } from './seeded.js';

/** independent: the plain model at one-minute steps */
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
const storms = {
  'a storm of the north': windModel(recurving, makeRecipe()),
  'a storm of the south across ±180°': windModel(shifted(mirrored(recurving), -122), makeRecipe()),
};

describe('wind at places', () => {
  for (const [name, model] of Object.entries(storms)) {
    it(`is the plain model’s to 0.05 m/s at 200 places: ${name}`, { timeout: 120_000 }, async () => {
      const points = around(model, { count: 200, seed: 7 });
      const found = await windAtPoints(model, points, { thresholdsMps: thresholds });
      let [worst, worstTurn, worstHours] = [0, 0, 0];
      for (let i = 0; i < 200; i++) {
        const judge = plain(model, { lonDeg: points.lonDeg[i]!, latDeg: points.latDeg[i]! }, thresholds);
        if (judge.peak < 8) continue;
        worst = Math.max(worst, Math.abs(found.windMps[i]! - judge.peak));
        for (let h = 0; h < 3; h++) worstHours = Math.max(worstHours, Math.abs(found.hours[h]![i]! - judge.hours[h]!));
        // near the centre's way the direction turns within minutes
        if (Math.abs(found.originMs + 1000 * found.peakTimeS[i]! - judge.timeMs) > 300_000) continue;
        const turn = Math.abs(((found.windFromDeg[i]! - judge.fromDeg + 540) % 360) - 180);
        if (judge.peak > 20) worstTurn = Math.max(worstTurn, turn);
      }
      expect(worst).toBeLessThan(0.05);
      expect(worstHours).toBeLessThan(0.1);
      expect(worstTurn).toBeLessThan(8);
    });
  }

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
