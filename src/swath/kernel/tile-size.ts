/** Most cells of one tile; whole groups of four. */
export const MOST_CELLS_OF_TILE = 256;
/** Most winds whose hours are counted. */
export const THRESHOLD_SLOTS = 8;
