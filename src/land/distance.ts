import { EARTH_RADIUS_M, type Place, RADIANS } from '../earth.js';
import type { Land } from './land.js';
import { cellLonLat, type LandGrid, type LonLatBox } from './land-grid.js';
import { landFraction } from './mask.js';
import { nearestShore } from './nearest-shore.js';
import { shoreOf } from './shore.js';
import { shoreTree } from './shore-tree.js';

/** Distances to the shore of one land. Inland positive, offshore negative, m, along great circles on the mean sphere. */
export interface ShoreDistance {
  readonly at: (place: Place) => number;
  /**
   * Distance from every cell centre, nx*ny; NaN where a cell is nowhere on the Earth.
   * @param withinM farther cells get ±Infinity; searching near the shore only is faster
   */
  readonly onGrid: (grid: LandGrid, options?: { withinM?: number; fraction?: Float32Array }) => Float32Array;
}

/**
 * Prepares the shore of a land for distances (0.3 s for the 1:10 million coast of the world).
 * @param box only the shore that touches this box is known: enough where nothing farther is asked for
 */
export function shoreDistance(land: Land, { box }: { box?: LonLatBox } = {}): ShoreDistance {
  const shore = shoreOf(land, box);
  const tree = shoreTree(shore);

  function at(place: Place): number {
    const c = Math.cos(place.latDeg * RADIANS);
    const x = c * Math.cos(place.lonDeg * RADIANS);
    const y = c * Math.sin(place.lonDeg * RADIANS);
    const z = Math.sin(place.latDeg * RADIANS);
    const arc = tree.nearest(x, y, z, Number.POSITIVE_INFINITY);
    return (land.isLand(place) ? 1 : -1) * metres(arc < 0 ? Number.POSITIVE_INFINITY : tree.chordTo(arc, x, y, z));
  }

  function onGrid(
    grid: LandGrid,
    { withinM = Number.POSITIVE_INFINITY, fraction }: { withinM?: number; fraction?: Float32Array } = {},
  ): Float32Array {
    const share = fraction ?? landFraction(grid, land);
    const cells = nearestShore(grid, { shore, tree, within: withinM < HALF_AROUND_M ? chordSquared(withinM) : 4 });
    const out = new Float32Array(grid.nx * grid.ny);
    for (let row = 0, k = 0; row < grid.ny; row++) {
      for (let column = 0; column < grid.nx; column++, k++) {
        const chord2 = cells.chord2[k]!;
        if (Number.isNaN(chord2)) {
          out[k] = Number.NaN;
          continue;
        }
        let inland = share[k] === 1;
        if (!inland && share[k]! > 0) {
          const [lonDeg, latDeg] = cellLonLat(grid, column, row);
          inland = land.isLand({ latDeg, lonDeg });
        }
        out[k] = (inland ? 1 : -1) * metres(chord2);
      }
    }
    return out;
  }

  return { at, onGrid };
}

const HALF_AROUND_M = Math.PI * EARTH_RADIUS_M;

/** Arc of a squared chord on the unit sphere, m on the Earth. */
function metres(chord2: number): number {
  return chord2 === Number.POSITIVE_INFINITY
    ? chord2
    : 2 * EARTH_RADIUS_M * Math.asin(Math.min(1, 0.5 * Math.sqrt(chord2)));
}

function chordSquared(arcM: number): number {
  return (2 * Math.sin(arcM / (2 * EARTH_RADIUS_M))) ** 2;
}
