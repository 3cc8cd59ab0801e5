// Fits coefficients so that the weighted sum of absolute residuals is least: Gauss–Newton steps on reweighted squares.

/**
 * @param residuals coefficients → residuals
 * @param steps finite differences of the coefficients
 * @param floor residuals below it are weighted as if they were it
 */
export function fitAbsolute({ start, residuals, steps, floor, weights }) {
  let c = [...start];
  let r = residuals(c);
  const w = weights ?? r.map(() => 1 / r.length);
  const cost = (values) => values.reduce((sum, value, i) => sum + w[i] * Math.abs(value), 0);
  let best = cost(r);
  let damping = 1e-3;
  for (let iteration = 0; iteration < 25; iteration++) {
    const columns = c.map((value, j) => {
      const moved = [...c];
      moved[j] = value + steps[j];
      const changed = residuals(moved);
      return changed.map((v, i) => (v - r[i]) / steps[j]);
    });
    const weight = r.map((value, i) => w[i] / Math.max(floor, Math.abs(value)));
    const normal = columns.map((a) => columns.map((b) => a.reduce((sum, v, i) => sum + weight[i] * v * b[i], 0)));
    const right = columns.map((a) => -a.reduce((sum, v, i) => sum + weight[i] * v * r[i], 0));
    let better = false;
    const before = best;
    for (let attempt = 0; attempt < 6 && !better; attempt++) {
      const damped = normal.map((row, i) => row.map((v, j) => (i === j ? v * (1 + damping) + 1e-12 : v)));
      const step = solve(damped, right);
      const next = c.map((value, j) => value + step[j]);
      const nextResiduals = residuals(next);
      const nextCost = cost(nextResiduals);
      if (nextCost < best) {
        c = next;
        r = nextResiduals;
        best = nextCost;
        better = true;
        damping = Math.max(1e-6, damping / 5);
      } else damping *= 6;
    }
    if (!better || before - best < 1e-5 * before) break;
  }
  return c;
}

/** Solves a small linear system by elimination with pivots. */
function solve(matrix, right) {
  const n = right.length;
  const a = matrix.map((row, i) => [...row, right[i]]);
  for (let i = 0; i < n; i++) {
    let pivot = i;
    for (let k = i + 1; k < n; k++) if (Math.abs(a[k][i]) > Math.abs(a[pivot][i])) pivot = k;
    [a[i], a[pivot]] = [a[pivot], a[i]];
    for (let k = i + 1; k < n; k++) {
      const factor = a[k][i] / a[i][i];
      for (let j = i; j <= n; j++) a[k][j] -= factor * a[i][j];
    }
  }
  const x = Array(n).fill(0);
  for (let i = n - 1; i >= 0; i--) {
    let sum = a[i][n];
    for (let j = i + 1; j < n; j++) sum -= a[i][j] * x[j];
    x[i] = sum / a[i][i];
  }
  return x;
}

/** `n 4758, mae 37.1, bias −0.3` */
export function score(errors) {
  const n = errors.length;
  const mae = errors.reduce((sum, e) => sum + Math.abs(e), 0) / n;
  const bias = errors.reduce((sum, e) => sum + e, 0) / n;
  return `n ${n}, mae ${mae.toFixed(2)}, bias ${bias.toFixed(2)}`;
}
