import { join } from 'node:path';
import { InputError, UsageError } from '../errors.js';
import {
  aggregateLoss,
  annualMoments,
  type LossPoint,
  occurrenceCurve,
  occurrenceLoss,
  simulateYears,
} from '../events/annual-losses.js';
import { cellFinder } from '../events/cell-at.js';
import { OPEN_SEA } from '../events/open-sea.js';
import { RANDOM_NAME } from '../events/random.js';
import { setYears } from '../events/rate-interval.js';
import { assetStore } from '../exposure/asset-columns.js';
import { cellPortfolio, type PortfolioLosses, portfolioLosses } from '../io/event-losses.js';
import { ratesOf } from '../io/event-query.js';
import { EventRun } from '../io/event-run.js';
import { OutputFolder } from '../io/output.js';
import { type PointFile, readPoints } from '../io/points.js';
import { VERSION } from '../io/version.js';
import { makeRecipe, recipeNumber } from '../model/recipe.js';
import { csvLine } from '../write/csv-cell.js';
import { DAMAGE_CAUTION } from '../write/exposure-summary.js';
import { CAUTION } from '../write/provenance.js';
import { type CommonOptions, countOf, list, oneOf } from './choices.js';
import { makeConsole, table } from './console.js';
import { curveOf, curveWind, type DamageOptions } from './damage.js';
import { manifestsOf, setAsideCautions } from './events.js';
import { gustAtSea, lossColumns } from './exposure.js';

export interface LossesOptions extends CommonOptions, DamageOptions {
  readonly assets: string;
  readonly values?: string;
  readonly lossOf?: string;
  readonly currency?: string;
  readonly simulate: string;
  readonly seed: string;
  readonly strict?: boolean;
  readonly out?: string;
  readonly formats?: string;
  readonly force?: boolean;
}

const FORMATS = ['csv', 'parquet', 'json'] as const;
/** One over annual probabilities of the table. */
const TABLE_YEARS = [2, 5, 10, 25, 50, 100, 250, 500, 1000];

/** What is known of one column of values. */
interface ColumnResult {
  readonly name: string;
  readonly insured: number;
  readonly mean: number;
  readonly deviation: number;
  readonly curve: readonly LossPoint[];
  /** losses of the simulated years, falling */
  readonly simulated: Float64Array;
}

/** `galewake events losses`: what a portfolio loses, event by event and year by year. */
export async function losses(folder: string, options: LossesOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  if (options.out === undefined && (options.formats !== undefined || options.force))
    throw new UsageError('losses.out', '--formats and --force go with --out, the folder of the results');
  if (options.assets === '-' && options.curve === '-')
    throw new UsageError('losses.input', 'only one of the files can be standard input (-)');
  const formats = [...new Set(list(options.formats ?? 'csv,json').map((one) => oneOf(one, FORMATS, '--formats')))];
  const years = countOf(options.simulate, { name: '--simulate', least: 1000 });
  const seed = countOf(options.seed, { name: '--seed', least: 0 });
  const run = await EventRun.open(folder);
  const rates = ratesOf(run);
  const recipe = makeRecipe(run.plan.recipe);
  const model = { recipe, averagingS: recipeNumber(recipe, 'wind.averaging_s') };
  const damage = await curveOf(options, {
    averagingS: model.averagingS,
    gustDurationS: recipeNumber(recipe, 'gust.duration_s'),
  });
  if (!damage)
    throw new UsageError(
      'losses.curve',
      'losses need a damage curve: --curve FILE, --cubic or --power; there is none built in',
    );
  const { windOf, conversion } = curveWind(damage.curve, model);
  const read = await portfolioOf(run, options);
  const manifests = await manifestsOf(run, out);
  if (!manifests) return;

  const found = await portfolioLosses(run, { manifests, portfolio: read.portfolio, curve: damage.curve, windOf });
  const simulated = simulateYears({ rates, losses: found.losses }, { years, seed });
  const columns = read.columns.map((column, c): ColumnResult => {
    const own = found.losses[c]!;
    return {
      name: read.file.valueNames[column]!,
      insured: read.portfolio.values[c]!.reduce((sum, value) => sum + value, 0),
      ...annualMoments(rates, own),
      curve: occurrenceCurve(rates, own),
      simulated: simulated[c]!,
    };
  });
  const least = run.plan.leastMps;
  const cautions = [
    ...read.cautions,
    ...setAsideCautions(manifests),
    ...(damage.curve.ratio(windOf(least, least * gustAtSea(recipe))) > 0
      ? [
          `the curve has losses at winds that the run does not keep (below ${least.toFixed(1)} m/s): they are left out; plan a run with a lower --least`,
        ]
      : []),
    ...(found.aboveCurve > 0
      ? [
          `${found.aboveCurve} winds of cells and events are above the curve's last row, ${damage.curve.knownToMps.toFixed(1)} m/s: its last ratio is held, which may be too low`,
        ]
      : []),
    ...cautionsOfLength(rates, columns),
  ];
  const files = [
    ...(formats.includes('csv') ? ['event-losses.csv', 'loss-curves.csv'] : []),
    ...(formats.includes('parquet') ? ['event-losses.parquet'] : []),
    ...(formats.includes('json') ? ['summary.json'] : []),
  ];
  const document = {
    schema: 'galewake-event-losses/1',
    version: VERSION,
    plan: run.plan.planHash,
    events: run.plan.events,
    events_with_loss: Array.from(rates.keys()).filter((i) => found.losses.some((column) => column[i]! > 0)).length,
    assets: read.count,
    assets_outside: read.outside,
    ...(options.currency === undefined ? {} : { currency: options.currency }),
    inputs: [read.file.record, ...(damage.input ? [damage.input] : [])],
    curve: { title: damage.curve.title, of: damage.curve.of, averaging_s: damage.curve.averagingS, conversion },
    wind: 'that of the cell that holds the asset, over open sea',
    return_period:
      'one over the annual probability: of the largest loss of a year (occurrence) or of its sum (aggregate)',
    occurrence: 'exact: 1 − e^(−λ), λ the sum of the rates of events with at least that loss',
    aggregate: {
      method: `simulation of ${years} years: in each a Poisson number of events, each drawn by its rate`,
      years,
      seed,
      random_numbers: RANDOM_NAME,
      interval: '95 % of the chance of the simulation alone, not of the set',
    },
    columns: columns.map(columnDocument),
    files: options.out === undefined ? [] : files,
    cautions,
    surface: OPEN_SEA,
    damage_caution: DAMAGE_CAUTION,
    caution: CAUTION,
  };
  if (options.out !== undefined) {
    const output = await OutputFolder.open(options.out, { force: options.force === true });
    try {
      await output.check(files);
      const rows = { run, rates, found, columns };
      for (const name of files) {
        if (name === 'event-losses.csv') await output.write(name, eventRows(rows));
        if (name === 'event-losses.parquet') await output.write(name, [await eventParquet(rows)]);
        if (name === 'loss-curves.csv') await output.write(name, curveRows(columns));
        if (name === 'summary.json') await output.write(name, [`${JSON.stringify(document, null, 2)}\n`]);
      }
      await output.commit();
    } finally {
      await output.discard();
    }
  }
  if (options.json) out.print(`${JSON.stringify(document, null, 2)}\n`);
  else {
    const unit = options.currency === undefined ? '' : ` (${options.currency})`;
    out.print(`${read.count} assets, ${document.events_with_loss} of ${run.plan.events} events with a loss${unit}\n\n`);
    out.print(shortTable(columns));
    out.print(
      `\ncurve: ${damage.curve.title}; ${conversion}\naggregate: ${document.aggregate.method}; ${RANDOM_NAME}, seed ${seed}\n`,
    );
    if (options.out !== undefined) out.print(`\n${files.map((name) => join(options.out!, name)).join('\n')}\n`);
  }
  for (const caution of cautions) out.say(`caution: ${caution}`);
  for (const words of [OPEN_SEA, DAMAGE_CAUTION, CAUTION]) out.say(words);
}

/** The assets of a file, added up by the cells of the run. */
async function portfolioOf(run: EventRun, options: LossesOptions) {
  const store = assetStore();
  const file = await readPoints(options.assets, {
    onPoint: store.add,
    ...(options.values === undefined ? {} : { values: list(options.values) }),
    ...(options.strict ? { strict: true } : {}),
  });
  const assets = store.columns();
  const columns = lossColumns(options.lossOf, file.valueNames);
  if (columns.length === 0)
    throw new InputError(
      'losses.values',
      `${options.assets}: there is no column of values; name one with --values, such as --values insured_sum`,
    );
  const finder = cellFinder(run.grid);
  let [outside, example] = [0, ''];
  const portfolio = cellPortfolio(assets, {
    columns,
    cellOf: (i) => {
      const cell = finder({ latDeg: assets.latDeg[i]!, lonDeg: assets.lonDeg[i]! });
      if (cell < 0 && outside++ === 0) example = assets.nameOf(i);
      return cell;
    },
  });
  const why = `${outside} of ${assets.count} assets lie outside the grid of the run, such as '${example}'`;
  if (outside > 0 && (options.strict || outside === assets.count))
    throw new InputError(
      'losses.outside',
      `${options.assets}: ${why}; leave them out or plan a run with larger --bounds`,
    );
  return {
    file,
    columns,
    portfolio,
    count: assets.count,
    outside,
    cautions: [...(outside > 0 ? [`${why}: they have no losses here`] : []), ...cautionsOfFile(file, assets.sameNames)],
  };
}

function cautionsOfFile(file: PointFile, sameNames: { count: number; example: string }): string[] {
  return [
    ...(file.skippedCount > 0
      ? [
          `${file.skippedCount} of the ${file.unit}s were skipped, such as ${file.unit} ${file.skipped[0]!.line}: ${file.skipped[0]!.reason}`,
        ]
      : []),
    ...(sameNames.count > 0
      ? [`${sameNames.count} names stand more than once, such as '${sameNames.example}'; each row is counted`]
      : []),
  ];
}

/** Table rows that are rarer than any event. */
function cautionsOfLength(rates: Float64Array, columns: readonly ColumnResult[]): string[] {
  const longest = setYears(rates);
  const beyond = TABLE_YEARS.filter((years) => years > longest * (1 + 1e-9));
  const none = columns.filter(({ curve }) => curve.length === 0);
  return [
    ...(beyond.length > 0
      ? [
          `the rarest event comes once in ${longest.toFixed(0)} years: losses of ${beyond.join(', ')} years rest on the strongest events of the set alone`,
        ]
      : []),
    ...(none.length > 0 ? [`no event has a loss of ${none.map(({ name }) => name).join(', ')}`] : []),
  ];
}

const digits = (value: number): number => Number(value.toPrecision(8));
const money = (value: number): number => Number(value.toFixed(2));

function columnDocument(column: ColumnResult): Record<string, unknown> {
  const { simulated } = column;
  const simulatedMean = simulated.reduce((sum, loss) => sum + loss, 0) / simulated.length;
  return {
    name: column.name,
    value: money(column.insured),
    average_annual_loss: money(column.mean),
    annual_loss_standard_deviation: money(column.deviation),
    share_of_value: column.insured > 0 ? digits(column.mean / column.insured) : null,
    simulated_average_annual_loss: money(simulatedMean),
    simulated_average_standard_error: money(column.deviation / Math.sqrt(simulated.length)),
    highest_event_loss: money(column.curve[0]?.loss ?? 0),
    return_periods: TABLE_YEARS.map((years) => {
      const aggregate = aggregateLoss(simulated, years);
      return {
        return_period_years: years,
        annual_probability: digits(1 / years),
        occurrence_loss: money(occurrenceLoss(column.curve, years)),
        aggregate_loss: money(aggregate.loss),
        aggregate_lower: money(aggregate.lower),
        aggregate_upper: aggregate.upper === null ? null : money(aggregate.upper),
      };
    }),
  };
}

interface EventRows {
  readonly run: EventRun;
  readonly rates: Float64Array;
  readonly found: PortfolioLosses;
  readonly columns: readonly ColumnResult[];
}

/** Events that reach an asset, in the order of the set. */
function* eventRows({ run, rates, found, columns }: EventRows): Generator<string> {
  yield csvLine(['event', 'rate_per_year', 'assets', ...columns.map(({ name }) => `loss_of_${name}`)]);
  for (let i = 0; i < rates.length; i++)
    if (found.assets[i]! > 0)
      yield csvLine([run.events[i]!.id, rates[i]!, found.assets[i]!, ...found.losses.map((column) => column[i]!)]);
}

async function eventParquet({ run, rates, found, columns }: EventRows): Promise<Uint8Array> {
  const { parquetWriteBuffer } = await import('hyparquet-writer');
  const kept = Array.from(rates.keys()).filter((i) => found.assets[i]! > 0);
  const doubles = (name: string, of: (i: number) => number) =>
    ({ name, data: Float64Array.from(kept, of), type: 'DOUBLE' }) as const;
  return new Uint8Array(
    parquetWriteBuffer({
      columnData: [
        { name: 'event', data: kept.map((i) => run.events[i]!.id), type: 'STRING' },
        doubles('rate_per_year', (i) => rates[i]!),
        { name: 'assets', data: Int32Array.from(kept, (i) => found.assets[i]!), type: 'INT32' },
        ...columns.map(({ name }, c) => doubles(`loss_of_${name}`, (i) => found.losses[c]![i]!)),
      ],
    }),
  );
}

/** Points of an aggregate curve for each decade of years. */
const POINTS_A_DECADE = 40;

/** Both curves of each column: every event of the occurrence curve, the aggregate one at even steps of its logarithm. */
function* curveRows(columns: readonly ColumnResult[]): Generator<string> {
  yield csvLine(['values', 'curve', 'loss', 'annual_probability', 'return_period_years', 'exceedance_rate_per_year']);
  for (const { name, curve, simulated } of columns) {
    for (const { loss, annualProbability, exceedanceRate } of curve)
      yield csvLine([
        name,
        'occurrence',
        loss,
        digits(annualProbability),
        digits(1 / annualProbability),
        digits(exceedanceRate),
      ]);
    // ten years of the simulation at least lie above the rarest point
    const decades = Math.log10(simulated.length / 10);
    for (let k = Math.floor(decades * POINTS_A_DECADE); k > 0; k--) {
      const years = 10 ** (k / POINTS_A_DECADE);
      const { loss } = aggregateLoss(simulated, years);
      if (loss > 0) yield csvLine([name, 'aggregate', money(loss), digits(1 / years), digits(years), null]);
    }
  }
}

function shortTable(columns: readonly ColumnResult[]): string {
  const whole = (value: number): string => value.toFixed(value >= 1e6 ? 0 : 2);
  return table([
    ['', ...columns.flatMap(({ name }) => [name, ''])],
    ['value', ...columns.flatMap(({ insured }) => [whole(insured), ''])],
    ['average annual loss', ...columns.flatMap(({ mean }) => [whole(mean), ''])],
    ['standard deviation', ...columns.flatMap(({ deviation }) => [whole(deviation), ''])],
    ['once in years', ...columns.flatMap(() => ['occurrence', 'aggregate'])],
    ...TABLE_YEARS.map((years) => [
      String(years),
      ...columns.flatMap(({ curve, simulated }) => [
        whole(occurrenceLoss(curve, years)),
        whole(aggregateLoss(simulated, years).loss),
      ]),
    ]),
  ]);
}
