/**
 * Exact area of polygons in the cells of a raster, by the signed areas to the right of each edge.
 * Columns run right, rows down, cells are unit squares. Rings that overlap count twice; opposite rings cancel.
 */
export interface Coverage {
  /** adds one directed edge; anything outside the raster may be given */
  readonly addEdge: (x0: number, y0: number, x1: number, y1: number) => void;
  /** covered area of each cell, times the sense of the rings: −1 for rings that run anticlockwise on a page with y up */
  readonly areas: () => Float64Array;
}

export function coverage(nx: number, ny: number): Coverage {
  const width = nx + 1;
  // cell c of a row holds the change of covered area from c − 1 to c; the sum along the row gives the areas
  const change = new Float64Array(width * ny);

  /** an edge inside 0 ≤ x ≤ nx and 0 ≤ y ≤ ny, downward; `sense` tells its direction */
  function addInside(ax: number, ay: number, bx: number, by: number, sense: number): void {
    const slope = (bx - ax) / (by - ay);
    const lastRow = Math.min(ny - 1, Math.ceil(by) - 1);
    for (let row = Math.floor(ay); row <= lastRow; row++) {
      const top = Math.max(ay, row);
      const bottom = Math.min(by, row + 1);
      if (bottom <= top) continue;
      const start = row * width;
      let left = Math.min(nx, Math.max(0, ax + (top - ay) * slope));
      let right = Math.min(nx, Math.max(0, ax + (bottom - ay) * slope));
      if (left > right) [left, right] = [right, left];
      const height = sense * (bottom - top);
      const first = Math.floor(left);
      const last = Math.max(first, Math.ceil(right) - 1);
      if (first === last) {
        const inner = height * (0.5 * (left + right) - first);
        change[start + first]! += height - inner;
        if (first < nx) change[start + first + 1]! += inner;
        continue;
      }
      // area covered to the left of column c grows as a parabola, a line, a parabola along the slanted edge
      const perColumn = height / (right - left);
      let before = 0;
      let beforeChange = 0;
      for (let column = first; column <= last + 1; column++) {
        let area: number;
        if (column > last) area = height;
        else {
          const from = Math.max(left, column);
          const to = Math.min(right, column + 1);
          const passed = perColumn * (from - left);
          const within = perColumn * (to - from);
          // inside this column: what passed before covers it whole, what passes here covers it to the right
          area = passed + within * (column + 1 - 0.5 * (from + to));
        }
        beforeChange = area - before;
        if (column <= nx) change[start + column]! += beforeChange;
        before = area;
      }
    }
  }

  function addEdge(x0: number, y0: number, x1: number, y1: number): void {
    if (y0 === y1) return;
    const sense = y0 < y1 ? 1 : -1;
    let [ax, ay, bx, by] = sense === 1 ? [x0, y0, x1, y1] : [x1, y1, x0, y0];
    if (by <= 0 || ay >= ny || (ax >= nx && bx >= nx)) return;
    const slope = (bx - ax) / (by - ay);
    if (ay < 0) [ax, ay] = [ax - ay * slope, 0];
    if (by > ny) [bx, by] = [bx + (ny - by) * slope, ny];
    // cut at the left and right border: left of the raster an edge covers every cell of its rows, right of it none
    const cuts = [ay];
    for (const border of [0, nx]) if ((ax - border) * (bx - border) < 0) cuts.push(ay + (border - ax) / slope);
    cuts.push(by);
    if (cuts.length === 4 && cuts[1]! > cuts[2]!) [cuts[1], cuts[2]] = [cuts[2]!, cuts[1]!];
    for (let i = 0; i + 1 < cuts.length; i++) {
      const [from, to] = [Math.min(Math.max(cuts[i]!, ay), by), Math.min(Math.max(cuts[i + 1]!, ay), by)];
      if (to <= from) continue;
      const middle = ax + (0.5 * (from + to) - ay) * slope;
      if (middle >= nx) continue;
      if (middle <= 0) addInside(0, from, 0, to, sense);
      else addInside(ax + (from - ay) * slope, from, ax + (to - ay) * slope, to, sense);
    }
  }

  function areas(): Float64Array {
    const out = new Float64Array(nx * ny);
    for (let row = 0; row < ny; row++) {
      let sum = 0;
      for (let column = 0; column < nx; column++) {
        sum += change[row * width + column]!;
        out[row * nx + column] = sum;
      }
    }
    return out;
  }
  return { addEdge, areas };
}
