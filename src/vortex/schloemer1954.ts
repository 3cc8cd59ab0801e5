import { hollandProfile } from './holland1980.js';
import type { ProfileMethod } from './profile.js';

/** p = p_c + Δp e^{−R/r}: the exponential profile whose B is 1   [Schloemer1954, from memory]. */
export const schloemer1954: ProfileMethod = {
  id: 'schloemer-1954',
  title: 'Schloemer 1954: exponential pressure profile, B = 1',
  source: 'Schloemer1954',
  kinematic: false,
  build: (input) => hollandProfile(input, 1),
};
