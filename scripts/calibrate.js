#!/usr/bin/env node
// Reruns the calibration of the default recipe from a HURDAT2 file:
//   npm run build && node scripts/calibrate.js FILE
// Prints the coefficients of the size relation with the outer profile, of the pressure relation, and their skill in the
// sample and by storm-wise cross-validation (every storm is judged by coefficients that have not seen it).
import { readFileSync } from 'node:fs';
import { averagesOf, offshoreFixes } from './skill/fixes.js';
import { fitAbsolute, score } from './skill/least-absolute.js';
import { meanRadii, profileStorm, strongestOf34Kt } from './skill/vortex.js';

const [file] = process.argv.slice(2);
if (!file) {
  console.error('usage: node scripts/calibrate.js HURDAT2-FILE');
  process.exit(2);
}
const FOLDS = 5;
const fixes = offshoreFixes(readFileSync(file, 'utf8'), file);
const storms = [...new Set(fixes.map((fix) => fix.storm))];
// a fixed, arbitrary deal of the storms
const foldOf = new Map(storms.map((storm, i) => [storm, (i * 7919) % FOLDS]));
console.log(`${fixes.length} fixes of ${storms.length} storms, at least 100 km off land, HU or TS, below 25 m/s`);

// 1. pressure: ln Δp = c0 + c1 ln(V/35) + c2(|φ| − 20) + c3(c − 5) [+ c4 ln(r34/160)]
for (const withSize of [false, true]) {
  const rows = fixes
    .filter((fix) => fix.deficitHpa !== null && (!withSize || fix.meanOf34Km !== null))
    .map((fix) => ({
      fold: foldOf.get(fix.storm),
      y: fix.deficitHpa,
      x: [
        1,
        Math.log(fix.windMps / 35),
        fix.latDeg - 20,
        fix.translationMps - 5,
        ...(withSize ? [Math.log(fix.meanOf34Km / 160)] : []),
      ],
    }));
  const fitted = (part) =>
    fitAbsolute({
      start: [3.2, 1.8, 0, 0, ...(withSize ? [0] : [])],
      residuals: (c) => part.map(({ x, y }) => Math.exp(x.reduce((sum, v, i) => sum + v * c[i], 0)) - y),
      steps: Array(5).fill(1e-3),
      floor: 0.3,
    });
  const errors = (part, c) => part.map(({ x, y }) => Math.exp(x.reduce((sum, v, i) => sum + v * c[i], 0)) - y);
  const all = fitted(rows);
  const crossed = Array.from({ length: FOLDS }, (_, k) =>
    errors(
      rows.filter(({ fold }) => fold === k),
      fitted(rows.filter(({ fold }) => fold !== k)),
    ),
  ).flat();
  console.log(
    `\npressure ${withSize ? 'with' : 'without'} the radius of 34 kt: ${all.map((c) => c.toFixed(4)).join(' ')}`,
  );
  console.log(`  in the sample ${score(errors(rows, all))}; cross-validated ${score(crossed)} hPa`);
}

// 2. size and outer profile together, from the three radii
const sized = fixes.filter((fix) => fix.deficitHpa !== null && fix.means.some((mean) => mean !== null));
const storm = profileStorm(averagesOf(sized));
const SCALE = [38, 20, 14];
const NAMES = [
  'constant',
  'wind',
  'dayMeanWind',
  'dayMeanDeficit',
  'latitude',
  'translation',
  'pastPeak',
  'outer',
  'outerWind',
  'stretch',
];
const START = [4.8, -0.3, -1.2, 1.25, 0.008, -0.014, 0.32, 0.8, 0.4, 0.8];
const STEPS = [0.01, 0.01, 0.01, 0.01, 0.001, 0.002, 0.01, 0.01, 0.01, 0.02];
const counts = (part) => SCALE.map((_, t) => part.filter((fix) => fix.means[t] !== null).length);
const differences = (part, c) => {
  const out = [[], [], []];
  for (const fix of part) {
    const modelled = meanRadii(storm(fix, c), fix);
    for (let t = 0; t < 3; t++) if (fix.means[t] !== null) out[t].push(modelled[t] - fix.means[t]);
  }
  return out;
};
const fitProfile = (part, start) => {
  const n = counts(part);
  return fitAbsolute({
    start,
    steps: STEPS,
    floor: 0.03,
    // every wind counts the same, whatever its number of fixes; its bias counts, too
    residuals: (c) =>
      differences(part, c).flatMap((errors, t) => [
        ...errors.map((e) => e / SCALE[t]),
        errors.reduce((sum, e) => sum + e, 0) / errors.length / SCALE[t],
      ]),
    weights: n.flatMap((count) => [...Array(count).fill(1 / count), 0.15]),
  });
};
const all = fitProfile(sized, START);
console.log(`\nsize and profile:`);
for (const [i, name] of NAMES.entries()) console.log(`  ${name.padEnd(15)} ${all[i].toFixed(4)}`);
const inSample = differences(sized, all);
const crossed = [[], [], []];
for (let k = 0; k < FOLDS; k++) {
  const c = fitProfile(
    sized.filter((fix) => foldOf.get(fix.storm) !== k),
    all,
  );
  for (const [t, errors] of differences(
    sized.filter((fix) => foldOf.get(fix.storm) === k),
    c,
  ).entries())
    crossed[t].push(...errors);
}
for (const [t, kt] of [34, 50, 64].entries())
  console.log(`  ${kt} kt: in the sample ${score(inSample[t])}; cross-validated ${score(crossed[t])} km`);

// 3. the outer wind from the radius of 34 kt: −Δ ln r/Δ ln V = a + b s − c ln(V/35)
const outer = fixes
  .filter((fix) => fix.means[0] !== null)
  .flatMap((fix) =>
    [50, 64].flatMap((kt, i) =>
      fix.means[i + 1] === null ? [] : [{ fold: foldOf.get(fix.storm), fix, s: Math.log(kt / 34), t: i + 1 }],
    ),
  );
const outerErrors = (part, c) =>
  part.map(
    ({ fix, s, t }) =>
      fix.means[0] * Math.exp(-s * (c[0] + c[1] * s - c[2] * Math.log(fix.windMps / 35))) - fix.means[t],
  );
const fitOuter = (part) =>
  fitAbsolute({ start: [1.7, 0.9, 0.75], steps: [0.01, 0.01, 0.01], floor: 1, residuals: (c) => outerErrors(part, c) });
const outerAll = fitOuter(outer);
const outerCrossed = Array.from({ length: FOLDS }, (_, k) =>
  outerErrors(
    outer.filter(({ fold }) => fold === k),
    fitOuter(outer.filter(({ fold }) => fold !== k)),
  ),
).flat();
console.log(`\nouter fall (50 and 64 kt from 34 kt): ${outerAll.map((c) => c.toFixed(3)).join(' ')}`);
console.log(`  in the sample ${score(outerErrors(outer, outerAll))}; cross-validated ${score(outerCrossed)} km`);

// 4. radii that are filled in between and beyond observed ones (src/vortex/radii-state.ts)
const crossedBy = (rows, solve, errors) =>
  Array.from({ length: FOLDS }, (_, k) =>
    errors(
      rows.filter(({ fold }) => fold === k),
      solve(rows.filter(({ fold }) => fold !== k)),
    ),
  ).flat();

// 4a. 50 kt between 34 and 64 kt of the same quadrant: ln r = ln r34 + (ln r64 − ln r34) t^a
const share = Math.log(50 / 34) / Math.log(64 / 34);
const between = fixes.flatMap((fix) =>
  [0, 1, 2, 3].flatMap((j) => {
    const [r34, r50, r64] = fix.radiiKm.map((radii) => radii[j]);
    return r34 > 0 && r50 > 0 && r64 > 0 ? [{ fold: foldOf.get(fix.storm), r34, r50, r64 }] : [];
  }),
);
const betweenErrors = (part, [a]) => part.map(({ r34, r50, r64 }) => r34 * (r64 / r34) ** (share ** a) - r50);
const fitBetween = (part) =>
  fitAbsolute({ start: [1.3], steps: [0.01], floor: 1, residuals: (c) => betweenErrors(part, c) });
const power = fitBetween(between);
console.log(`\nbetween 34 and 64 kt, single quadrants of 50 kt: power ${power[0].toFixed(3)}`);
console.log(
  `  in the sample ${score(betweenErrors(between, power))}; cross-validated ${score(crossedBy(between, fitBetween, betweenErrors))} km`,
);

// 4b. 50 and 64 kt beyond 34 kt: ln r = ln r34 − s(a + b s − c ln(V/35) − d ln(size/130 km)) − e λ s, not inside the ridge
const RIDGE = 0.04;
const beyond = sized.flatMap((fix) => {
  const known = fix.radiiKm[0].filter((radius) => radius > 0);
  if (known.length === 0) return [];
  const vortex = storm(fix, all, 1000 * fix.meanOf34Km);
  const base = strongestOf34Kt(vortex) / 1000;
  if (!(base > 0)) return [];
  const ridgeKm = (Math.min(vortex.radiusOfMaxWindM, 800 * Math.max(...known)) / 1000) * Math.exp(RIDGE);
  const stronger = Math.log(fix.windMps / 35);
  const larger = Math.log(vortex.sizeRadiusM / 130_000);
  return [50, 64].flatMap((kt, i) =>
    fix.means[i + 1] === null
      ? []
      : [
          {
            fold: foldOf.get(fix.storm),
            fix,
            t: i + 1,
            s: Math.log(kt / 34),
            radii: fix.radiiKm[0],
            base,
            ridgeKm,
            stronger,
            larger,
          },
        ],
  );
});
const beyondErrors = (part, c) =>
  part.map(({ fix, t, s, radii, base, ridgeKm, stronger, larger }) => {
    const fall = Math.max(0.8, c[0] + c[1] * s - c[2] * stronger - c[3] * larger);
    let sum = 0;
    for (const radius of radii) {
      if (!(radius > 0)) continue;
      const stretch = Math.max(-2, Math.min(2, Math.log(radius / base)));
      sum += Math.max(ridgeKm, radius * Math.exp(-s * fall - c[4] * stretch * s));
    }
    return sum / 4 - fix.means[t];
  });
const fitBeyond = (part) => {
  const counts = [0, 1, 2].map((t) => part.filter((row) => row.t === t).length);
  return fitAbsolute({
    start: [1.6, 1.2, 0.8, 0.2, 0.5],
    steps: [0.01, 0.01, 0.01, 0.01, 0.01],
    floor: 0.05,
    residuals: (c) => beyondErrors(part, c).map((error, i) => error / SCALE[part[i].t]),
    weights: part.map(({ t }) => 1 / counts[t]),
  });
};
const fallBeyond = fitBeyond(beyond);
const beyondCrossed = [[], [], []];
for (let k = 0; k < FOLDS; k++) {
  const c = fitBeyond(beyond.filter(({ fold }) => fold !== k));
  const part = beyond.filter(({ fold }) => fold === k);
  for (const [i, error] of beyondErrors(part, c).entries()) beyondCrossed[part[i].t].push(error);
}
console.log(`\nbeyond 34 kt: ${fallBeyond.map((c) => c.toFixed(3)).join(' ')}`);
for (const [t, kt] of [
  [1, 50],
  [2, 64],
])
  console.log(
    `  ${kt} kt: in the sample ${score(
      beyondErrors(
        beyond.filter((row) => row.t === t),
        fallBeyond,
      ),
    )}; cross-validated ${score(beyondCrossed[t])} km`,
  );
