import { describe, expect, it } from 'vitest';
import { makeRecipe, RECIPE_ENTRIES, recipeJsonSchema, sourceOf } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { HOLLAND_B_RELATIONS } from '../../src/track/relations/holland-b.js';
import { PRESSURE_WIND_RELATIONS } from '../../src/track/relations/pressure-wind-relations.js';
import { RADIUS_RELATIONS } from '../../src/track/relations/radius-relations.js';
import { knots } from '../../src/units.js';
import { trackOf } from '../storms.js';

/** an invented storm: wind alone, pressure alone, both with radii of 34 kt */
const track = trackOf([
  { hours: 0, latDeg: 17, lonDeg: -55, maxWindMps: knots(80) },
  { hours: 6, latDeg: 18, lonDeg: -56, centralPressurePa: 96_500 },
  {
    hours: 12,
    latDeg: 19,
    lonDeg: -57.5,
    maxWindMps: knots(95),
    centralPressurePa: 96_000,
    windRadii: [{ thresholdMps: knots(34), radiiM: [220_000, 200_000, 150_000, 180_000] }],
  },
]);
const fixesOf = (...settings: string[]) => windModel(track, makeRecipe(undefined, settings)).completed.fixes;

describe('what fills a value is its origin', () => {
  it.each(PRESSURE_WIND_RELATIONS.map(({ id }) => id))('pressure and wind by %s', (id) => {
    const [first, second, third] = fixesOf(`completion.pressure=${id}`);
    expect(first!.centralPressurePa).toMatchObject({
      origin: 'estimated',
      by: expect.stringMatching(`^${id} from wind`),
    });
    expect(second!.maxWindMps).toMatchObject({
      origin: 'estimated',
      by: expect.stringMatching(`^${id} from pressure`),
    });
    expect(first!.centralPressurePa.value).toBeGreaterThan(93_000);
    expect(first!.centralPressurePa.value).toBeLessThan(99_000);
    expect(second!.maxWindMps.value).toBeGreaterThan(knots(65));
    expect(second!.maxWindMps.value).toBeLessThan(knots(110));
    expect(third!.centralPressurePa).toEqual({ value: 96_000, origin: 'given', by: null });
  });

  it('says what a relation had to assume', () => {
    expect(fixesOf('completion.pressure=knaff-zehr-2007')[0]!.centralPressurePa.by).toMatch(/no radius of 34 kt/);
    expect(fixesOf('completion.pressure=dvorak-1984')[0]!.centralPressurePa.by).toMatch(/Atlantic column by place/);
    // 5 hPa in 6 h at the second fix; none can be had at the first
    expect(fixesOf('completion.pressure=holland-2008')[0]!.centralPressurePa.by).toMatch(/trend not known/);
    expect(fixesOf('completion.pressure=holland-2008')[1]!.maxWindMps.by).toBe('holland-2008 from pressure');
    expect(fixesOf('completion.rmax=chavas-knaff-2022')[0]!.radiusOfMaxWindM.by).toMatch(/no radius of 34 kt/);
    expect(fixesOf('completion.rmax=chavas-knaff-2022')[2]!.radiusOfMaxWindM.by).toBe('chavas-knaff-2022');
  });

  it.each(RADIUS_RELATIONS.map(({ id }) => id))('radius of maximum wind by %s', (id) => {
    for (const { radiusOfMaxWindM } of fixesOf(`completion.rmax=${id}`)) {
      expect(radiusOfMaxWindM).toMatchObject({ origin: 'estimated', by: expect.stringMatching(`^${id}`) });
      expect(radiusOfMaxWindM.value).toBeGreaterThan(10_000);
      expect(radiusOfMaxWindM.value).toBeLessThan(120_000);
    }
  });

  it('keeps an estimated radius within bounds and says so', () => {
    const fast = trackOf([{ hours: 0, latDeg: 1, lonDeg: -30, maxWindMps: knots(185) }]);
    const recipe = makeRecipe(undefined, ['completion.rmax=knaff-2015']);
    const { radiusOfMaxWindM } = windModel(fast, recipe).completed.fixes[0]!;
    expect(radiusOfMaxWindM.by).toBe('knaff-2015, limited to 5–250 km');
    expect(radiusOfMaxWindM.value).toBe(5_000);
  });

  it('keeps an estimated pressure below the ambient one and says so', () => {
    const weak = trackOf([{ hours: 0, latDeg: 15, lonDeg: -50, maxWindMps: knots(25) }]);
    const recipe = makeRecipe(undefined, ['completion.pressure=dvorak-1984', 'completion.ambient_hpa=1008']);
    const { centralPressurePa } = windModel(weak, recipe).completed.fixes[0]!;
    expect(centralPressurePa.value).toBe(100_700);
    expect(centralPressurePa.by).toMatch(/limited to 1 hPa below the ambient pressure$/);
  });

  it.each(HOLLAND_B_RELATIONS.map(({ id }) => id))('B by %s', (id) => {
    for (const { hollandB } of fixesOf(`completion.b=${id}`)) {
      expect(hollandB).toMatchObject({ origin: 'estimated', by: expect.stringMatching(`^${id}`) });
      expect(hollandB.value).toBeGreaterThanOrEqual(0.8);
      expect(hollandB.value).toBeLessThanOrEqual(2.5);
    }
  });

  it('limits B to 0.8–2.5 and says so', () => {
    const deep = trackOf([{ hours: 0, latDeg: 15, lonDeg: -50, maxWindMps: knots(150), centralPressurePa: 84_000 }]);
    const of = (b: string) =>
      windModel(deep, makeRecipe(undefined, [`completion.b=${b}`])).completed.fixes[0]!.hollandB;
    expect(of('hubbert-1991')).toEqual({ value: 2.5, origin: 'estimated', by: 'hubbert-1991, limited to 0.8–2.5' });
    expect(of('1.7')).toEqual({ value: 1.7, origin: 'estimated', by: 'recipe' });
    const cold = makeRecipe(undefined, ['completion.b=vickery-wadhera-2008', 'completion.sea_temperature_c=20']);
    expect(windModel(deep, cold).completed.fixes[0]!.hollandB.value).not.toBe(of('vickery-wadhera-2008').value);
  });
});

describe('the recipe', () => {
  it('names the source of the relation in force, and its schema every relation', () => {
    const entry = RECIPE_ENTRIES.find(({ key }) => key === 'completion.pressure')!;
    expect(sourceOf(entry, 'dvorak-1984')).toBe('Dvorak1984');
    expect(sourceOf(entry, entry.standard)).toBe('own calibration');
    const schema = JSON.stringify(recipeJsonSchema());
    for (const { id } of [...PRESSURE_WIND_RELATIONS, ...RADIUS_RELATIONS, ...HOLLAND_B_RELATIONS])
      expect(schema).toContain(`"${id}"`);
    expect(() => makeRecipe(undefined, ['completion.rmax=vickery-wadhera-2009'])).toThrow(
      /did you mean 'vickery-wadhera-2008'/,
    );
  });
});
