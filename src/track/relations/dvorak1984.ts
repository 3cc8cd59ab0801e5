import { knots, toKnots } from '../../units.js';
import type { PressureWindInput, PressureWindRelation } from './pressure-wind.js';

/**
 * Current intensity number, maximum wind (1-min mean, kt) and central pressure (hPa) in the Atlantic and in the western North
 * Pacific   [Dvorak1984, from memory].
 */
export const DVORAK_TABLE: readonly (readonly [ci: number, kt: number, atlantic: number, pacific: number])[] = [
  [2, 30, 1009, 1000],
  [2.5, 35, 1005, 997],
  [3, 45, 1000, 991],
  [3.5, 55, 994, 984],
  [4, 65, 987, 976],
  [4.5, 77, 979, 966],
  [5, 90, 970, 954],
  [5.5, 102, 960, 941],
  [6, 115, 948, 927],
  [6.5, 127, 935, 914],
  [7, 140, 921, 898],
  [7.5, 155, 906, 879],
  [8, 170, 890, 858],
];

type Column = 'Atlantic' | 'western North Pacific';
/** Basins of the Atlantic column; all others have the Pacific one: common practice. */
const ATLANTIC_BASINS = ['NA', 'AL', 'EP', 'CP', 'SA', 'LS'];

/** The column for a storm: by its basin, else by place (north of the equator between 140° W and 20° E: Atlantic). */
export function dvorakColumn({
  basin,
  latDeg,
  lonDeg,
}: Pick<PressureWindInput, 'basin' | 'latDeg' | 'lonDeg'>): Column {
  const atlantic =
    basin === null ? latDeg > 0 && lonDeg > -140 && lonDeg < 20 : ATLANTIC_BASINS.includes(basin.toUpperCase());
  return atlantic ? 'Atlantic' : 'western North Pacific';
}

/** Straight lines through the rows, the first and the last one carried on. */
function along(x: readonly number[], y: readonly number[], at: number): number {
  const rising = x[1]! > x[0]!;
  let i = 0;
  while (i < x.length - 2 && (rising ? at > x[i + 1]! : at < x[i + 1]!)) i++;
  return y[i]! + ((y[i + 1]! - y[i]!) * (at - x[i]!)) / (x[i + 1]! - x[i]!);
}

const WINDS = DVORAK_TABLE.map(([, kt]) => kt);
const PRESSURES: Readonly<Record<Column, readonly number[]>> = {
  Atlantic: DVORAK_TABLE.map(([, , hpa]) => hpa),
  'western North Pacific': DVORAK_TABLE.map(([, , , hpa]) => hpa),
};

/**
 * Dvorak's table as a relation: straight lines between its rows; below 30 kt and above 170 kt the nearest line is carried on.
 * The pressures are absolute: the ambient one does not enter   [Dvorak1984, from memory].
 */
export const dvorak1984: PressureWindRelation = {
  id: 'dvorak-1984',
  title: 'Dvorak 1984: table by basin, Atlantic or western North Pacific',
  source: 'Dvorak1984',
  centralPressurePa: (maxWindMps, input) => 100 * along(WINDS, PRESSURES[dvorakColumn(input)], toKnots(maxWindMps)),
  maxWindMps: (pressurePa, input) => knots(Math.max(0, along(PRESSURES[dvorakColumn(input)], WINDS, pressurePa / 100))),
  note: (input) => `${dvorakColumn(input)} column${input.basin === null ? ' by place' : ''}`,
};
