import type { Fix, WindRadii } from '../track.js';
import type { DeckLine } from './atcf-line.js';
import { lookAtRadii, type Spot } from './checks.js';
import { formatTime } from './time.js';

const STATE = [
  'latDeg',
  'lonDeg',
  'maxWindMps',
  'centralPressurePa',
  'outerIsobarPa',
  'outerIsobarRadiusM',
  'radiusOfMaxWindM',
  'status',
] as const satisfies readonly (keyof DeckLine & keyof Fix)[];

/** One fix for each run of lines of one time: each line adds the radii of its threshold. */
export function mergeLines(lines: readonly DeckLine[], spot: Spot): Fix[] {
  const fixes: Fix[] = [];
  let run: DeckLine[] = [];
  const close = (): void => {
    if (run.length > 0) fixes.push(mergeRun(run, spot));
    run = [];
  };
  for (const line of lines) {
    if (run.length > 0 && run[0]!.timeMs !== line.timeMs) close();
    run.push(line);
  }
  close();
  return fixes;
}

function mergeRun(run: readonly DeckLine[], spot: Spot): Fix {
  const first = run[0]!;
  const last = run[run.length - 1]!;
  const radii = new Map<number | null, WindRadii | null>();
  for (const line of run) {
    spot.line = line.line;
    const different = STATE.filter((key) => line[key] !== first[key]);
    const time = formatTime(line.timeMs);
    if (different.length > 0) {
      spot.cautions.add(
        'repeated time',
        line.line,
        `differs from line ${first.line} of the same time (${time}): the later line counts`,
      );
    }
    const threshold = line.radii?.thresholdMps ?? null;
    const known = radii.get(threshold);
    if (known !== undefined) {
      const same = known === null || known.radiiM.every((radiusM, q) => radiusM === line.radii?.radiiM[q]);
      if (same && different.length === 0)
        spot.cautions.add('repeated row', line.line, `repeats an earlier line (${time})`);
      else if (!same)
        spot.cautions.add(
          'repeated radii',
          line.line,
          `gives radii of the same wind again (${time}): the later ones count`,
        );
    }
    radii.set(threshold, line.radii);
  }
  const windRadii = [...radii.values()].filter((one) => one !== null).sort((a, b) => a.thresholdMps - b.thresholdMps);
  spot.line = first.line;
  lookAtRadii(windRadii, last.maxWindMps, spot);
  return {
    timeMs: last.timeMs,
    latDeg: last.latDeg,
    lonDeg: last.lonDeg,
    maxWindMps: last.maxWindMps,
    averagingS: 60,
    centralPressurePa: last.centralPressurePa,
    ambientPressurePa: null,
    outerIsobarPa: last.outerIsobarPa,
    outerIsobarRadiusM: last.outerIsobarRadiusM,
    radiusOfMaxWindM: last.radiusOfMaxWindM,
    hollandB: null,
    windRadii,
    status: last.status,
    record: null,
    line: first.line,
  };
}
