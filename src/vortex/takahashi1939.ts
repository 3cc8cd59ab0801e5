import { pressureProfile } from './pressure-profile.js';
import type { ProfileMethod } from './profile.js';

/**
 * p = p_env − Δp/(1 + s), s = r/R   [Takahashi1939, from memory]. V_c² = (Δp/ρ) s/(1 + s)², at most Δp/4ρ.
 * The wind grows as √r next to the centre and falls as r^{−1/2}.
 */
export const takahashi1939: ProfileMethod = {
  id: 'takahashi-1939',
  title: 'Takahashi 1939: hyperbolic pressure profile',
  source: 'Takahashi1939',
  kinematic: false,
  build: (input) =>
    pressureProfile(input, { riseShare: (s) => s / (1 + s), windShare: (s) => s / ((1 + s) * (1 + s)) }),
};
