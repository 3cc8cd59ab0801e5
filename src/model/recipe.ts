import { InputError, UsageError } from '../errors.js';
import { nearest } from '../nearest.js';
import { GUST_METHODS } from '../surface/gust-method.js';
import { INFLOWS } from '../surface/inflow.js';
import { DECAY_SETS } from '../surface/inland-decay.js';
import { KEPERT_2001 } from '../surface/kepert2001.js';
import { MOTION_WEIGHTS, MOTIONS } from '../surface/motion.js';
import { REDUCTIONS } from '../surface/reduction.js';
import { BLENDING_HEIGHT_M } from '../surface/roughness.js';
import { HOLLAND_B_RELATIONS } from '../track/relations/holland-b.js';
import { PRESSURE_WIND_RELATIONS } from '../track/relations/pressure-wind-relations.js';
import { RADIUS_RELATIONS } from '../track/relations/radius-relations.js';
import { SIZE_RELATIONS } from '../track/relations/size.js';
import { PROFILES } from '../vortex/profiles.js';

export type RecipeValue = string | number;

/** A method that a recipe may name. */
export interface RecipeMethod {
  readonly id: string;
  readonly title: string;
  readonly source: string;
}

/** One modelling choice: its name in a recipe, its default, what else it may be and where it comes from. */
export interface RecipeEntry {
  readonly key: string;
  readonly standard: RecipeValue;
  readonly help: string;
  /** key of the bibliography, or `common practice`, or `own choice` */
  readonly source: string;
  /** words that the value may be */
  readonly words?: readonly string[];
  /** published methods among the words, each with its own source */
  readonly methods?: readonly RecipeMethod[];
  /** bounds of a number; an entry may have both words and bounds */
  readonly range?: readonly [number, number];
}

const ids = (methods: readonly { readonly id: string }[]): readonly string[] => methods.map((method) => method.id);

/** Every modelling choice there is. The built-in recipe is the column of standards. */
export const RECIPE_ENTRIES: readonly RecipeEntry[] = [
  {
    key: 'wind.averaging_s',
    standard: 60,
    range: [60, 3600],
    help: 'averaging period of the sustained wind, s: 60, 120, 180, 600 or 3600',
    source: 'HarperKepertGinger2010',
  },
  {
    key: 'gust.duration_s',
    standard: 3,
    range: [3, 600],
    help: 'averaging period of the gust, s: 3, 60, 120, 180 or 600, below the sustained wind’s',
    source: 'HarperKepertGinger2010',
  },
  {
    key: 'gust.method',
    standard: 'wmo-2010',
    words: ids(GUST_METHODS),
    help: 'gust over the mean wind: table by exposure, from the roughness, or hurricanes over land',
    source: 'HarperKepertGinger2010',
  },
  {
    key: 'completion.pressure',
    standard: 'calibrated-pressure-2016',
    words: ids(PRESSURE_WIND_RELATIONS),
    methods: PRESSURE_WIND_RELATIONS,
    help: 'relation that gives a missing central pressure from the wind, or the wind from the pressure',
    source: 'own calibration',
  },
  {
    key: 'completion.rmax',
    standard: 'calibrated-rmax-2016',
    words: ids(RADIUS_RELATIONS),
    methods: RADIUS_RELATIONS,
    help: 'relation that gives a missing radius of maximum wind',
    source: 'ChavasKnaff2022',
  },
  {
    key: 'completion.size',
    standard: 'calibrated-size-2016',
    words: ids(SIZE_RELATIONS),
    methods: SIZE_RELATIONS,
    range: [20, 800],
    help: 'relation for the size: the radius of 17.5 m/s of the storm’s own wind; or a number, km',
    source: 'own calibration',
  },
  {
    key: 'completion.ambient_hpa',
    standard: 'basin',
    words: ['basin'],
    range: [980, 1040],
    help: 'ambient pressure where the track has none: outermost closed isobar + 2 hPa, else by basin; or a number',
    source: 'common practice',
  },
  {
    key: 'completion.b',
    standard: 'gradient-consistent',
    words: ['gradient-consistent', 'cyclostrophic', ...ids(HOLLAND_B_RELATIONS)],
    methods: HOLLAND_B_RELATIONS,
    range: [0.5, 3.5],
    help: 'Holland B where the track has none, limited to 0.8–2.5: by an identity or a relation; or a number',
    source: 'Holland1980',
  },
  {
    key: 'completion.sea_temperature_c',
    standard: 28,
    range: [10, 35],
    help: 'temperature of the sea, °C, for completion.b=vickery-wadhera-2008',
    source: 'own choice',
  },
  {
    key: 'completion.max_gap_h',
    standard: 24,
    range: [1, 240],
    help: 'longest gap between two fixes, h',
    source: 'own choice',
  },
  {
    key: 'path.interpolation',
    standard: 'monotone-cubic',
    words: ['monotone-cubic', 'linear'],
    help: 'between fixes: monotone cubic in time, or straight lines',
    source: 'FritschCarlson1980',
  },
  {
    key: 'vortex.profile',
    standard: 'calibrated-2016',
    words: ids(PROFILES),
    methods: PROFILES,
    help: 'radial profile of the gradient-level wind',
    source: 'own calibration',
  },
  {
    key: 'vortex.radii',
    standard: 'fit',
    words: ['fit', 'ignore'],
    help: 'observed wind radii of the track: the field is fitted to them, or they are left aside',
    source: 'own choice',
  },
  {
    key: 'vortex.exponent',
    standard: 0.5,
    range: [0.05, 1.5],
    help: 'outer exponent of the modified Rankine profile',
    source: 'common practice',
  },
  {
    key: 'vortex.size_exponent',
    standard: 0.5,
    range: [0.1, 2],
    help: 'size parameter d of the profile of DeMaria et al.',
    source: 'DeMariaEtAl1992',
  },
  {
    key: 'vortex.outer_wind_radius_km',
    standard: 'none',
    words: ['none'],
    range: [20, 1000],
    help: 'radius of the outer wind of the profile of Holland, Belanger & Fritz, km',
    source: 'HollandBelangerFritz2010',
  },
  {
    key: 'vortex.outer_wind_mps',
    standard: 17.5,
    range: [3, 60],
    help: 'the 10-m wind of the vortex alone at that radius, m/s',
    source: 'HollandBelangerFritz2010',
  },
  {
    key: 'vortex.exchange_ratio',
    standard: 0.9,
    range: [0.1, 1.9],
    help: 'C_k/C_d of the core of Emanuel & Rotunno',
    source: 'EmanuelRotunno2011',
  },
  {
    key: 'vortex.r0_km',
    standard: 'from-rmax',
    words: ['from-rmax'],
    range: [100, 3000],
    help: 'outer radius of the profile of Chavas, Lin & Emanuel, km; by default it follows from the radius of maximum wind',
    source: 'ChavasLinEmanuel2015',
  },
  {
    key: 'vortex.outer_drag',
    standard: 0.0015,
    words: ['donelan-2004'],
    range: [0.0003, 0.005],
    help: 'drag coefficient of its outer solution: a number, or by the wind after Donelan et al.',
    source: 'ChavasLinEmanuel2015',
  },
  {
    key: 'vortex.subsidence_mps',
    standard: 0.002,
    range: [0.0002, 0.02],
    help: 'radiative subsidence of its outer solution, m/s',
    source: 'ChavasLinEmanuel2015',
  },
  { key: 'vortex.density_kgm3', standard: 1.15, range: [0.8, 1.4], help: 'air density, kg/m³', source: 'Holland1980' },
  {
    key: 'vortex.maximum',
    standard: 'gradient',
    words: ['gradient', 'cyclostrophic'],
    help: 'which wind of the profile has the given maximum',
    source: 'Holland1980',
  },
  {
    key: 'vortex.radius_km',
    standard: 'auto',
    words: ['auto'],
    range: [50, 3000],
    help: 'outer radius of the model, km; the last tenth is tapered to zero',
    source: 'own choice',
  },
  {
    key: 'surface.reduction',
    standard: 'constant',
    words: ids(REDUCTIONS),
    methods: REDUCTIONS,
    help: '10-m over gradient-level wind at sea',
    source: 'Franklin2003',
  },
  {
    key: 'surface.factor',
    standard: 0.9,
    range: [0.3, 1.2],
    help: 'the ratio of the constant reduction',
    source: 'Franklin2003',
  },
  {
    key: 'surface.inflow',
    standard: 'sobey-1977',
    words: ids(INFLOWS),
    methods: INFLOWS,
    help: 'angle by which the 10-m wind is turned toward the centre',
    source: 'Sobey1977',
  },
  {
    key: 'surface.motion',
    standard: 'lin-chavas-2012',
    words: ids(MOTIONS),
    methods: MOTIONS,
    help: 'motion asymmetry: added to the vortex, or within its balance (georgiou-1985); vector takes the three entries below',
    source: 'LinChavas2012',
  },
  {
    key: 'surface.motion_fraction',
    standard: 0.55,
    range: [0, 1],
    help: 'share of the translation that is added (vector)',
    source: 'LinChavas2012',
  },
  {
    key: 'surface.motion_rotation_deg',
    standard: 20,
    range: [-90, 90],
    help: 'its turn from the heading, cyclonic positive (vector)',
    source: 'LinChavas2012',
  },
  {
    key: 'surface.motion_weight',
    standard: 'uniform',
    words: Object.keys(MOTION_WEIGHTS),
    help: 'how it fades with radius (vector)',
    source: 'LinChavas2012',
  },
  {
    key: 'surface.layer',
    standard: 'none',
    words: ['none', KEPERT_2001.id],
    methods: [KEPERT_2001],
    help: 'boundary layer that gives reduction, inflow and asymmetry of the motion in one, in place of the entries above',
    source: 'Kepert2001',
  },
  {
    key: 'surface.layer_diffusivity_m2ps',
    standard: 50,
    range: [5, 200],
    help: 'its vertical diffusivity, m²/s',
    source: 'Kepert2001',
  },
  {
    key: 'surface.layer_drag',
    standard: 0.002,
    range: [0.0005, 0.005],
    help: 'its drag coefficient',
    source: 'Kepert2001',
  },
  {
    key: 'surface.maximum',
    standard: 'kept',
    words: ['kept', 'added'],
    help: 'kept: the field’s maximum is the fix’s wind; added: the motion comes on top of it',
    source: 'own choice',
  },
  {
    key: 'land.surface',
    standard: 'on',
    words: ['on', 'off'],
    help: 'where land is given (--land): its roughness and exposure act on wind and gust; off: open sea everywhere',
    source: 'common practice',
  },
  {
    key: 'land.z0_m',
    standard: 0.1,
    range: [0.001, 5],
    help: 'roughness length of land where no raster says it, m: 0.1 is roughly open country',
    source: 'Wieringa1992',
  },
  {
    key: 'land.blending_m',
    standard: BLENDING_HEIGHT_M,
    range: [20, 200],
    help: 'height at which sea and land share one wind, m',
    source: 'Wieringa1976',
  },
  {
    key: 'land.coast_km',
    standard: 5,
    range: [0, 20],
    help: 'how deep inland a place still counts as coast, km',
    source: 'own choice',
  },
  {
    key: 'land.fetch_km',
    standard: 0,
    range: [0, 10],
    help: 'length of the way upwind over which the roughness is averaged, km; 0: the cell’s own',
    source: 'own choice',
  },
  {
    key: 'land.decay',
    standard: 'auto',
    words: ['auto', 'on', 'off'],
    help: 'where land is given (--land): decay of the storm over it; auto: for drawn, synthetic and forecast tracks, never for best tracks',
    source: 'KaplanDeMaria1995',
  },
  {
    key: 'land.decay_set',
    standard: 'kaplan-demaria-1995',
    words: ids(DECAY_SETS),
    help: 'coefficients of the decay: coasts south of 37° N, or New England',
    source: 'KaplanDeMaria1995',
  },
];

/** A complete recipe: every entry has a value. Keys are dotted, as in `--set`. */
export type Recipe = Readonly<Record<string, RecipeValue>>;

export const RECIPE_SCHEMA = 'galewake-recipe/1';

export const STANDARD_RECIPE: Recipe = Object.freeze(
  Object.fromEntries(RECIPE_ENTRIES.map((entry) => [entry.key, entry.standard])),
);

/** Where the value of an entry comes from: the source of the method that it names, else the entry's own. */
export function sourceOf(entry: RecipeEntry, value: RecipeValue): string {
  return entry.methods?.find(({ id }) => id === value)?.source ?? entry.source;
}

export function recipeNumber(recipe: Recipe, key: string): number {
  return recipe[key] as number;
}

export function recipeWord(recipe: Recipe, key: string): string {
  return recipe[key] as string;
}

function entryOf(key: string, where: string): RecipeEntry {
  const entry = RECIPE_ENTRIES.find((candidate) => candidate.key === key);
  if (entry) return entry;
  const near = nearest(
    key,
    RECIPE_ENTRIES.map((candidate) => candidate.key),
  );
  throw new InputError(
    'recipe.key',
    `${where}: there is no entry '${key}'${near ? `; did you mean '${near}'?` : '; `galewake recipe` lists them'}`,
    { fields: { key } },
  );
}

/** Checks one value and brings it to its type. */
function checkedValue(entry: RecipeEntry, value: unknown, where: string): RecipeValue {
  const may = [
    ...(entry.words ?? []),
    ...(entry.range ? [`a number from ${entry.range[0]} to ${entry.range[1]}`] : []),
  ].join(', ');
  const wrong = (): never => {
    const near = typeof value === 'string' && entry.words ? nearest(value, entry.words) : undefined;
    throw new InputError(
      'recipe.value',
      `${where}: ${entry.key} cannot be '${String(value)}'${near ? ` (did you mean '${near}'?)` : ''}; it may be ${may}`,
      { fields: { key: entry.key, value: String(value) } },
    );
  };
  if (typeof value === 'string' && entry.words?.includes(value)) return value;
  if (!entry.range || (typeof value !== 'number' && !(typeof value === 'string' && value.trim() !== '')))
    return wrong();
  const number = Number(value);
  return number >= entry.range[0] && number <= entry.range[1] ? number : wrong();
}

/**
 * The built-in recipe with some entries replaced.
 * @param document a recipe document (nested by group, e.g. `{"vortex": {"profile": "holland-1980"}}`) or undefined
 * @param settings `K=V` strings, later ones win
 * @throws InputError `recipe.key`, `recipe.value`, `recipe.document`, `recipe.refused`
 */
export function makeRecipe(document?: unknown, settings: readonly string[] = [], source = 'recipe'): Recipe {
  const recipe: Record<string, RecipeValue> = { ...STANDARD_RECIPE };
  if (document !== undefined) {
    if (typeof document !== 'object' || document === null || Array.isArray(document)) {
      throw new InputError(
        'recipe.document',
        `${source}: a recipe is a JSON object of groups, such as {"vortex": {"profile": "holland-1980"}}`,
      );
    }
    for (const [group, entries] of Object.entries(document)) {
      if (group === 'schema') {
        if (entries !== RECIPE_SCHEMA)
          throw new InputError('recipe.document', `${source}: schema '${String(entries)}' is not '${RECIPE_SCHEMA}'`);
        continue;
      }
      if (typeof entries !== 'object' || entries === null)
        throw new InputError('recipe.document', `${source}: '${group}' is not a group of entries`);
      for (const [name, value] of Object.entries(entries)) {
        const entry = entryOf(`${group}.${name}`, source);
        recipe[entry.key] = checkedValue(entry, value, source);
      }
    }
  }
  const asked = new Set<string>();
  for (const setting of settings) {
    const at = setting.indexOf('=');
    if (at < 1)
      throw new UsageError(
        'recipe.setting',
        `--set ${setting}: write KEY=VALUE, such as --set vortex.profile=holland-1980`,
      );
    const entry = entryOf(setting.slice(0, at).trim(), '--set');
    recipe[entry.key] = checkedValue(entry, setting.slice(at + 1).trim(), '--set');
    asked.add(entry.key);
  }
  refuseCombination(recipe, { source, asked });
  return Object.freeze(recipe);
}

/**
 * Combinations that would say the same thing twice or nothing at all. A built-in choice counts only where it was `asked` for:
 * a whole document names every entry.
 */
function refuseCombination(recipe: Recipe, { source, asked }: { source: string; asked: ReadonlySet<string> }): void {
  const refuse = (reason: string): never => {
    throw new InputError('recipe.refused', `${source}: ${reason}`);
  };
  const period = recipeNumber(recipe, 'wind.averaging_s');
  const gust = recipeNumber(recipe, 'gust.duration_s');
  if (![60, 120, 180, 600, 3600].includes(period))
    refuse(`wind.averaging_s is ${period}; the conversion table knows 60, 120, 180, 600 and 3600 s`);
  if (![3, 60, 120, 180, 600].includes(gust) || gust > period)
    refuse(
      `gust.duration_s is ${gust}; it may be 3, 60, 120, 180 or 600 s and not longer than wind.averaging_s (${period})`,
    );
  const motion = recipeWord(recipe, 'surface.motion');
  if (motion === 'none' && recipe['surface.maximum'] === 'added')
    refuse('surface.maximum=added has nothing to add with surface.motion=none');
  if (recipe['surface.layer'] === 'none') return;
  for (const key of ['surface.motion', 'surface.inflow', 'surface.reduction']) {
    if ((recipe[key] === STANDARD_RECIPE[key] && !asked.has(key)) || recipe[key] === 'none') continue;
    refuse(
      `surface.layer=${recipe['surface.layer']} already holds reduction, inflow and the asymmetry of the motion; ${key}=${recipe[key]} would count one of them twice: leave one of the two out`,
    );
  }
  if (recipe['surface.maximum'] === 'added')
    refuse(
      `surface.layer=${recipe['surface.layer']} holds the motion within the wind; surface.maximum=added cannot add it`,
    );
}

/** A recipe as the JSON document that `--recipe` reads. */
export function recipeDocument(recipe: Recipe): Record<string, unknown> {
  const document: Record<string, Record<string, RecipeValue> | string> = { schema: RECIPE_SCHEMA };
  for (const { key } of RECIPE_ENTRIES) {
    const [group, name] = key.split('.') as [string, string];
    document[group] ??= {};
    (document[group] as Record<string, RecipeValue>)[name] = recipe[key]!;
  }
  return document;
}

/** JSON Schema (2020-12) of a recipe document. */
export function recipeJsonSchema(): Record<string, unknown> {
  const groups: Record<string, { type: 'object'; additionalProperties: false; properties: Record<string, unknown> }> =
    {};
  for (const entry of RECIPE_ENTRIES) {
    const [group, name] = entry.key.split('.') as [string, string];
    const forms: unknown[] = [];
    if (entry.words) forms.push({ enum: entry.words });
    if (entry.range) forms.push({ type: 'number', minimum: entry.range[0], maximum: entry.range[1] });
    groups[group] ??= { type: 'object', additionalProperties: false, properties: {} };
    groups[group].properties[name] = {
      ...(forms.length === 1 ? (forms[0] as object) : { anyOf: forms }),
      default: entry.standard,
      description: entry.help,
    };
  }
  return {
    $schema: 'https://json-schema.org/draft/2020-12/schema',
    title: 'Galewake recipe',
    type: 'object',
    additionalProperties: false,
    properties: { schema: { const: RECIPE_SCHEMA }, ...groups },
  };
}
