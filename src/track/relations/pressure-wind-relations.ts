import { atkinsonHolliday1977 } from './atkinson-holliday1977.js';
import { courtneyKnaff2009 } from './courtney-knaff2009.js';
import { dvorak1984 } from './dvorak1984.js';
import { hollandPressure2008 } from './holland-pressure2008.js';
import { knaffZehr2007 } from './knaff-zehr2007.js';
import type { PressureWindRelation } from './pressure-wind.js';
import { pressure2016 } from './pressure2016.js';

/** Every pressure–wind relation that a recipe may name. */
export const PRESSURE_WIND_RELATIONS: readonly PressureWindRelation[] = [
  pressure2016,
  courtneyKnaff2009,
  knaffZehr2007,
  hollandPressure2008,
  dvorak1984,
  atkinsonHolliday1977,
];
