import { distanceM } from '../../dist/earth.js';

/** Translation speed at a fix, m/s: the mean over the legs that meet there. */
export function translationSpeed(fixes, i) {
  const legs = [
    [fixes[i - 1], fixes[i]],
    [fixes[i], fixes[i + 1]],
  ].filter(([a, b]) => a && b);
  const seconds = legs.reduce((sum, [a, b]) => sum + (b.timeMs - a.timeMs) / 1000, 0);
  return seconds === 0 ? 0 : legs.reduce((sum, [a, b]) => sum + distanceM(a, b), 0) / seconds;
}
