/** What {@link randomNumbers} is, for a result that rests on it. */
export const RANDOM_NAME = 'xoshiro128** 1.1, seeded by splitmix32, 53 bits a number';

/**
 * Uniform numbers in 0 ≤ u < 1 with 53 bits, the same on every machine: xoshiro128** [BlackmanVigna2021, from memory].
 * @param seed a whole number; its four words of state come from splitmix32
 */
export function randomNumbers(seed: number): () => number {
  let mix = seed >>> 0;
  const word = (): number => {
    mix = (mix + 0x9e3779b9) | 0;
    let z = mix ^ (mix >>> 16);
    z = Math.imul(z, 0x21f0aaad);
    z ^= z >>> 15;
    z = Math.imul(z, 0x735a2d97);
    return (z ^ (z >>> 15)) >>> 0;
  };
  let [a, b, c, d] = [word(), word(), word(), word()];
  const turned = (x: number, by: number): number => (x << by) | (x >>> (32 - by));
  const next = (): number => {
    const result = Math.imul(turned(Math.imul(b, 5), 7), 9);
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = turned(d, 11);
    return result >>> 0;
  };
  return () => {
    const high = next() >>> 5;
    return (high * 67108864 + (next() >>> 6)) / 9007199254740992;
  };
}
