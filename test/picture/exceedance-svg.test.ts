import { describe, expect, it } from 'vitest';
import { placeCurve } from '../../src/events/place-curve.js';
import { type DrawnCurve, exceedanceSvg } from '../../src/picture/exceedance-svg.js';

const OPTIONS = {
  title: 'Winds of an event set',
  quantity: '1-minute mean',
  setYears: 100,
  longestYears: 1000,
  confidence: 0.95,
  notes: ['a <note>'],
};

function drawn(name: string, values: readonly number[]): DrawnCurve {
  const events = values.map((value, event) => ({ event, value, rate: 0.01 }));
  return { ...placeCurve(events, { largest: 0.01, confidence: 0.95 }), name, tail: [], remark: '' };
}

/** [x, y] of the vertices of a path */
function vertices(svg: string, name: string): [number, number][] {
  const path = new RegExp(`class="${name}" d="([^"]*)"`).exec(svg)![1]!;
  return [...path.matchAll(/[ML]([\d.]+) ([\d.]+)/g)].map((match) => [Number(match[1]), Number(match[2])]);
}

describe('a drawing of exceedance', () => {
  it('is a staircase that rises to the right, the interval around it', () => {
    const svg = exceedanceSvg([drawn('One <b>', [50, 45, 40, 40, 30, 25, 20, 19, 18, 18])], OPTIONS);
    const line = vertices(svg, 'line');
    // identity: each step is level or upright; up is to smaller y
    for (const [i, [x, y]] of line.entries()) {
      if (i === 0) continue;
      const [px, py] = line[i - 1]!;
      expect(x === px || y === py).toBe(true);
      expect(x).toBeGreaterThanOrEqual(px);
      expect(y).toBeLessThanOrEqual(py);
    }
    const band = vertices(svg, 'interval');
    const spread = (points: [number, number][], k: 0 | 1): [number, number] => [
      Math.min(...points.map((point) => point[k])),
      Math.max(...points.map((point) => point[k])),
    ];
    expect(spread(band, 0)[0]).toBeLessThan(spread(line, 0)[0]);
    expect(spread(band, 0)[1]).toBeGreaterThan(spread(line, 0)[1]);
    expect(spread(band, 1)[0]).toBeLessThanOrEqual(spread(line, 1)[0]);
    expect(svg).toContain('One &#60;b&#62;');
    expect(svg).toContain('a &#60;note&#62;');
    expect(svg.match(/class="set-length"/g)).toHaveLength(1);
    // one decade is as wide as another
    const tick = (text: string): number => Number(new RegExp(`x="([\\d.]+)"[^>]*>${text}<`).exec(svg)![1]);
    expect(tick('100') - tick('10')).toBeCloseTo(tick('1000') - tick('100'), 1);
  });

  it('has a panel for a place without events, and a tail on the same axes', () => {
    const tail = [
      [10, 30],
      [100, 52],
      [1000, 60],
      [100_000, 400],
    ] as const;
    const svg = exceedanceSvg([drawn('None', []), { ...drawn('Some', [50, 40, 30]), tail }], OPTIONS);
    expect(svg.match(/class="place"/g)).toHaveLength(2);
    expect(svg).toContain('generalised Pareto tail');
    expect(svg).not.toMatch(/NaN|Infinity/);
    // what lies beyond the axis does not stretch it
    expect(svg).not.toMatch(/>400</);
    expect(exceedanceSvg([], OPTIONS)).not.toMatch(/NaN|Infinity/);
    const many = Array.from({ length: 70 }, (_, i) => drawn(`P${i}`, [20 + i]));
    expect(exceedanceSvg(many, OPTIONS)).toContain('10 of 70 places are not drawn');
  });
});
