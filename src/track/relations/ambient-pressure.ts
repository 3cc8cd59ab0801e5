/** Ambient pressure by basin, hPa: common practice of the agencies, from memory. */
const BY_BASIN: Readonly<Record<string, number>> = {
  NA: 1013,
  AL: 1013,
  EP: 1011,
  CP: 1011,
  WP: 1010,
  NI: 1008,
  IO: 1008,
  SI: 1010,
  SP: 1008,
  SH: 1009,
  SA: 1012,
  LS: 1012,
};

/**
 * Ambient pressure, Pa: the outermost closed isobar + 2 hPa where given [CourtneyKnaff2009], else the basin's usual value,
 * else by place: 1013 hPa in the north Atlantic's longitudes, 1010 hPa elsewhere.
 */
export function ambientPressurePa(
  fix: { outerIsobarPa: number | null; latDeg: number; lonDeg: number },
  basin: string | null,
): { valuePa: number; by: string } {
  if (fix.outerIsobarPa !== null) return { valuePa: fix.outerIsobarPa + 200, by: 'outermost closed isobar + 2 hPa' };
  const known = basin === null ? undefined : BY_BASIN[basin.toUpperCase()];
  if (known !== undefined) return { valuePa: known * 100, by: `basin ${basin}, common practice` };
  const atlantic = fix.latDeg > 0 && fix.lonDeg > -100 && fix.lonDeg < 20;
  return { valuePa: atlantic ? 101_300 : 101_000, by: 'place, common practice' };
}
