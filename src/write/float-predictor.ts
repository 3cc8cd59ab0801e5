/** Edge of a tile, pixels. */
export const TILE = 256;
const TILE_BYTES = TILE * TILE * 4;

/**
 * One tile of a field of 32-bit floats, made ready for Deflate by the floating-point predictor (TIFF predictor 3)
 * [Adobe2005]: in every row the bytes are sorted by significance, most significant first, then each becomes its
 * difference from the one before it. Past the edge of the field its last column and row go on.
 * @param field bytes of a little-endian Float32 field, row 0 = north, index = row * nx + column
 */
export function predictedTile(
  field: Uint8Array,
  place: { nx: number; ny: number; column: number; row: number },
): Uint8Array {
  const { nx, ny } = place;
  const out = new Uint8Array(TILE_BYTES);
  const firstColumn = place.column * TILE;
  const firstRow = place.row * TILE;
  const columns = Math.min(TILE, nx - firstColumn);
  const rows = Math.min(TILE, ny - firstRow);
  for (let y = 0; y < rows; y++) {
    let from = ((firstRow + y) * nx + firstColumn) * 4;
    let to = y * TILE * 4;
    let p0 = 0;
    let p1 = 0;
    let p2 = 0;
    let p3 = 0;
    // the four planes are differenced on their own; the seams between them follow below
    for (const end = to + columns; to < end; to++, from += 4) {
      const b3 = field[from + 3]!;
      const b2 = field[from + 2]!;
      const b1 = field[from + 1]!;
      const b0 = field[from]!;
      out[to] = b3 - p3;
      out[to + TILE] = b2 - p2;
      out[to + 2 * TILE] = b1 - p1;
      out[to + 3 * TILE] = b0 - p0;
      p3 = b3;
      p2 = b2;
      p1 = b1;
      p0 = b0;
    }
    // a repeated last column has differences of zero, which is what the array holds; a plane starts where the last ended
    const start = y * TILE * 4;
    out[start + TILE] = out[start + TILE]! - p3;
    out[start + 2 * TILE] = out[start + 2 * TILE]! - p2;
    out[start + 3 * TILE] = out[start + 3 * TILE]! - p1;
  }
  const last = (rows - 1) * TILE * 4;
  for (let y = rows; y < TILE; y++) out.copyWithin(y * TILE * 4, last, last + TILE * 4);
  return out;
}
