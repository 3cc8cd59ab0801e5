import { calibrated2016 } from './calibrated2016.js';
import { chavasLinEmanuel2015 } from './chavas-lin-emanuel2015.js';
import { demaria1992 } from './demaria1992.js';
import { emanuelRotunno2011 } from './emanuel-rotunno2011.js';
import { fujita1952 } from './fujita1952.js';
import { hollandBelangerFritz2010 } from './holland-belanger-fritz2010.js';
import { holland1980 } from './holland1980.js';
import { holland2008 } from './holland2008.js';
import { jelesnianski1966 } from './jelesnianski1966.js';
import { modifiedRankine } from './modified-rankine.js';
import type { ProfileMethod } from './profile.js';
import { rankine } from './rankine.js';
import { schloemer1954 } from './schloemer1954.js';
import { takahashi1939 } from './takahashi1939.js';
import { willoughby2006 } from './willoughby2006.js';

/** Every profile that a recipe may name, in the order of help texts. */
export const PROFILES: readonly ProfileMethod[] = [
  calibrated2016,
  rankine,
  modifiedRankine,
  takahashi1939,
  fujita1952,
  schloemer1954,
  jelesnianski1966,
  holland1980,
  demaria1992,
  willoughby2006,
  holland2008,
  hollandBelangerFritz2010,
  emanuelRotunno2011,
  chavasLinEmanuel2015,
];

export function profileMethod(id: string): ProfileMethod | undefined {
  return PROFILES.find((method) => method.id === id);
}
