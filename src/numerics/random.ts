/** A seeded source of random numbers; the same seed gives the same sequence everywhere. */
export interface Random {
  /** Uniform in [0, 1), 53 bits. */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1. */
  gaussian(): number;
  /** Uniform whole number in [0, below). */
  integer(below: number): number;
}

/** xoshiro128** (Blackman and Vigna 2021, ACM Trans. Math. Softw. 47, 36), seeded through splitmix32; normal by the polar method. */
export function seededRandom(seed: number): Random {
  let state = seed >>> 0;
  const split = () => {
    state = (state + 0x9e3779b9) >>> 0;
    let z = state;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    return (z ^ (z >>> 16)) >>> 0;
  };
  let [a, b, c, d] = [split(), split(), split(), split()];
  const rotate = (x: number, k: number) => (x << k) | (x >>> (32 - k));
  const next = () => {
    const result = Math.imul(rotate(Math.imul(b, 5), 7), 9) >>> 0;
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = rotate(d, 11);
    return result;
  };
  const uniform = () => ((next() >>> 5) * 67108864 + (next() >>> 6)) / 9007199254740992;
  let spare: number | null = null;
  const gaussian = (): number => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const x = 2 * uniform() - 1;
      const y = 2 * uniform() - 1;
      const square = x * x + y * y;
      if (square > 0 && square < 1) {
        const factor = Math.sqrt((-2 * Math.log(square)) / square);
        spare = y * factor;
        return x * factor;
      }
    }
  };
  return { uniform, gaussian, integer: (below) => Math.floor(uniform() * below) };
}
