import { destination } from '../earth.js';
import { UsageError } from '../errors.js';
import { writeWhole } from '../io/output.js';
import { fieldMethods, windField } from '../model/field.js';
import { type RadialRow, radialTable } from '../model/radial.js';
import { makeRecipe, type Recipe, recipeDocument, recipeNumber } from '../model/recipe.js';
import { windModel } from '../model/wind.js';
import type { StormState } from '../track/path.js';
import { bareFix, type Track } from '../track/track.js';
import { quantityOf, tidy } from '../units.js';
import { csvCell } from '../write/csv-cell.js';
import { CAUTION } from '../write/provenance.js';
import { type CommonOptions, list, type ModelOptions, recipeOf, timeOf } from './choices.js';
import { makeConsole, table } from './console.js';
import { readStorm } from './storm.js';

interface ProfileOptions extends CommonOptions, ModelOptions {
  readonly vmax?: string;
  readonly rmax?: string;
  readonly b?: string;
  readonly pressureDeficit?: string;
  readonly lat?: string;
  readonly profile?: string;
  readonly compare?: string;
  readonly motion?: string;
  readonly heading?: string;
  readonly radii?: string;
  readonly cyclostrophicAbove?: string;
  readonly geostrophicBelow?: string;
  readonly track?: string;
  readonly storm?: string;
  readonly at?: string;
  readonly to?: 'csv' | 'svg' | 'png';
  readonly out?: string;
  readonly force?: boolean;
}

/** Far enough that the taper lies outside every table. */
const OUTER_RADIUS_M = 4_000_000;
const RADII_KM = [5, 10, 15, 20, 25, 30, 40, 50, 60, 80, 100, 150, 200, 300, 400, 500];

/** Column names of the table, in order, with the number that each shows. */
const COLUMNS: readonly (readonly [string, (row: RadialRow) => number | string | null])[] = [
  ['radius_m', (row) => row.radiusM],
  ['gradient_wind_mps', (row) => row.gradientWindMps],
  ['cyclostrophic_wind_mps', (row) => row.cyclostrophicWindMps],
  ['geostrophic_wind_mps', (row) => row.geostrophicWindMps],
  ['surface_wind_mps', (row) => row.surfaceWindMps],
  ['inflow_deg', (row) => row.inflowDeg],
  ['pressure_pa', (row) => row.pressurePa],
  ['rossby', (row) => row.rossby],
  ['balance', (row) => row.balance],
  ['angular_momentum_m2ps', (row) => row.angularMomentumM2ps],
  ['pressure_gradient_mps2', (row) => row.pressureGradientMps2],
  ['coriolis_mps2', (row) => row.coriolisMps2],
  ['centrifugal_mps2', (row) => row.centrifugalMps2],
];

/** `galewake profile`: the radial table of one vortex, or of several side by side. */
export async function profile(options: ProfileOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const base = await recipeOf(options);
  const names = options.compare ? list(options.compare) : [options.profile ?? String(base['vortex.profile'])];
  const radiiM = radiiOf(options.radii);
  const regimeBounds = {
    above: numberOf(options.cyclostrophicAbove ?? '10', '--cyclostrophic-above'),
    below: numberOf(options.geostrophicBelow ?? '0.1', '--geostrophic-below'),
  };
  const vortices = [];
  for (const name of names) {
    const recipe = makeRecipe(recipeDocument(base), [`vortex.profile=${name}`], '--profile');
    const { state, field } = await fieldOf(options, recipe);
    const rows = radialTable(field, {
      radiiM,
      airDensityKgM3: recipeNumber(recipe, 'vortex.density_kgm3'),
      regimeBounds,
    });
    vortices.push({ name, recipe, state, field, rows });
  }
  const write = async (content: string | Uint8Array): Promise<void> => {
    if (options.out !== undefined) await writeWhole(options.out, [content], { force: options.force === true });
    else if (typeof content === 'string') out.print(content);
    else process.stdout.write(content);
  };
  if (options.to === 'svg' || options.to === 'png') {
    const { profileSvg } = await import('../picture/profile-svg.js');
    const svg = profileSvg(vortices, { regimeBounds });
    await write(options.to === 'svg' ? svg : await (await import('../io/png.js')).svgToPng(svg));
    return;
  }
  if (options.json) {
    const documents = vortices.map(({ name, recipe, state, rows }) => ({
      profile: name,
      state: stateDocument(state),
      recipe: recipeDocument(recipe),
      rows: rows.map(rowDocument),
    }));
    const [only] = documents;
    out.print(
      `${JSON.stringify(options.compare ? { schema: 'galewake-profile/1', profiles: documents, caution: CAUTION } : { schema: 'galewake-profile/1', ...only, caution: CAUTION }, null, 2)}\n`,
    );
    return;
  }
  if (options.to === 'csv') {
    const heading = [...(options.compare ? ['profile'] : []), ...COLUMNS.map(([name]) => name)];
    const lines = vortices.flatMap(({ name, rows }) =>
      rows.map((row) => [...(options.compare ? [name] : []), ...COLUMNS.map(([, value]) => value(row))]),
    );
    await write(`${[heading, ...lines].map((cells) => cells.map(csvCell).join(',')).join('\r\n')}\r\n`);
    return;
  }
  for (const { name, state, field, rows } of vortices) {
    out.say(describe(name, state, field.gradientMaxMps));
    out.print(
      table([
        ['r km', 'gradient', 'cyclostr.', 'geostr.', '10 m', 'inflow', 'hPa', 'Rossby', 'balance', 'M 10⁶m²/s'],
        ...rows.map(shortRow),
      ]),
    );
    out.say(
      'Winds in m/s; 10 m and inflow (degrees) are means around the circle; M is the absolute angular momentum.\n',
    );
  }
  out.say(CAUTION);
}

function shortRow(row: RadialRow): string[] {
  const number = (value: number | null, digits: number): string => (value === null ? '-' : value.toFixed(digits));
  return [
    tidy(row.radiusM / 1000, 3),
    number(row.gradientWindMps, 2),
    number(row.cyclostrophicWindMps, 2),
    number(row.geostrophicWindMps, 2),
    number(row.surfaceWindMps, 2),
    number(row.inflowDeg, 1),
    number(row.pressurePa / 100, 1),
    row.rossby === null ? '-' : row.rossby >= 100 ? row.rossby.toFixed(0) : row.rossby.toPrecision(3),
    row.balance,
    number(row.angularMomentumM2ps / 1e6, 3),
  ];
}

function describe(name: string, state: StormState, gradientMaxMps: number): string {
  const side = state.latDeg < 0 ? 'S' : 'N';
  return `${name}: 10-m maximum ${state.maxWindMps.toFixed(2)} m/s (gradient level ${gradientMaxMps.toFixed(2)} m/s) at ${tidy(state.radiusOfMaxWindM / 1000, 2)} km, B ${state.hollandB.toFixed(3)}, ${(state.centralPressurePa / 100).toFixed(1)} of ${(state.ambientPressurePa / 100).toFixed(1)} hPa, latitude ${Math.abs(state.latDeg).toFixed(2)}° ${side}`;
}

function rowDocument(row: RadialRow): Record<string, unknown> {
  return Object.fromEntries(COLUMNS.map(([name, value]) => [name, value(row)]));
}

function stateDocument(state: StormState): Record<string, unknown> {
  return {
    lat_deg: state.latDeg,
    max_wind_mps: state.maxWindMps,
    radius_of_max_wind_m: state.radiusOfMaxWindM,
    holland_b: state.hollandB,
    central_pressure_pa: state.centralPressurePa,
    ambient_pressure_pa: state.ambientPressurePa,
    motion_east_mps: state.motionEastMps,
    motion_north_mps: state.motionNorthMps,
  };
}

function numberOf(text: string, name: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value))
    throw new UsageError('number', `${name}: '${text}' is not a number`);
  return value;
}

function radiiOf(text: string | undefined): number[] {
  const radii =
    text === undefined
      ? RADII_KM.map((km) => km * 1000)
      : list(text).map((part) => quantityOf('length', part, { bareUnit: 'km', name: '--radii' }));
  if (radii.length === 0 || radii.some((radius) => !(radius > 0 && radius <= 3_000_000)))
    throw new UsageError('radii', '--radii: give radii between 0 and 3000 km');
  return radii;
}

/** The field of the options: a state of a track, or a vortex put together from numbers. */
async function fieldOf(options: ProfileOptions, recipe: Recipe) {
  if (options.track !== undefined) {
    if (options.at === undefined) throw new UsageError('profile.at', '--track needs --at TIME');
    const { track } = await readStorm(options.track, options);
    const model = windModel(track, recipe);
    const timeMs = timeOf(options.at, '--at');
    if (timeMs < model.path.startMs || timeMs > model.path.endMs) {
      throw new UsageError(
        'profile.at',
        `--at ${options.at} is outside the track, which runs from ${new Date(model.path.startMs).toISOString()} to ${new Date(model.path.endMs).toISOString()}`,
      );
    }
    const field = model.fieldAt(timeMs);
    return { state: field.state, field };
  }
  if (options.at !== undefined || options.storm !== undefined)
    throw new UsageError('profile.track', '--at and --storm go with --track FILE');
  if (options.vmax === undefined)
    throw new UsageError('profile.vmax', 'give --vmax, such as --vmax 100kt, or --track FILE with --at TIME');
  const latDeg = quantityOf('angle', options.lat ?? '20', { bareUnit: 'deg', name: '--lat' });
  if (!(Math.abs(latDeg) <= 90) || latDeg === 0)
    throw new UsageError(
      'profile.lat',
      `--lat ${options.lat}: a latitude between −90 and 90, not 0 (the sense of rotation is undefined there)`,
    );
  const motion = quantityOf('speed', options.motion ?? '0', { bareUnit: 'm/s', name: '--motion' });
  const heading = quantityOf('angle', options.heading ?? '0', { bareUnit: 'deg', name: '--heading' });
  if (!(motion >= 0 && motion <= 40))
    throw new UsageError('profile.motion', `--motion ${options.motion}: between 0 and 40 m/s`);
  const maxWindMps = quantityOf('speed', options.vmax, { bareUnit: 'kt', name: '--vmax' });
  if (!(maxWindMps > 0 && maxWindMps <= 150))
    throw new UsageError('profile.vmax', `--vmax ${options.vmax}: above 0 and at most 150 m/s`);
  const rmaxM =
    options.rmax === undefined ? null : quantityOf('length', options.rmax, { bareUnit: 'km', name: '--rmax' });
  if (rmaxM !== null && !(rmaxM >= 1000 && rmaxM <= 500_000))
    throw new UsageError('profile.rmax', `--rmax ${options.rmax}: between 1 and 500 km`);
  const hollandB = options.b === undefined ? null : numberOf(options.b, '--b');
  if (hollandB !== null && !(hollandB >= 0.5 && hollandB <= 3.5))
    throw new UsageError('profile.b', `--b ${options.b}: between 0.5 and 3.5`);
  const deficitPa =
    options.pressureDeficit === undefined
      ? null
      : quantityOf('pressure', options.pressureDeficit, { bareUnit: 'hPa', name: '--pressure-deficit' });
  if (deficitPa !== null && !(deficitPa >= 100 && deficitPa <= 20_000))
    throw new UsageError(
      'profile.pressure-deficit',
      `--pressure-deficit ${options.pressureDeficit}: between 1 and 200 hPa`,
    );
  const averagingS = recipeNumber(recipe, 'wind.averaging_s');
  const track = passingTrack(
    { latDeg, maxWindMps, averagingS, rmaxM, hollandB, deficitPa },
    { motionMps: motion, headingDeg: heading, recipe },
  );
  const state = windModel(track, recipe).path.at(0);
  return { state, field: windField(state, fieldMethods(recipe), { outerRadiusM: OUTER_RADIUS_M }) };
}

/** A steady storm that passes the place at time 0: the completion then fills in what was not said. */
function passingTrack(
  given: {
    latDeg: number;
    maxWindMps: number;
    averagingS: number;
    rmaxM: number | null;
    hollandB: number | null;
    deficitPa: number | null;
  },
  passage: { motionMps: number; headingDeg: number; recipe: Recipe },
): Track {
  const chosen = passage.recipe['completion.ambient_hpa'];
  const ambient = typeof chosen === 'number' ? chosen * 100 : 101_000;
  const legMs = 600_000;
  const fixes = [-1, 0, 1].map((leg, i) => {
    const place = destination(
      { latDeg: given.latDeg, lonDeg: 0 },
      { bearingDeg: passage.headingDeg, distanceM: (leg * passage.motionMps * legMs) / 1000 },
    );
    return {
      ...bareFix({ timeMs: leg * legMs, ...place, line: i + 1 }),
      maxWindMps: given.maxWindMps,
      averagingS: given.averagingS,
      radiusOfMaxWindM: given.rmaxM,
      hollandB: given.hollandB,
      ambientPressurePa: ambient,
      centralPressurePa: given.deficitPa === null ? null : ambient - given.deficitPa,
    };
  });
  return { id: 'vortex', name: null, basin: null, kind: 'drawn', format: 'options', fixes, cautions: [] };
}
