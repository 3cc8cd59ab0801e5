import { Command, CommanderError, Option } from 'commander';
import { EXIT, guarded } from './failure.js';
import { OVERVIEW } from './overview.js';

const CAUTION =
  '\nNo warning service: defer to the national meteorological service and the local emergency authorities.\n';

/** Repeated options gather their values. */
const gather = (value: string, before: string[] = []): string[] => [...before, value];

/** Options of every command. */
function common(command: Command): Command {
  return command
    .option('--json', 'print one JSON document on standard output')
    .option('--quiet', 'no messages on standard error')
    .addHelpText('after', CAUTION)
    .showHelpAfterError('(--help tells the options)')
    .exitOverride();
}

/** Options of every command that reads tracks. */
function readsTracks(command: Command): Command {
  return command
    .option('--storm <ID>', 'a storm of a file with several, by id or name')
    .option(
      '--format <NAME>',
      'format of the file, where its content does not tell: hurdat2, ibtracs, b-deck, a-deck, csv, geojson',
    )
    .option('--agency <LIST>', 'IBTrACS: whose columns, in order of preference (usa, then the others)')
    .option('--technique <NAME>', 'a-deck: which technique')
    .option('--columns <LIST>', 'CSV: key=heading,… for headings of your own')
    .option('--sort-times', 'accept rows out of order in time and sort them');
}

/** Options of every command that models wind. */
function models(command: Command): Command {
  return command
    .option('--recipe <FILE>', 'modelling choices as JSON (the built-in recipe)')
    .option('--set <KEY=VALUE>', 'one modelling choice; may be repeated', gather)
    .option('--wind <PERIOD>', 'averaging period of the sustained wind (1min)');
}

export async function runProgram(argv: readonly string[]): Promise<void> {
  const program = new Command('galewake')
    .description('Tropical-cyclone tracks to gridded wind')
    .helpOption('-h, --help', 'this text')
    .showSuggestionAfterError(true)
    .exitOverride();
  program.helpInformation = () => OVERVIEW;

  readsTracks(
    models(
      common(
        program
          .command('tracks <FILE>')
          .description('What is in a track file; with --storm the completed track and where every value came from.'),
      ),
    ),
  )
    .addOption(
      new Option('--to <FORMAT>', 'convert, to standard output or --out').choices(['csv', 'geojson', 'svg', 'png']),
    )
    .option('--out <FILE>', 'where the conversion goes')
    .option('--force', 'replace an existing file')
    .action(async (file, options) => (await import('./tracks.js')).tracks(file, options));

  models(
    common(
      program
        .command('profile')
        .description('Radial table of one vortex: winds, pressure, Rossby number, force budget, angular momentum.'),
    ),
  )
    .option('--vmax <SPEED>', 'maximum sustained 10-m wind (kt)')
    .option('--rmax <LENGTH>', 'radius of maximum wind (km)')
    .option('--b <NUMBER>', 'Holland B (gradient-consistent)')
    .option('--pressure-deficit <PRESSURE>', 'ambient less central pressure (hPa)')
    .option('--lat <DEGREES>', 'latitude, south negative (20)')
    .option('--profile <NAME>', 'profile (the recipe’s)')
    .option('--compare <LIST>', 'several profiles side by side')
    .option('--motion <SPEED>', 'translation speed (0 m/s)')
    .option('--heading <DEGREES>', 'direction of motion, clockwise from north (0)')
    .option('--radii <LIST>', 'radii of the table (km)')
    .option('--cyclostrophic-above <NUMBER>', 'Rossby number above which the balance is called cyclostrophic (10)')
    .option('--geostrophic-below <NUMBER>', 'Rossby number below which it is called geostrophic (0.1)')
    .option('--track <FILE>', 'take the state of a track instead')
    .option('--storm <ID>', 'a storm of the track file')
    .option('--at <TIME>', 'time on the track, such as 2031-09-03T12:00Z')
    .addOption(
      new Option('--to <FORMAT>', 'draw or tabulate, to standard output or --out').choices(['csv', 'svg', 'png']),
    )
    .option('--out <FILE>', 'where the drawing or table goes')
    .option('--force', 'replace an existing file')
    .action(async (options) => (await import('./profile.js')).profile(options));

  readsTracks(
    models(
      common(
        program
          .command('swath <FILE>')
          .description('Peak wind and gust over the life of a storm, isotachs, rasters and pictures.'),
      ),
    ),
  )
    .option('--from <TIME>', 'first time of the track to take')
    .option('--to <TIME>', 'last time of the track to take')
    .option('--levels <LIST>', 'isotachs', '34kt,50kt,64kt,83kt,96kt,113kt,137kt')
    .addOption(
      new Option('--of <QUANTITY>', 'what the isotachs are drawn from').choices(['wind', 'gust']).default('wind'),
    )
    .option('--bands', 'disjoint bands instead of at-or-above areas')
    .option('--crs <CRS>', 'coordinate reference system of the grid', 'EPSG:4326')
    .option('--bounds <W,S,E,N>', 'edges of the grid in its own units (fitted to the lowest level)')
    .option('--cell <SIZE>', 'cell size (0.02deg, or 2km in a projected CRS)')
    .option('--out <DIR>', 'folder of the results (./<storm>)')
    .option('--formats <LIST>', 'geojson, cog, csv, netcdf, kml, flatgeobuf, svg, png, html', 'geojson,cog')
    .option('--force', 'replace existing files')
    .option('--jobs <N>', 'workers (all cores)')
    .option('--land <LAND>', 'none, natural-earth, or a file of GeoJSON polygons: surface and decay over land', 'none')
    .option('--roughness <FILE>', 'GeoTIFF of roughness lengths, m, or of classes')
    .option('--roughness-classes <FILE>', 'CSV that maps the classes: class,z0_m')
    .option('--surface-bands', 'also land share, exposure class and roughness in peak.tif')
    .option('--places <FILE>', 'places to show on the map (CSV or GeoJSON)')
    .option('--zones <FILE>', 'zones to show on the map (GeoJSON polygons)')
    .action(async (file, options) => (await import('./swath.js')).swath(file, options));

  readsTracks(
    models(
      common(
        program
          .command('sites <FILE> <PLACES>')
          .description('The model’s wind at places: peaks, hours, closest approach, series.'),
      ),
    ),
  )
    .option('--levels <LIST>', 'winds whose hours are counted', '34kt,50kt,64kt')
    .option('--every <PERIOD>', 'also the series, at this interval (min)')
    .option('--land <LAND>', 'none, natural-earth, or a file of GeoJSON polygons: decay of the storm over land', 'none')
    .option('--from <TIME>', 'first time of the track to take')
    .option('--to <TIME>', 'last time of the track to take')
    .option('--strict', 'refuse rows that would otherwise be skipped')
    .addOption(
      new Option('--as <FORMAT>', 'table or drawing, to standard output or --out').choices([
        'csv',
        'geojson',
        'svg',
        'png',
      ]),
    )
    .option('--out <FILE>', 'where the table or drawing goes')
    .option('--force', 'replace an existing file')
    .action(async (file, places, options) => (await import('./sites.js')).sites(file, places, options));

  readsTracks(
    models(
      common(
        program
          .command('exposure <FILE> <ASSETS>')
          .description('What stands in the wind: assets and zones by level and class, damage by a curve of yours.'),
      ),
    ),
  )
    .option('--land <LAND>', 'none, natural-earth, or a file of GeoJSON polygons: decay of the storm over land', 'none')
    .option('--values <LIST>', 'columns of values (every column whose first cell is a number)')
    .option('--zones <FILE>', 'zones as GeoJSON polygons, with values or without')
    .option('--zone-values <LIST>', 'properties of the zones that are values (every number)')
    .option('--levels <LIST>', 'winds that are counted', '34kt,50kt,64kt,83kt,96kt,113kt,137kt')
    .addOption(new Option('--of <QUANTITY>', 'what the levels are for').choices(['wind', 'gust']).default('wind'))
    .option('--scale <NAME>', 'wind scale of the classes, or none (saffir-simpson for 1-min winds)')
    .option('--curve <FILE>', 'damage curve as CSV: wind_mps, wind_kt, wind_kmh or wind_mph (or gust_…), and ratio')
    .addOption(new Option('--curve-of <QUANTITY>', 'which wind the curve takes').choices(['wind', 'gust']))
    .option('--curve-averaging <PERIOD>', 'averaging period of the curve’s wind')
    .option('--cubic <THRESHOLD,HALF>', 'cubic curve of Emanuel 2011 (m/s); no built-in speeds')
    .option('--power <THRESHOLD,TOTAL,EXPONENT>', 'power of the wind above a threshold (m/s)')
    .option('--loss-of <LIST>', 'columns of values that the curve is applied to (all)')
    .option('--currency <WORDS>', 'what the values are in, in your words')
    .option('--from <TIME>', 'first time of the track to take')
    .option('--to <TIME>', 'last time of the track to take')
    .option('--strict', 'refuse rows and zones that would otherwise be skipped or taken with a caution')
    .option('--out <DIR>', 'folder of the results; without it they are only shown')
    .option('--formats <LIST>', 'csv, geojson, json (csv,json)')
    .option('--force', 'replace existing files')
    .addHelpText(
      'after',
      '\nDamage figures are indicative: they defer to licensed engineers and local codes.\nThe wind at an asset is the model’s over open sea at that very point. With a radius of maximum wind of 25 km a\ngrid of 0.02°, read between its cells, differs from it by less than 0.3 m/s at 99 of 100 places near the track\nand by 0.5 m/s at most; its nearest cell by up to 2.5 m/s. A smaller radius or a larger cell differs more.\nLevels, classes and sums are taken from winds as they are written, with three decimals.\n',
    )
    .action(async (file, assets, options) => (await import('./exposure.js')).exposure(file, assets, options));

  readsTracks(
    models(
      common(
        program
          .command('verify <FILES...>')
          .description('Modelled against observed wind radii, radius of maximum wind and pressure.'),
      ),
    ),
  )
    .option('--hide <LIST>', 'observed values kept from the model: 34kt, 50kt, 64kt, rmax, pressure')
    .option('--without-radii', 'hide the three radii and the radius of maximum wind')
    .addOption(
      new Option('--as <FORMAT>', 'table or drawing, to standard output or --out').choices(['csv', 'svg', 'png']),
    )
    .option('--out <FILE>', 'where the table or drawing goes')
    .option('--force', 'replace an existing file')
    .action(async (files, options) => (await import('./verify.js')).verify(files, options));

  const events = program
    .command('events')
    .description('Event sets: many storms on one grid, return-period maps; on one machine or in a batch.')
    .exitOverride();
  const planned = (command: Command): Command =>
    models(common(command))
      .requiredOption('--out <RUN>', 'folder of the run')
      .option('--bounds <W,S,E,N>', 'edges of the grid')
      .option('--crs <CRS>', 'its coordinate reference system', 'EPSG:4326')
      .option('--cell <SIZE>', 'its cell size', '0.1deg')
      .option('--least <SPEED>', 'lowest wind that is kept', '34kt')
      .option('--columns <KEY=HEADING,...>', 'which heading of the table holds event, rate, time, lat_deg, …')
      .option('--years <N>', 'years that the set stands for: equal rates, where the table has none')
      .option('--rates <FILE>', 'rates a year in a second table: event,rate (CSV or Parquet)')
      .option('--places <FILE>', 'places whose closest approach the event table tells (CSV or GeoJSON)')
      .option(
        '--landfalls <LAND>',
        'natural-earth or GeoJSON polygons: first landfall in the event table; winds ignore it',
      )
      .option('--shards <N>', 'parts that the set is cut into (200 events each, 1000 at most)')
      .addOption(
        new Option('--bad-events <WHAT>', 'an event that cannot be modelled')
          .choices(['stop', 'set-aside'])
          .default('stop'),
      );
  planned(
    events
      .command('plan <INPUT>')
      .description('Cut an event set (CSV, Parquet, or a folder of track files) into shards.'),
  ).action(async (input, options) => {
    await (await import('./events.js')).plan(input, options);
  });
  planned(events.command('run <INPUT>').description('Plan, all shards on this machine, return-period maps.'))
    .option('--jobs <N>', 'processes (all cores)')
    .action(async (input, options) => (await import('./events.js')).run(input, options));
  common(
    events.command('shard <RUN> [INDEX]').description('One shard; its index also by SHARD_INDEX or a batch engine.'),
  ).action(async (folder, index, options) => (await import('./events.js')).shard(folder, index, options));
  common(events.command('missing <RUN>').description('Shards that are not done, or damaged.')).action(
    async (folder, options) => (await import('./events.js')).missing(folder, options),
  );
  common(events.command('reduce <RUN>').description('Return-period maps of all shards.')).action(
    async (folder, options) => (await import('./events.js')).reduce(folder, options),
  );

  common(
    events
      .command('curves <RUN>')
      .description('How often which wind comes to places: curves of exceedance with their sampling interval.'),
  )
    .requiredOption('--places <FILE>', 'places (CSV or GeoJSON), as of sites; each takes the wind of its cell')
    .addOption(new Option('--of <QUANTITY>', 'which wind').choices(['wind', 'gust']).default('wind'))
    .option('--confidence <PERCENT>', 'of the sampling interval, two-sided', '95')
    .addOption(
      new Option('--tail <FORM>', 'gpd: a generalised Pareto tail as well').choices(['none', 'gpd']).default('none'),
    )
    .option('--threshold <SPEED>', 'what the tail begins above (m/s; the highest tenth of events, 50 at least)')
    .option('--strict', 'refuse rows, and places outside the grid, that would otherwise be skipped')
    .option('--out <DIR>', 'folder of the results; without it they are only shown')
    .option('--formats <LIST>', 'csv, json, svg, png (csv,json,svg)')
    .option('--force', 'replace existing files')
    .addHelpText(
      'after',
      '\nWinds are those of the place’s cell over open sea. The interval is the exact one of a Poisson count for equal\nrates (Garwood 1936), a gamma interval for unequal ones (Fay & Feuer 1997): the chance of the set, not the error\nof set or model. A tail is fitted by probability-weighted moments (Hosking & Wallis 1987); beyond the length of\nthe set it is extrapolated.\n',
    )
    .action(async (folder, options) => (await import('./event-curves.js')).curves(folder, options));
  common(
    events
      .command('losses <RUN>')
      .description('What a portfolio loses: event losses, annual average, occurrence and aggregate exceedance.'),
  )
    .requiredOption('--assets <FILE>', 'assets (CSV or GeoJSON), as of exposure; each takes the wind of its cell')
    .option('--values <LIST>', 'columns of values (every column whose first cell is a number)')
    .option('--curve <FILE>', 'damage curve as CSV: wind_mps, wind_kt, wind_kmh or wind_mph (or gust_…), and ratio')
    .addOption(new Option('--curve-of <QUANTITY>', 'which wind the curve takes').choices(['wind', 'gust']))
    .option('--curve-averaging <PERIOD>', 'averaging period of the curve’s wind')
    .option('--cubic <THRESHOLD,HALF>', 'cubic curve of Emanuel 2011 (m/s); no built-in speeds')
    .option('--power <THRESHOLD,TOTAL,EXPONENT>', 'power of the wind above a threshold (m/s)')
    .option('--loss-of <LIST>', 'columns of values that the curve is applied to (all)')
    .option('--currency <WORDS>', 'what the values are in, in your words')
    .option('--simulate <YEARS>', 'years of the simulation of aggregate losses', '100000')
    .option('--seed <N>', 'of its random numbers', '1')
    .option('--strict', 'refuse rows, and assets outside the grid, that would otherwise be skipped')
    .option('--out <DIR>', 'folder of the results; without it they are only shown')
    .option('--formats <LIST>', 'csv, parquet, json (csv,json)')
    .option('--force', 'replace existing files')
    .addHelpText(
      'after',
      '\nOccurrence: the largest loss of a year, exact from the rates; aggregate: the sum of a year, by simulation with\nrandom numbers that the seed fixes. A return period here is one over the annual probability.\nDamage figures are indicative: they defer to licensed engineers and local codes. Event sets ignore land.\n',
    )
    .action(async (folder, options) => (await import('./event-losses.js')).losses(folder, options));
  common(events.command('show <RUN> <EVENT>').description('The full swath of one event.'))
    .option('--out <DIR>', 'folder of the results (./<event>)')
    .option('--formats <LIST>', 'as of swath', 'geojson,cog')
    .option('--force', 'replace existing files')
    .action(async (folder, id, options) => (await import('./events.js')).show(folder, id, options));
  common(
    events
      .command('submit <ENGINE> <RUN>')
      .description('A run as an array and its reduction: slurm submits it, kubernetes prints a manifest.'),
  )
    .option('--dry-run', 'print the scripts instead')
    .option('--command <COMMAND>', 'how galewake is called on the machines', 'galewake')
    .option('--tries <N>', 'how often missing shards are submitted once more', '3')
    .option('--image <IMAGE>', 'kubernetes: an image with galewake in it', 'registry.example/galewake')
    .option('--claim <NAME>', 'kubernetes: claim of a volume that all pods may write to', 'galewake')
    .option('--mount <DIR>', 'kubernetes: where that volume stands (the folder that holds run and input)')
    .action(async (engine, folder, options) => (await import('./event-submit.js')).submit(engine, folder, options));

  common(program.command('recipe').description('The recipe in force with its sources; check one.'))
    .option('--recipe <FILE>', 'read and check this recipe')
    .option('--set <KEY=VALUE>', 'one modelling choice; may be repeated', gather)
    .option('--schema', 'print the JSON Schema of a recipe')
    .action(async (options) => (await import('./recipe.js')).recipe(options));

  await guarded(async () => {
    try {
      await program.parseAsync(argv as string[]);
    } catch (error) {
      if (!(error instanceof CommanderError)) throw error;
      // commander has said what was wrong on standard error, or shown the help that was asked for
      process.exitCode = error.exitCode === 0 ? EXIT.done : EXIT.usage;
    }
  });
}
