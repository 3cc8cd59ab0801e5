import { UsageError } from '../errors.js';
import { readInputText } from '../io/input.js';
import { makeRecipe, type Recipe } from '../model/recipe.js';
import { nearest } from '../nearest.js';
import { TRACK_FORMATS } from '../track/read/detect.js';
import type { ReadTracksOptions } from '../track/read/read.js';
import { knots, quantityOf } from '../units.js';

/** Options as commander hands them over. */
export interface CommonOptions {
  readonly json?: boolean;
  readonly quiet?: boolean;
}

export interface ModelOptions {
  readonly recipe?: string;
  readonly set?: readonly string[];
  readonly wind?: string;
}

export interface TrackOptions {
  readonly storm?: string;
  readonly format?: string;
  readonly agency?: string;
  readonly technique?: string;
  readonly columns?: string;
  readonly sortTimes?: boolean;
}

/** The recipe in force: file, then --set, then the options that stand for an entry. */
export async function recipeOf(options: ModelOptions): Promise<Recipe> {
  const settings = [...(options.set ?? [])];
  if (options.wind !== undefined)
    settings.push(`wind.averaging_s=${quantityOf('duration', options.wind, { bareUnit: 's', name: '--wind' })}`);
  let document: unknown;
  if (options.recipe !== undefined) {
    const text = await readInputText(options.recipe);
    try {
      document = JSON.parse(text);
    } catch (cause) {
      throw new UsageError('recipe.json', `${options.recipe}: not valid JSON (${(cause as Error).message})`, { cause });
    }
  }
  return makeRecipe(document, settings, options.recipe ?? 'the recipe');
}

/** How to read the track file. */
export function readOptionsOf(options: TrackOptions): Omit<ReadTracksOptions, 'source'> {
  const columns: Record<string, string> = {};
  for (const pair of list(options.columns)) {
    const at = pair.indexOf('=');
    if (at < 1) throw new UsageError('columns', `--columns: '${pair}' is not key=heading`);
    columns[pair.slice(0, at)] = pair.slice(at + 1);
  }
  return {
    ...(options.agency === undefined ? {} : { agencies: list(options.agency) }),
    ...(options.technique === undefined ? {} : { technique: options.technique }),
    ...(options.columns === undefined ? {} : { columns }),
    ...(options.format === undefined ? {} : { format: oneOf(options.format, TRACK_FORMATS, '--format') }),
    ...(options.sortTimes ? { sortTimes: true } : {}),
  };
}

/** A list with commas, blanks trimmed, empty parts dropped. */
export function list(text: string | undefined): string[] {
  return (text ?? '')
    .split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
}

/** Levels of wind, m/s, rising, each once. */
export function levelsOf(text: string): number[] {
  const levels = list(text).map((part) => quantityOf('speed', part, { bareUnit: 'kt', name: '--levels' }));
  if (levels.length === 0) throw new UsageError('levels', '--levels: give at least one wind, such as 34kt,64kt');
  for (const level of levels) {
    if (!(level > 0 && level < knots(300)))
      throw new UsageError('levels', `--levels: ${level.toFixed(1)} m/s is not between 0 and 300 kt`);
  }
  return [...new Set(levels)].sort((a, b) => a - b);
}

/** A time such as 2031-09-03T12:00Z; UTC where no zone is written. */
export function timeOf(text: string, name: string): number {
  const match = /^(\d{4}-\d{2}-\d{2})(?:[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?)(Z|[+-]\d{2}:?\d{2})?)?$/i.exec(
    text.trim(),
  );
  const timeMs = match ? Date.parse(`${match[1]}T${match[2] ?? '00:00'}${match[3] ?? 'Z'}`) : Number.NaN;
  if (Number.isNaN(timeMs))
    throw new UsageError('time', `${name}: '${text}' is not a time; write it as 2031-09-03T12:00Z`);
  return timeMs;
}

/** One word of several, with the probable one for a near miss. */
export function oneOf<T extends string>(word: string, words: readonly T[], name: string): T {
  const found = words.find((candidate) => candidate === word.toLowerCase());
  if (found) return found;
  const near = nearest(word, words);
  throw new UsageError(
    'choice',
    `${name}: '${word}' is not one of ${words.join(', ')}${near ? `; did you mean ${near}?` : ''}`,
  );
}

/** A whole number of at least `least`. */
export function countOf(text: string, { name, least }: { name: string; least: number }): number {
  const count = Number(text);
  if (!Number.isInteger(count) || count < least)
    throw new UsageError('count', `${name}: '${text}' is not a whole number of at least ${least}`);
  return count;
}

/**
 * The part of a track between two times, either of which may be left open.
 * @throws UsageError `period`
 */
export function periodOf(
  from: string | undefined,
  to: string | undefined,
  path: { startMs: number; endMs: number },
  names: readonly [string, string],
): { fromMs: number; toMs: number } {
  const fromMs = from === undefined ? path.startMs : timeOf(from, names[0]);
  const toMs = to === undefined ? path.endMs : timeOf(to, names[1]);
  const span = `${new Date(path.startMs).toISOString()} to ${new Date(path.endMs).toISOString()}`;
  if (fromMs > toMs) throw new UsageError('period', `${names[0]} is after ${names[1]}; the track runs from ${span}`);
  if (toMs < path.startMs || fromMs > path.endMs) {
    throw new UsageError('period', `${names[0]} and ${names[1]} lie outside the track, which runs from ${span}`);
  }
  return { fromMs: Math.max(fromMs, path.startMs), toMs: Math.min(toMs, path.endMs) };
}
