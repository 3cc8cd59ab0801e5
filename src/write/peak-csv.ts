import { wrapLongitude } from '../earth.js';
import { cellCentre, projection } from '../swath/grid.js';
import type { Swath } from '../swath/swath.js';
import { csvLine } from './csv-cell.js';
import { DecimalText, LONGEST_NUMBER } from './decimal-text.js';
import { peakBands } from './peak-bands.js';

/** Bytes of one piece. */
const PIECE = 1 << 18;

/**
 * `peak.csv` in pieces of about 256 kB, so that a large grid never stands in memory as text: a heading, then one row
 * for every cell with a wind above zero, from north to south and from west to east. Columns: `lon_deg`, `lat_deg` of the
 * cell's centre (longitude in −180…180), `x_m`, `y_m` on a projected grid, then the fields of {@link peakBands} with
 * their unit in the heading, rounded to their number of decimals. NaN is an empty cell.
 */
export function* peakCsv(swath: Swath): Generator<Uint8Array, void> {
  const { grid } = swath;
  const bands = peakBands(swath);
  const places = grid.geographic ? ['lon_deg', 'lat_deg'] : ['lon_deg', 'lat_deg', 'x_m', 'y_m'];
  const heading = [...places, ...bands.map((band) => band.heading)];
  const rowBytes = heading.length * LONGEST_NUMBER;
  yield new TextEncoder().encode(csvLine(heading));

  const { inverse } = projection(grid.crs);
  const fields = bands.map((band) => ({ values: band.values, decimals: band.decimals }));
  const wind = swath.windMps;
  let text = new DecimalText(PIECE + rowBytes);
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      if (!(wind[k]! > 0)) continue;
      const [x, y] = cellCentre(grid, column, row);
      if (grid.geographic) {
        text.number(wrapLongitude(x), 7);
        text.number(y, 7);
      } else {
        const [lonDeg, latDeg] = inverse(x, y);
        text.number(wrapLongitude(lonDeg), 7);
        text.number(latDeg, 7);
        text.number(x, 3);
        text.number(y, 3);
      }
      for (const { values, decimals } of fields) text.number(values[k]!, decimals);
      text.endRow();
      if (text.length >= PIECE) {
        yield text.bytes();
        text = new DecimalText(PIECE + rowBytes);
      }
    }
  }
  if (text.length > 0) yield text.bytes();
}
