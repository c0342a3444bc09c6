/**
 * Complete elliptic integral of the first kind K(m) with parameter m = k² in [0, 1), by the arithmetic-geometric mean
 * (Abramowitz and Stegun, Handbook of Mathematical Functions, 17.6.3). RangeError outside.
 */
export function ellipticK(m: number): number {
  return integrals(m).k;
}

/** Complete elliptic integral of the second kind E(m) with parameter m = k² in [0, 1] (Abramowitz and Stegun 17.6.4). */
export function ellipticE(m: number): number {
  return m === 1 ? 1 : integrals(m).e;
}

function integrals(m: number): { k: number; e: number } {
  if (!(m >= 0 && m < 1)) throw new RangeError(`elliptic integral: expected a parameter m in [0, 1), got ${m}`);
  let a = 1;
  let b = Math.sqrt(1 - m);
  let c = Math.sqrt(m);
  let power = 0.5;
  let sum = power * c * c;
  while (Math.abs(c) > 1e-9) {
    c = (a - b) / 2;
    [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
    power *= 2;
    sum += power * c * c;
  }
  const k = Math.PI / (2 * ((a + b) / 2));
  return { k, e: k * (1 - sum) };
}
