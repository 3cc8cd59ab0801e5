import type { ProfileMethod } from './profile.js';

/** V = V_m s inside R (rigid rotation), V_m/s outside (rV constant, no vorticity), s = r/R   [Rankine1882, from memory]. */
export const rankine: ProfileMethod = {
  id: 'rankine',
  title: 'Rankine combined vortex: rigid core, irrotational outside',
  source: 'Rankine1882',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM }) => ({
    windMps: (radiusM) => {
      const s = radiusM / radiusOfMaxWindM;
      return s <= 1 ? maxWindMps * s : maxWindMps / s;
    },
  }),
};
