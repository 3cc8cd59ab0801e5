import { expect, it } from 'vitest';
import { circleDirections } from '../../src/model/circle.js';

it.each([4, 36, 72, 120])('%d directions are even, clockwise from north, and mirrored to the last bit', (count) => {
  const circle = circleDirections(count);
  const at = (i: number): [number, number] => [circle[2 * i]!, circle[2 * i + 1]!];
  for (let i = 0; i < count; i++) {
    const [east, north] = at(i);
    // identity: the bearing is i/count of a turn
    expect(east).toBeCloseTo(Math.sin((2 * Math.PI * i) / count), 14);
    expect(north).toBeCloseTo(Math.cos((2 * Math.PI * i) / count), 14);
    expect(at((count + count / 2 - i) % count).map(Math.abs)).toEqual([east, north].map(Math.abs));
    expect(at((count - i) % count).map(Math.abs)).toEqual([east, north].map(Math.abs));
  }
});
