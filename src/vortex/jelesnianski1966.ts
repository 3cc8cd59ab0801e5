import type { ProfileMethod } from './profile.js';

/** V = V_m 2s/(1 + s²), s = r/R   [Jelesnianski1966, from memory]. Its cyclostrophic deficit is 2ρV_m². */
export const jelesnianski1966: ProfileMethod = {
  id: 'jelesnianski-1966',
  title: 'Jelesnianski 1966: V ∝ 2s/(1 + s²)',
  source: 'Jelesnianski1966',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM }) => ({
    windMps: (radiusM) => {
      const s = radiusM / radiusOfMaxWindM;
      return (2 * maxWindMps * s) / (1 + s * s);
    },
    kinksM: [],
  }),
};
