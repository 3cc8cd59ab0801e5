import { UsageError } from '../errors.js';
import { plainLongitude } from '../exposure/point-table.js';
import { type SiteRecord, siteRecords } from '../exposure/sites.js';
import { writeWhole } from '../io/output.js';
import { readPoints } from '../io/points.js';
import { VERSION } from '../io/version.js';
import { recipeDocument } from '../model/recipe.js';
import { windModel } from '../model/wind.js';
import { gustFactorOf } from '../swath/exact.js';
import { quantityOf, toKnots } from '../units.js';
import { csvLine } from '../write/csv-cell.js';
import { thresholdName } from '../write/peak-bands.js';
import { placesBox } from '../write/places-box.js';
import { CAUTION } from '../write/provenance.js';
import { type CommonOptions, levelsOf, type ModelOptions, periodOf, recipeOf, type TrackOptions } from './choices.js';
import { makeConsole, table } from './console.js';
import { decayOnly, type LandOptions, landOfRun, refuseElsewhere } from './land.js';
import { readStorm } from './storm.js';

interface SitesOptions extends CommonOptions, ModelOptions, TrackOptions, LandOptions {
  readonly levels: string;
  readonly every?: string;
  readonly from?: string;
  readonly to?: string;
  readonly strict?: boolean;
  readonly as?: 'csv' | 'geojson' | 'svg' | 'png';
  readonly out?: string;
  readonly force?: boolean;
}

/** `galewake sites`: the model's wind at places. */
export async function sites(file: string, placesFile: string, options: SitesOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  if (options.out !== undefined && options.as === undefined)
    throw new UsageError('sites.as', '--out goes with --as, such as --as csv --out places.csv');
  const levelsMps = levelsOf(options.levels);
  const everyS =
    options.every === undefined
      ? undefined
      : quantityOf('duration', options.every, { bareUnit: 'min', name: '--every' });
  if (everyS !== undefined && !(everyS >= 10)) throw new UsageError('sites.every', '--every: at least 10 s');
  const recipe = await recipeOf(options);
  const { track, inputs } = await readStorm(file, options);
  const places: { name: string; latDeg: number; lonDeg: number }[] = [];
  const read = await readPoints(placesFile, {
    values: [],
    onPoint: (point) => places.push(point),
    ...(options.strict ? { strict: true } : {}),
  });
  const known = await landOfRun(options, 2000);
  const model = windModel(track, known ? decayOnly(recipe) : recipe, {
    lowestLevelMps: levelsMps[0]!,
    ...(known ? { land: known.land } : {}),
  });
  refuseElsewhere(known, model);
  const drawn = options.as === 'svg' || options.as === 'png';
  const step = everyS ?? (drawn ? 600 : undefined);
  const records = siteRecords(model, places, {
    levelsMps,
    ...periodOf(options.from, options.to, model.path, ['--from', '--to']),
    gustFactor: gustFactorOf(model, 'at-sea'),
    ...(step === undefined ? {} : { everyS: step }),
  });

  const cautions = [...model.cautions];
  const seen = new Set<string>();
  const twice = places.map((place) => place.name).filter((name) => seen.size === seen.add(name).size);
  if (twice.length > 0)
    cautions.push(`${twice.length} names stand more than once, such as '${twice[0]}'; each row is kept`);
  if (read.skippedCount > 0)
    cautions.push(
      `${read.skippedCount} ${read.skippedCount === 1 ? 'row was' : 'rows were'} skipped: ${read.skipped
        .slice(0, 3)
        .map((row) => `${read.unit} ${row.line}, ${row.reason}`)
        .join('; ')}${read.skippedCount > 3 ? ' …' : ''}`,
    );

  const write = async (content: string | Uint8Array): Promise<void> => {
    if (options.out !== undefined) await writeWhole(options.out, [content], { force: options.force === true });
    else if (typeof content === 'string') out.print(content);
    else process.stdout.write(content);
  };
  if (options.json) {
    const document = {
      schema: 'galewake-sites/1',
      version: VERSION,
      storm: { id: track.id, name: track.name },
      inputs: [...inputs, ...(known?.inputs ?? []), read.record],
      recipe: recipeDocument(recipe),
      averaging_s: model.averagingS,
      gust_duration_s: recipe['gust.duration_s'],
      sites: records.map((record) => siteDocument(record)),
      skipped: { count: read.skippedCount, rows: read.skipped },
      cautions,
      caution: CAUTION,
    };
    out.print(`${JSON.stringify(document, null, 2)}\n`);
    return;
  }
  if (drawn) {
    const { seriesSvg } = await import('../picture/series-svg.js');
    const svg = seriesSvg(records, {
      averagingS: model.averagingS,
      gustDurationS: recipe['gust.duration_s'] as number,
      levelsMps,
      stormName: track.name ?? track.id,
    });
    await write(options.as === 'svg' ? svg : await (await import('../io/png.js')).svgToPng(svg));
  } else if (options.as === 'geojson') {
    await write(`${JSON.stringify(siteFeatures(records))}\n`);
  } else if (options.as === 'csv') {
    await write(everyS === undefined ? recordsCsv(records) : seriesCsv(records));
  } else {
    out.print(
      table([['place', 'peak m/s', 'kt', 'gust m/s', 'from', 'time', 'closest km', 'side'], ...records.map(shortRow)]),
    );
    for (const record of records.filter((one) => one.series.length > 0)) {
      out.print(
        `\n${record.site.name}\n${table([['time', 'm/s', 'gust', 'from', 'hPa'], ...record.series.map((row) => [minute(row.timeMs), row.windMps.toFixed(1), row.gustMps.toFixed(1), row.windFromDeg === null ? '-' : row.windFromDeg.toFixed(0), row.pressurePa === null ? '-' : (row.pressurePa / 100).toFixed(1)])])}`,
      );
    }
  }
  for (const caution of cautions) out.say(`caution: ${caution}`);
  out.say(CAUTION);
}

const minute = (ms: number): string => `${new Date(ms).toISOString().slice(0, 16)}Z`;
const iso = (ms: number | null): string | null => (ms === null ? null : new Date(ms).toISOString());
const round = (value: number, digits: number): number => Number(value.toFixed(digits));

function shortRow(record: SiteRecord): string[] {
  return [
    record.site.name,
    record.peakWindMps.toFixed(1),
    toKnots(record.peakWindMps).toFixed(0),
    record.peakGustMps.toFixed(1),
    record.windFromDeg === null ? '-' : `${record.windFromDeg.toFixed(0)}°`,
    record.peakTimeMs === null ? '-' : minute(record.peakTimeMs),
    (record.closest.distanceM / 1000).toFixed(0),
    record.closest.side ?? '-',
  ];
}

function siteDocument(record: SiteRecord): Record<string, unknown> {
  return {
    name: record.site.name,
    lat_deg: record.site.latDeg,
    lon_deg: record.site.lonDeg,
    peak_wind_mps: round(record.peakWindMps, 3),
    peak_gust_mps: round(record.peakGustMps, 3),
    wind_from_deg: record.windFromDeg === null ? null : round(record.windFromDeg, 1),
    peak_time: iso(record.peakTimeMs),
    levels: record.levels.map((level) => ({
      threshold_mps: round(level.thresholdMps, 4),
      threshold_kt: round(toKnots(level.thresholdMps), 2),
      first: iso(level.firstMs),
      last: iso(level.lastMs),
      hours: round(level.hours, 3),
    })),
    closest: {
      distance_km: round(record.closest.distanceM / 1000, 3),
      time: iso(record.closest.timeMs),
      side: record.closest.side,
    },
    ...(record.series.length === 0
      ? {}
      : {
          series: record.series.map((row) => ({
            time: iso(row.timeMs),
            wind_mps: round(row.windMps, 3),
            gust_mps: round(row.gustMps, 3),
            wind_from_deg: row.windFromDeg === null ? null : round(row.windFromDeg, 1),
            pressure_hpa: row.pressurePa === null ? null : round(row.pressurePa / 100, 2),
          })),
        }),
  };
}

function siteFeatures(records: readonly SiteRecord[]): Record<string, unknown> {
  const bbox = placesBox(
    records.map((record) => round(plainLongitude(record.site.lonDeg), 7)),
    records.map((record) => round(record.site.latDeg, 7)),
  );
  return {
    type: 'FeatureCollection',
    ...(bbox ? { bbox } : {}),
    features: records.map((record) => {
      const { lat_deg, lon_deg, levels, closest, series, ...properties } = siteDocument(record) as Record<
        string,
        unknown
      >;
      void [lat_deg, lon_deg, series];
      return {
        type: 'Feature',
        geometry: {
          type: 'Point',
          coordinates: [round(plainLongitude(record.site.lonDeg), 7), round(record.site.latDeg, 7)],
        },
        properties: { ...properties, levels, closest },
      };
    }),
    caution: CAUTION,
  };
}

function recordsCsv(records: readonly SiteRecord[]): string {
  const levels = records[0]?.levels ?? [];
  const names = levels.map((level) => thresholdName(level.thresholdMps));
  const heading = [
    'name',
    'lat_deg',
    'lon_deg',
    'peak_wind_mps',
    'peak_gust_mps',
    'wind_from_deg',
    'peak_time',
    'closest_km',
    'closest_time',
    'closest_side',
    ...names.flatMap((name) => [`hours_${name}_h`, `first_${name}`, `last_${name}`]),
  ];
  const rows = records.map((record) => [
    record.site.name,
    record.site.latDeg,
    record.site.lonDeg,
    round(record.peakWindMps, 3),
    round(record.peakGustMps, 3),
    record.windFromDeg === null ? null : round(record.windFromDeg, 1),
    iso(record.peakTimeMs),
    round(record.closest.distanceM / 1000, 3),
    iso(record.closest.timeMs),
    record.closest.side,
    ...record.levels.flatMap((level) => [round(level.hours, 3), iso(level.firstMs), iso(level.lastMs)]),
  ]);
  return [heading, ...rows].map(csvLine).join('');
}

function seriesCsv(records: readonly SiteRecord[]): string {
  const heading = ['name', 'time', 'wind_mps', 'gust_mps', 'wind_from_deg', 'pressure_hpa'];
  const rows = records.flatMap((record) =>
    record.series.map((row) => [
      record.site.name,
      iso(row.timeMs),
      round(row.windMps, 3),
      round(row.gustMps, 3),
      row.windFromDeg === null ? null : round(row.windFromDeg, 1),
      row.pressurePa === null ? null : round(row.pressurePa / 100, 2),
    ]),
  );
  return [heading, ...rows].map(csvLine).join('');
}
