import { holland1980 } from './holland1980.js';
import { modifiedRankine } from './modified-rankine.js';
import type { ProfileMethod } from './profile.js';
import { rankine } from './rankine.js';

/** Every profile that a recipe may name, in the order of help texts. */
export const PROFILES: readonly ProfileMethod[] = [rankine, modifiedRankine, holland1980];

export function profileMethod(id: string): ProfileMethod | undefined {
  return PROFILES.find((method) => method.id === id);
}
