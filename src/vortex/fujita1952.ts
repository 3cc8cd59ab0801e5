import { pressureProfile } from './pressure-profile.js';
import type { ProfileMethod } from './profile.js';

/**
 * p = p_env − Δp/√(1 + 2s²), s = r/R, R the radius of the cyclostrophic maximum (the original scale is R/√2)
 * [Fujita1952, from memory]. V_c² = (Δp/ρ) 2s²/(1 + 2s²)^{3/2}, at most 2·3^{−3/2} Δp/ρ. The wind falls as r^{−1/2}.
 */
export const fujita1952: ProfileMethod = {
  id: 'fujita-1952',
  title: 'Fujita 1952: algebraic pressure profile',
  source: 'Fujita1952',
  kinematic: false,
  build: (input) =>
    pressureProfile(input, {
      riseShare: (s) => 1 - 1 / Math.sqrt(1 + 2 * s * s),
      windShare: (s) => (2 * s * s) / (1 + 2 * s * s) ** 1.5,
    }),
};
