import { chavasKnaff2022 } from './chavas-knaff2022.js';
import { knaff2015 } from './knaff2015.js';
import type { RadiusRelation } from './radius-of-max-wind.js';
import { radius2016 } from './radius2016.js';
import { vickery2000, vickeryWadhera2008, vickeryWadheraGulf2008 } from './vickery-wadhera2008.js';
import { willoughby2006, willoughbyRahn2004 } from './willoughby2006.js';

/** Every relation for the radius of maximum wind that a recipe may name. */
export const RADIUS_RELATIONS: readonly RadiusRelation[] = [
  radius2016,
  willoughby2006,
  willoughbyRahn2004,
  vickery2000,
  vickeryWadhera2008,
  vickeryWadheraGulf2008,
  knaff2015,
  chavasKnaff2022,
];
