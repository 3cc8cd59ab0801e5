import { InputError } from '../errors.js';

/** A feature as it stands in a GeoJSON file   [RFC7946]; nothing in it is checked yet. */
export interface Feature {
  readonly type?: unknown;
  readonly id?: unknown;
  readonly geometry?: { readonly type?: unknown; readonly coordinates?: unknown } | null;
  readonly properties?: Readonly<Record<string, unknown>> | null;
}

/** Reads the features of a GeoJSON text one by one: pieces are pushed in, features are handed out. */
export interface FeatureReader {
  readonly push: (piece: string) => void;
  /** @throws InputError `geojson.syntax`, `geojson.collection` */
  readonly end: () => void;
}

const QUOTE = 34;
const BACKSLASH = 92;
const OPEN = 123;
const CLOSE = 125;
const OPEN_LIST = 91;
const CLOSE_LIST = 93;
/** Longest single feature, characters. */
const LONGEST_FEATURE = 1 << 26;

/**
 * A reader that holds one feature at a time, so that a file may be larger than memory. What stands around the features
 * is parsed as a whole at the end.
 */
export function featureReader(source: string, onFeature: (feature: Feature, number: number) => void): FeatureReader {
  // depth of braces and brackets; features are the objects at depth 2 in the list of the member `features`
  let depth = 0;
  let inText = false;
  let escaped = false;
  let member = '';
  let lastText = '';
  let textFrom = -1;
  let listOfFeatures = false;
  let shell = '';
  let feature: string[] | null = null;
  let featureSize = 0;
  let number = 0;

  const parse = (text: string, what: string): unknown => {
    try {
      return JSON.parse(text);
    } catch (cause) {
      throw new InputError('geojson.syntax', `${source}: ${what} is not valid JSON (${(cause as Error).message})`, {
        cause,
      });
    }
  };

  return {
    push(piece) {
      let from = 0;
      for (let i = 0; i < piece.length; i++) {
        const c = piece.charCodeAt(i);
        if (inText) {
          if (escaped) escaped = false;
          else if (c === BACKSLASH) escaped = true;
          else if (c === QUOTE) {
            inText = false;
            if (depth === 1) lastText += piece.slice(Math.max(textFrom, 0), i);
          }
          if (inText && i === piece.length - 1 && depth === 1) lastText += piece.slice(Math.max(textFrom, 0));
          continue;
        }
        if (c === QUOTE) {
          inText = true;
          textFrom = i + 1;
          if (depth === 1) lastText = '';
        } else if (c === OPEN || c === OPEN_LIST) {
          if (c === OPEN && depth === 2 && listOfFeatures) {
            shell += piece.slice(from, i);
            from = i;
            feature = [];
            featureSize = 0;
          }
          if (depth === 1) {
            member = lastText;
            listOfFeatures = c === OPEN_LIST && member === 'features';
          }
          depth++;
        } else if (c === CLOSE || c === CLOSE_LIST) {
          depth--;
          if (depth === 2 && feature !== null && c === CLOSE) {
            feature.push(piece.slice(from, i + 1));
            from = i + 1;
            number++;
            const text = feature.length === 1 ? feature[0]! : feature.join('');
            feature = null;
            onFeature(parse(text, `feature ${number}`) as Feature, number);
            // a placeholder keeps the list valid
            shell += '0';
          } else if (depth === 1) listOfFeatures = false;
        }
      }
      textFrom = -1;
      if (feature !== null) {
        feature.push(piece.slice(from));
        featureSize += piece.length - from;
        if (featureSize > LONGEST_FEATURE)
          throw new InputError(
            'geojson.size',
            `${source}: feature ${number + 1} is longer than 64 MB of text; split it`,
          );
      } else shell += piece.slice(from);
      // commas and placeholders of a million features add up to little, but other members may be long
      if (shell.length > 2 * LONGEST_FEATURE)
        throw new InputError('geojson.size', `${source}: holds too much besides its features to be read`);
    },
    end() {
      if (feature !== null)
        throw new InputError(
          'geojson.syntax',
          `${source}: ends in the middle of feature ${number + 1}; is it cut off?`,
        );
      const document = (parse(shell, 'the file') ?? {}) as { type?: unknown; features?: unknown; crs?: unknown };
      if (document.type === 'Feature') {
        onFeature(document as Feature, 1);
        return;
      }
      if (document.type !== 'FeatureCollection' || !Array.isArray(document.features))
        throw new InputError(
          'geojson.collection',
          `${source}: is no GeoJSON FeatureCollection; wrap the geometries into features`,
        );
      const crs = (document.crs as { properties?: { name?: unknown } } | undefined)?.properties?.name;
      if (typeof crs === 'string' && !/CRS84|:4326$|:4979$/i.test(crs))
        throw new InputError(
          'geojson.crs',
          `${source}: its coordinates are in ${crs}; GeoJSON has longitude and latitude on WGS 84: convert it first`,
        );
    },
  };
}

/** All features of a text at once; see {@link featureReader}. */
export function featuresOf(text: string, source: string): readonly Feature[] {
  const features: Feature[] = [];
  const reader = featureReader(source, (feature) => features.push(feature));
  reader.push(text);
  reader.end();
  return features;
}
