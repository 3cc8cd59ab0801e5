/** The size S that is taken where no radius of 34 kt is known; own choice. */
const UNKNOWN_SIZE = 0.5;

/** V500c (kt): the wind 500 km out of a storm of average size   [KnaffZehr2007, from memory]. */
export function climatologicalWindAt500Km(maxWindKt: number, latDeg: number): number {
  const dLat = Math.abs(latDeg) - 25;
  const rc = 66.785 - 0.09102 * maxWindKt + 1.0619 * dLat;
  const x = 0.1147 + 0.0055 * maxWindKt - 0.001 * dLat;
  return maxWindKt * (rc / 500) ** x;
}

/** S = V500/V500c from the mean radius of 34 kt: V500 = R34/9 − 3 (kt, nmi), S ≥ 0.4   [CourtneyKnaff2009, from memory]. */
export function sizeFromRadius(radiusOf34KtNmi: number, maxWindKt: number, latDeg: number): number {
  return Math.max(0.4, (radiusOf34KtNmi / 9 - 3) / climatologicalWindAt500Km(maxWindKt, latDeg));
}

/** S of a storm: from its radius of 34 kt where that is known, else 0.5. */
export function sizeOf(maxWindKt: number, storm: { radiusOf34KtM: number | null; latDeg: number }): number {
  return storm.radiusOf34KtM === null
    ? UNKNOWN_SIZE
    : sizeFromRadius(storm.radiusOf34KtM / 1852, maxWindKt, storm.latDeg);
}

/** What `sizeOf` had to assume, for the origin of a value. */
export function sizeNote(storm: { radiusOf34KtM: number | null }): string | null {
  return storm.radiusOf34KtM === null ? `no radius of 34 kt: size S = ${UNKNOWN_SIZE}` : null;
}

/** Storm-relative wind (kt): V − 1.5 c^0.63, c the translation in kt   [SchwerdtHoWatkins1979, from memory]. */
export function stormRelativeWindKt(maxWindKt: number, translationKt: number): number {
  return maxWindKt - 1.5 * translationKt ** 0.63;
}
