/** Upper triangle of a QR factorisation by Householder reflections, with the turned right-hand side. */
export interface Triangle {
  /** Number of columns. */
  readonly n: number;
  /** R, row by row, n x n (below the diagonal: zeros). */
  readonly r: Float64Array;
  /** First n entries of Q' y. */
  readonly qty: Float64Array;
  /** Sum of squares of the rest of Q' y: what no combination of the columns explains. */
  readonly rest: number;
}

/**
 * Factorises the m x n matrix whose columns are `columns` (each of length m >= n) and turns `y` along with it.
 * Neither input is changed. Householder reflections as in Golub and Van Loan, Matrix Computations, algorithm 5.2.1.
 * `space` is overwritten: who factorises often hands over the same (n + 1) m numbers each time.
 */
export function triangularise(columns: readonly Float64Array[], y: Float64Array, space?: Float64Array): Triangle {
  const n = columns.length;
  const m = y.length;
  if (m < n) throw new RangeError(`triangularise: expected at least ${n} rows for ${n} columns, got ${m}`);
  const all = space ?? new Float64Array((n + 1) * m);
  const [rhs, ...work] = [y, ...columns].map((column, k) => {
    const copy = all.subarray(k * m, (k + 1) * m);
    copy.set(column);
    return copy;
  }) as [Float64Array, ...Float64Array[]];
  const r = new Float64Array(n * n);
  for (let k = 0; k < n; k++) {
    const v = work[k]!;
    let square = 0;
    for (let i = k; i < m; i++) square += v[i]! * v[i]!;
    const norm = Math.sqrt(square);
    const diagonal = v[k]! > 0 ? -norm : norm;
    r[k * n + k] = diagonal;
    if (norm === 0) continue;
    // v = x - diagonal e_k has v'v = 2 norm (norm + |x_k|), so that 2 / v'v needs no second pass.
    const beta = 1 / (norm * (norm + Math.abs(v[k]!)));
    v[k] = v[k]! - diagonal;
    for (let j = k + 1; j < n; j++) reflect(v, work[j]!, k, m, beta);
    reflect(v, rhs, k, m, beta);
    for (let j = k + 1; j < n; j++) r[k * n + j] = work[j]![k]!;
  }
  let rest = 0;
  for (let i = n; i < m; i++) rest += rhs[i]! * rhs[i]!;
  return { n, r, qty: rhs.slice(0, n), rest };
}

function reflect(v: Float64Array, x: Float64Array, from: number, to: number, beta: number): void {
  let dot = 0;
  for (let i = from; i < to; i++) dot += v[i]! * x[i]!;
  dot *= beta;
  for (let i = from; i < to; i++) x[i] = x[i]! - dot * v[i]!;
}

/** Solves R x = b by back substitution; null where R is singular to rounding (a diagonal below 1e-14 of the largest). */
export function solveUpper(r: Float64Array, n: number, b: Float64Array): Float64Array | null {
  if (!isRegular(r, n)) return null;
  const x = b.slice(0, n);
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i]!;
    for (let j = i + 1; j < n; j++) sum -= r[i * n + j]! * x[j]!;
    x[i] = sum / r[i * n + i]!;
  }
  return x;
}

/** Inverse of the upper triangle R, row by row; null where R is singular to rounding. */
export function invertUpper(r: Float64Array, n: number): Float64Array | null {
  if (!isRegular(r, n)) return null;
  const inverse = new Float64Array(n * n);
  for (let j = 0; j < n; j++) {
    inverse[j * n + j] = 1 / r[j * n + j]!;
    for (let i = j - 1; i >= 0; i--) {
      let sum = 0;
      for (let k = i + 1; k <= j; k++) sum += r[i * n + k]! * inverse[k * n + j]!;
      inverse[i * n + j] = -sum / r[i * n + i]!;
    }
  }
  return inverse;
}

function isRegular(r: Float64Array, n: number): boolean {
  let largest = 0;
  for (let i = 0; i < n; i++) largest = Math.max(largest, Math.abs(r[i * n + i]!));
  for (let i = 0; i < n; i++) if (!(Math.abs(r[i * n + i]!) > 1e-14 * largest)) return false;
  return true;
}
