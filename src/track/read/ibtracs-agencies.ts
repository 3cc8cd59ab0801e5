import { UsageError } from '../../errors.js';
import { didYouMean } from '../../nearest.js';
import type { ReadOptions } from '../track.js';
import { shown } from './checks.js';

/** An agency of IBTrACS: the prefix of its columns and the averaging period of its winds. */
export interface Agency {
  readonly prefix: string;
  readonly averagingS: number;
}

/**
 * In the order in which they are asked when nobody says otherwise. WMO is the agency that is responsible for the basin.
 * Averaging periods as IBTrACS documents them [KnappEtAl2010], from memory: 1 min in the United States, 2 in China,
 * 3 in New Delhi, 10 elsewhere.
 */
const AGENCIES: readonly Agency[] = [
  { prefix: 'USA', averagingS: 60 },
  { prefix: 'WMO', averagingS: 600 },
  { prefix: 'TOKYO', averagingS: 600 },
  { prefix: 'REUNION', averagingS: 600 },
  { prefix: 'BOM', averagingS: 600 },
  { prefix: 'NADI', averagingS: 600 },
  { prefix: 'WELLINGTON', averagingS: 600 },
  { prefix: 'NEWDELHI', averagingS: 180 },
  { prefix: 'CMA', averagingS: 120 },
  { prefix: 'HKO', averagingS: 600 },
  { prefix: 'KMA', averagingS: 600 },
  { prefix: 'DS824', averagingS: 600 },
  { prefix: 'TD9636', averagingS: 600 },
  { prefix: 'TD9635', averagingS: 600 },
  { prefix: 'NEUMANN', averagingS: 600 },
  { prefix: 'MLC', averagingS: 600 },
];

/** Averaging period of the agency that WMO_AGENCY names, s; undefined when it is not known. */
export function periodOfSource(source: string): number | undefined {
  const name = source.toLowerCase();
  if (/^(hurdat|nhc|cphc|jtwc|atcf|tcvitals|usa)/.test(name)) return 60;
  return AGENCIES.find(({ prefix }) => prefix !== 'WMO' && name.startsWith(prefix.toLowerCase()))?.averagingS;
}

/**
 * The agencies that are asked, in order, of those that the file has.
 * @throws UsageError `track.agency` for an agency that the file has no columns of
 */
export function agenciesOf(columns: ReadonlyMap<string, number>, options: ReadOptions): readonly Agency[] {
  const present = AGENCIES.filter(({ prefix }) => columns.has(`${prefix}_WIND`));
  if (!options.agencies) return present;
  const names = present.map(({ prefix }) => prefix);
  return options.agencies.map((asked) => {
    const agency = present.find(({ prefix }) => prefix === asked.trim().toUpperCase());
    if (agency) return agency;
    throw new UsageError(
      'track.agency',
      `${options.source}: has no agency '${shown(asked)}'${didYouMean(asked, names)}; it has ${names.join(', ')}`,
      { fields: { agency: shown(asked) } },
    );
  });
}
