import { join } from 'node:path';
import { InputError, LimitError, UsageError } from '../errors.js';
import { cellFinder } from '../events/cell-at.js';
import { OPEN_SEA } from '../events/open-sea.js';
import { type ParetoTail, paretoTail, tailValue, tailValueError, usualThreshold } from '../events/pareto-tail.js';
import { placeCurve, type ReturnValue, returnValueOf } from '../events/place-curve.js';
import { INTERVAL_METHODS, ratesAreEqual, setYears } from '../events/rate-interval.js';
import { probabilityOfAny } from '../events/return-period.js';
import { plainLongitude } from '../exposure/point-table.js';
import { RETURN_YEARS } from '../io/event-hazard.js';
import { eventsAtCells } from '../io/event-places.js';
import { ratesOf } from '../io/event-query.js';
import { EventRun, type Manifest } from '../io/event-run.js';
import { OutputFolder } from '../io/output.js';
import { readPoints } from '../io/points.js';
import { VERSION } from '../io/version.js';
import { makeRecipe, recipeNumber } from '../model/recipe.js';
import type { DrawnCurve } from '../picture/exceedance-svg.js';
import { averagingText } from '../picture/words.js';
import { cellCentre, type Grid, projection } from '../swath/grid.js';
import { quantityOf } from '../units.js';
import { csvLine } from '../write/csv-cell.js';
import { CAUTION } from '../write/provenance.js';
import { type CommonOptions, list, oneOf } from './choices.js';
import { makeConsole, table } from './console.js';
import { manifestsOf, setAsideCautions } from './events.js';
import { gustAtSea } from './exposure.js';

export interface CurvesOptions extends CommonOptions {
  readonly places: string;
  readonly of: 'wind' | 'gust';
  readonly confidence: string;
  readonly tail: 'none' | 'gpd';
  readonly threshold?: string;
  readonly strict?: boolean;
  readonly out?: string;
  readonly formats?: string;
  readonly force?: boolean;
}

const FORMATS = ['csv', 'json', 'svg', 'png'] as const;
/** Places of one run of the command: their curves are kept for the drawing and the summary. */
const MOST_PLACES = 1000;
/** Points of a curve that a drawing keeps; a line of 600 pixels shows no more. */
const MOST_DRAWN = 2000;

interface AskedPlace {
  readonly name: string;
  readonly latDeg: number;
  readonly lonDeg: number;
  readonly cell: number;
}

interface PlaceResult {
  readonly place: AskedPlace;
  readonly events: number;
  readonly returns: readonly ReturnValue[];
  readonly tail: FittedTail | null;
  /** why there is no tail */
  readonly without: string | null;
  readonly drawn: Omit<DrawnCurve, 'remark' | 'tail' | 'name'>;
}

interface FittedTail {
  readonly tail: ParetoTail;
  readonly rule: string;
  readonly highest: number;
  /** shape and hundred-year value with half and with twice as many events above the threshold */
  readonly others: readonly { readonly threshold: number; readonly shape: number; readonly value100: number | null }[];
}

/** `galewake events curves`: how often a wind comes to places. */
export async function curves(folder: string, options: CurvesOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  if (options.out === undefined && (options.formats !== undefined || options.force))
    throw new UsageError('curves.out', '--formats and --force go with --out, the folder of the results');
  const formats = [...new Set(list(options.formats ?? 'csv,json,svg').map((one) => oneOf(one, FORMATS, '--formats')))];
  const confidence = Number(options.confidence.replace(/%$/, '')) / 100;
  if (!(confidence >= 0.5 && confidence <= 0.999))
    throw new UsageError('curves.confidence', `--confidence ${options.confidence}: a percentage from 50 to 99.9`);
  if (options.threshold !== undefined && options.tail === 'none')
    throw new UsageError('curves.threshold', '--threshold goes with --tail gpd');
  const threshold =
    options.threshold === undefined
      ? null
      : quantityOf('speed', options.threshold, { bareUnit: 'm/s', name: '--threshold' });
  const run = await EventRun.open(folder);
  const rates = ratesOf(run);
  const recipe = makeRecipe(run.plan.recipe);
  // the least that is complete
  const leastMps = run.plan.leastMps * (options.of === 'gust' ? gustAtSea(recipe) : 1);
  if (threshold !== null && threshold < leastMps)
    throw new UsageError(
      'curves.threshold',
      `--threshold ${options.threshold}: the run keeps no ${options.of} below ${leastMps.toFixed(2)} m/s; take a higher one`,
    );
  const { grid } = run;
  const { places, cautions, record } = await placesOf(options, grid);
  const manifests = await manifestsOf(run, out);
  if (!manifests) return;
  const equal = ratesAreEqual(rates);
  const years = setYears(rates);
  const largest = rates.reduce((a, b) => Math.max(a, b), 0);
  const results: PlaceResult[] = [];
  const rows = rowsOf(run, { places, manifests, rates, largest, confidence, threshold, options, results });
  const files = [
    ...(formats.includes('csv') ? ['curves.csv', 'return-values.csv'] : []),
    ...(formats.includes('json') ? ['summary.json'] : []),
    ...(formats.includes('svg') ? ['curves.svg'] : []),
    ...(formats.includes('png') ? ['curves.png'] : []),
  ];
  const output =
    options.out === undefined ? null : await OutputFolder.open(options.out, { force: options.force === true });
  try {
    await output?.check(files);
    if (output && formats.includes('csv')) await output.write('curves.csv', rows);
    else for await (const _ of rows);
    cautions.push(...setAsideCautions(manifests), ...cautionsOf(results, years));
    const periodS = recipeNumber(recipe, options.of === 'gust' ? 'gust.duration_s' : 'wind.averaging_s');
    const quantity = averagingText(periodS, options.of === 'gust' ? 'gust' : 'mean');
    const document = {
      schema: 'galewake-event-curves/1',
      version: VERSION,
      plan: run.plan.planHash,
      of: options.of,
      averaging_s: periodS,
      events: run.plan.events,
      set_years: digits(years),
      set_years_meaning: equal
        ? 'equal rates of one in so many years'
        : 'unequal rates: the rarest event comes once in so many years',
      least_mps: digits(leastMps),
      confidence,
      interval: equal ? INTERVAL_METHODS.exact : INTERVAL_METHODS.gamma,
      inputs: [record],
      places: results.map((result) => documentOf(result, { run, grid, years })),
      cautions,
      surface: OPEN_SEA,
      caution: CAUTION,
    };
    if (output) {
      for (const name of files) {
        if (name === 'return-values.csv') await output.write(name, [returnsCsv(results, options)]);
        if (name === 'summary.json') await output.write(name, [`${JSON.stringify(document, null, 2)}\n`]);
        if (name === 'curves.svg' || name === 'curves.png') {
          const { exceedanceSvg } = await import('../picture/exceedance-svg.js');
          const longestYears = options.tail === 'gpd' ? Math.max(1000, years) : years;
          const svg = exceedanceSvg(
            results.map((result) => drawnOf(result, longestYears)),
            {
              title: `${options.of === 'gust' ? 'Gusts' : 'Winds'} of an event set`,
              quantity,
              setYears: years,
              longestYears,
              confidence,
              notes: [
                `${run.plan.events} events, the rarest once in ${years.toFixed(0)} years; ${options.of}s below ${leastMps.toFixed(1)} m/s are not kept. The interval is the set's own chance, not the error of set or model.`,
                OPEN_SEA,
              ],
            },
          );
          await output.write(name, [name === 'curves.svg' ? svg : await (await import('../io/png.js')).svgToPng(svg)]);
        }
      }
      await output.commit();
    }
    if (options.json) out.print(`${JSON.stringify(document, null, 2)}\n`);
    else {
      out.print(shortTable(results, options));
      if (output) out.print(`\n${files.map((name) => join(output.path, name)).join('\n')}\n`);
    }
    for (const caution of cautions) out.say(`caution: ${caution}`);
    out.say(`interval: ${document.interval}, ${options.confidence.replace(/%$/, '')} %`);
    out.say(OPEN_SEA);
    out.say(CAUTION);
  } finally {
    await output?.discard();
  }
}

const digits = (value: number): number => Number(value.toPrecision(6));

/** The places of a file with their cells; those outside the grid are set aside with a caution. */
async function placesOf(options: CurvesOptions, grid: Grid) {
  const finder = cellFinder(grid);
  const [places, outside]: [AskedPlace[], string[]] = [[], []];
  const read = await readPoints(options.places, {
    values: [],
    onPoint: ({ name, latDeg, lonDeg }) => {
      const cell = finder({ latDeg, lonDeg });
      if (cell < 0) outside.push(name);
      else places.push({ name, latDeg, lonDeg, cell });
    },
    ...(options.strict ? { strict: true } : {}),
  });
  const cautions: string[] = [];
  if (outside.length > 0) {
    const why = `${outside.length} of ${outside.length + places.length} places lie outside the grid of the run, such as '${outside[0]}'`;
    if (options.strict || places.length === 0)
      throw new InputError(
        'curves.outside',
        `${options.places}: ${why}; leave them out or plan a run with larger --bounds`,
      );
    cautions.push(`${why}; they are left out`);
  }
  if (places.length === 0) throw new InputError('curves.places', `${options.places}: there is no place in the file`);
  if (places.length > MOST_PLACES)
    throw new LimitError(
      'curves.places',
      `${options.places}: ${places.length} places; at most ${MOST_PLACES} at once: cut the file up, or take the return-period maps`,
    );
  if (read.skippedCount > 0)
    cautions.push(
      `${read.skippedCount} ${read.unit}s were skipped, such as ${read.unit} ${read.skipped[0]!.line}: ${read.skipped[0]!.reason}`,
    );
  return { places, cautions, record: read.record };
}

/** Lines of curves.csv; what the rest needs of each place is put into `results`. */
async function* rowsOf(
  run: EventRun,
  work: {
    readonly places: readonly AskedPlace[];
    readonly manifests: readonly Manifest[];
    readonly rates: Float64Array;
    readonly largest: number;
    readonly confidence: number;
    readonly threshold: number | null;
    readonly options: CurvesOptions;
    readonly results: PlaceResult[];
  },
): AsyncGenerator<string> {
  const { places, manifests, rates, largest, confidence, options } = work;
  yield csvLine([
    'name',
    'lat_deg',
    'lon_deg',
    'event',
    `${options.of}_mps`,
    'events_at_or_above',
    'exceedance_rate_per_year',
    'rate_lower_per_year',
    'rate_upper_per_year',
    'return_period_years',
    'annual_probability',
  ]);
  let i = 0;
  const cells = places.map(({ cell }) => cell);
  for await (const events of eventsAtCells(run, { manifests, cells, of: options.of, rates })) {
    const place = places[i++]!;
    const curve = placeCurve(events, { largest, confidence });
    for (const point of curve.points)
      yield csvLine([
        place.name,
        place.latDeg,
        plainLongitude(place.lonDeg),
        run.events[point.event]!.id,
        Number(point.value.toFixed(3)),
        point.count,
        ...[point.exceedanceRate, point.lower, point.upper, 1 / point.exceedanceRate].map(digits),
        digits(probabilityOfAny(point.exceedanceRate)),
      ]);
    const { fitted, without } =
      options.tail === 'gpd' ? tailOf(events, work.threshold) : { fitted: null, without: null };
    const every = Math.max(1, Math.ceil(curve.points.length / MOST_DRAWN));
    work.results.push({
      place,
      events: events.length,
      returns: RETURN_YEARS.map((years) => returnValueOf(curve, years)),
      tail: fitted,
      without,
      drawn: {
        // the rare ones all, the frequent ones thinned
        points: curve.points.filter((_, k) => k < 200 || k % every === 0 || k === curve.points.length - 1),
        beyondUpper: curve.beyondUpper,
      },
    });
  }
}

function tailOf(
  events: readonly { readonly value: number; readonly rate: number }[],
  asked: number | null,
): { fitted: FittedTail | null; without: string | null } {
  const falling = events.map(({ value }) => value).sort((a, b) => b - a);
  if (falling.length === 0) return { fitted: null, without: 'no event comes there' };
  const chosen = asked === null ? usualThreshold(falling) : { threshold: asked, rule: 'as named with --threshold' };
  try {
    const tail = paretoTail(events, chosen.threshold);
    const others = [0.5, 2].flatMap((factor) => {
      const threshold = falling[Math.round(tail.events * factor)];
      if (threshold === undefined) return [];
      try {
        const other = paretoTail(events, threshold);
        return [{ threshold, shape: other.shape, value100: tailValue(other, 100) }];
      } catch (error) {
        if (error instanceof LimitError) return [];
        throw error;
      }
    });
    return { fitted: { tail, rule: chosen.rule, highest: falling[0]!, others }, without: null };
  } catch (error) {
    if (!(error instanceof LimitError)) throw error;
    return { fitted: null, without: error.message };
  }
}

function cautionsOf(results: readonly PlaceResult[], years: number): string[] {
  const cautions: string[] = [];
  const beyond = RETURN_YEARS.filter((one) => one > years * (1 + 1e-9));
  if (beyond.length > 0)
    cautions.push(
      `the rarest event comes once in ${years.toFixed(0)} years: values of ${beyond.join(', ')} years are only the highest of the set${
        results.some(({ tail }) => tail)
          ? ', and those of a tail are extrapolated: they rest on the form of the tail, not on events'
          : ''
      }`,
    );
  const empty = results.filter(({ events }) => events === 0);
  if (empty.length > 0)
    cautions.push(`no event reaches ${empty.length} of ${results.length} places, such as '${empty[0]!.place.name}'`);
  const without = results.filter((one) => one.without !== null);
  if (without.length > 0)
    cautions.push(
      `${without.length} of ${results.length} places have no tail, such as '${without[0]!.place.name}': ${without[0]!.without}`,
    );
  const below = results.filter(({ tail }) => tail?.tail.upperEnd != null && tail.tail.upperEnd < tail.highest);
  if (below.length > 0)
    cautions.push(
      `at ${below.length} places, such as '${below[0]!.place.name}', the tail ends below the highest event: it does not fit there, choose another --threshold`,
    );
  return cautions;
}

function documentOf(
  { place, events, returns, tail, without }: PlaceResult,
  { run, grid, years }: { run: EventRun; grid: Grid; years: number },
): Record<string, unknown> {
  const [lon, lat] = projection(grid.crs).inverse(
    ...cellCentre(grid, place.cell % grid.nx, Math.floor(place.cell / grid.nx)),
  );
  return {
    name: place.name,
    lat_deg: place.latDeg,
    lon_deg: place.lonDeg,
    cell: place.cell,
    cell_lat_deg: digits(lat),
    cell_lon_deg: digits(plainLongitude(lon)),
    events,
    events_elsewhere: run.plan.events - events,
    return_values: returns.map((one) => ({
      return_period_years: one.years,
      annual_probability: digits(probabilityOfAny(1 / one.years)),
      value_mps: digits(one.value),
      lower_mps: digits(one.lower),
      upper_mps: one.upper === null ? null : digits(one.upper),
      beyond_the_set: one.years > years * (1 + 1e-9),
      ...(tail
        ? { tail_mps: maybe(tailValue(tail.tail, one.years)), tail_error_mps: maybe(tailError(tail.tail, one.years)) }
        : {}),
    })),
    ...(tail
      ? {
          tail: {
            form: 'generalised Pareto',
            fitted_by: 'probability-weighted moments (Hosking & Wallis 1987), weighted with the rates',
            threshold_mps: digits(tail.tail.threshold),
            threshold_rule: tail.rule,
            events_above: tail.tail.events,
            effective_events_above: digits(tail.tail.effectiveEvents),
            rate_above_per_year: digits(tail.tail.rate),
            scale_mps: digits(tail.tail.scale),
            scale_error_mps: maybe(tail.tail.scaleError),
            shape: digits(tail.tail.shape),
            shape_error: maybe(tail.tail.shapeError),
            upper_end_mps: maybe(tail.tail.upperEnd),
            other_thresholds: tail.others.map((one) => ({
              threshold_mps: digits(one.threshold),
              shape: digits(one.shape),
              value_of_100_years_mps: maybe(one.value100),
            })),
          },
        }
      : {}),
    ...(without === null ? {} : { no_tail: without }),
  };
}

const maybe = (value: number | null): number | null =>
  value === null || !Number.isFinite(value) ? null : digits(value);
const tailError = (tail: ParetoTail, years: number): number | null =>
  tailValue(tail, years) === null ? null : tailValueError(tail, years);

function returnsCsv(results: readonly PlaceResult[], options: CurvesOptions): string {
  const of = options.of;
  const heading = [
    ...['name', 'lat_deg', 'lon_deg', 'return_period_years', `${of}_mps`, `${of}_lower_mps`, `${of}_upper_mps`],
    ...(options.tail === 'gpd' ? ['tail_mps', 'tail_error_mps'] : []),
  ];
  return [
    csvLine(heading),
    ...results.flatMap(({ place, returns, tail }) =>
      returns.map((one) =>
        csvLine([
          place.name,
          place.latDeg,
          plainLongitude(place.lonDeg),
          one.years,
          ...[one.value, one.lower, one.upper].map(maybe),
          ...(options.tail === 'gpd'
            ? [
                tail ? maybe(tailValue(tail.tail, one.years)) : null,
                tail ? maybe(tailError(tail.tail, one.years)) : null,
              ]
            : []),
        ]),
      ),
    ),
  ].join('');
}

/** Return periods of the table that a person sees. */
const SHOWN_YEARS = [10, 50, 100, 500];

function shortTable(results: readonly PlaceResult[], options: CurvesOptions): string {
  const one = (value: number | null): string => (value === null ? '–' : value.toFixed(1));
  return table([
    [
      'place',
      'events',
      ...SHOWN_YEARS.flatMap((years) => [`${years} y`, 'interval']),
      ...(options.tail === 'gpd' ? ['shape', 'tail 100 y', 'tail 500 y'] : []),
    ],
    ...results.map(({ place, events, returns, tail }) => [
      place.name,
      String(events),
      ...SHOWN_YEARS.flatMap((years) => {
        const found = returns.find((value) => value.years === years)!;
        return [one(found.value), `${one(found.lower)}–${found.upper === null ? '…' : one(found.upper)}`];
      }),
      ...(options.tail === 'gpd'
        ? [
            tail ? tail.tail.shape.toFixed(2) : '–',
            one(tail && tailValue(tail.tail, 100)),
            one(tail && tailValue(tail.tail, 500)),
          ]
        : []),
    ]),
  ]);
}

function drawnOf({ place, events, returns, tail, drawn }: PlaceResult, longestYears: number): DrawnCurve {
  const hundred = returns.find(({ years }) => years === 100)!;
  const line: (readonly [number, number])[] = [];
  if (tail) {
    const [from, to] = [-Math.log10(tail.tail.rate), Math.log10(longestYears)];
    for (let i = 0; to > from && i <= 100; i++) {
      const years = 10 ** (from + ((to - from) * i) / 100);
      line.push([years, tailValue(tail.tail, years) ?? tail.tail.threshold]);
    }
  }
  return {
    ...drawn,
    name: place.name,
    tail: line,
    remark:
      events === 0
        ? 'no event comes here'
        : `${events} events; 100 years: ${hundred.value.toFixed(1)} m/s (${hundred.lower.toFixed(1)} to ${hundred.upper === null ? '…' : hundred.upper.toFixed(1)})${tail ? `, tail ${tailValue(tail.tail, 100)?.toFixed(1) ?? '–'}` : ''}`,
  };
}
