/** Coefficients of Lanczos's series with g = 7 for ln Γ; good to 1e-13 for x > 0 [Lanczos1964, from memory]. */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
] as const;

/** ln Γ(x), x > 0. */
export function lnGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - lnGamma(1 - x);
  const z = x - 1;
  const t = z + 7.5;
  let sum: number = LANCZOS[0];
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i]! / (z + i);
  return 0.5 * Math.log(2 * Math.PI) + (z + 0.5) * Math.log(t) - t + Math.log(sum);
}

/**
 * Regularised incomplete gamma function P(a, x), a > 0, x ≥ 0: its series below a + 1, else one less the continued fraction
 * [AbramowitzStegun1964, 6.5.29 and 6.5.31].
 */
export function gammaP(a: number, x: number): number {
  if (!(x > 0)) return 0;
  const scale = Math.exp(a * Math.log(x) - x - lnGamma(a));
  const most = 200 + 20 * Math.sqrt(a);
  if (x < a + 1) {
    let term = 1 / a;
    let sum = term;
    for (let n = 1; n < most && term > sum * 1e-16; n++) {
      term *= x / (a + n);
      sum += term;
    }
    return Math.min(1, sum * scale);
  }
  // Lentz's way of a continued fraction
  const tiny = 1e-300;
  let b = x + 1 - a;
  let c = 1 / tiny;
  let d = 1 / b;
  let h = d;
  for (let n = 1; n < most; n++) {
    const an = -n * (n - a);
    b += 2;
    d = an * d + b;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = b + an / c;
    if (Math.abs(c) < tiny) c = tiny;
    h *= d * c;
    if (Math.abs(d * c - 1) < 1e-16) break;
  }
  return Math.max(0, 1 - scale * h);
}

/** Quantile of the standard normal distribution to 5e-4 [AbramowitzStegun1964, 26.2.23]: good for a start. */
function roughNormalQuantile(p: number): number {
  const t = Math.sqrt(-2 * Math.log(Math.min(p, 1 - p)));
  const z =
    t - (2.515517 + 0.802853 * t + 0.010328 * t * t) / (1 + 1.432788 * t + 0.189269 * t * t + 0.001308 * t ** 3);
  return p < 0.5 ? -z : z;
}

/**
 * x with P(a, x) = p, for 0 < p < 1 and a ≥ 0.3; 0 for a = 0. Newton's steps from the cube of a normal quantile
 * [AbramowitzStegun1964, 26.4.17], halved where they leave what is known to hold x.
 */
export function gammaQuantile(a: number, p: number): number {
  if (a === 0) return 0;
  let [low, high] = [0, Number.POSITIVE_INFINITY];
  let x = Math.max(a * (1 - 1 / (9 * a) + roughNormalQuantile(p) / (3 * Math.sqrt(a))) ** 3, 1e-8);
  for (let i = 0; i < 200; i++) {
    const off = gammaP(a, x) - p;
    if (off < 0) low = x;
    else high = x;
    const density = Math.exp((a - 1) * Math.log(x) - x - lnGamma(a));
    let next = x - off / density;
    if (!(next > low && next < high)) next = high === Number.POSITIVE_INFINITY ? 2 * x + 1 : 0.5 * (low + high);
    if (Math.abs(next - x) <= 1e-13 * x) return next;
    x = next;
  }
  return x;
}
