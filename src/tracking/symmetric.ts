/**
 * Solves the symmetric positive system A x = b of n unknowns in place by Cholesky: b becomes x, the lower triangle of A
 * (row by row) becomes its factor L. False, with both spoilt, where A is singular.
 */
export function solveSymmetric(a: Float64Array, b: Float64Array, n: number): boolean {
  for (let j = 0; j < n; j++) {
    let d = a[j * n + j]!;
    const before = d;
    for (let k = 0; k < j; k++) d -= a[j * n + k]! ** 2;
    if (!(d > 1e-12 * before)) return false;
    d = Math.sqrt(d);
    a[j * n + j] = d;
    for (let i = j + 1; i < n; i++) {
      let s = a[i * n + j]!;
      for (let k = 0; k < j; k++) s -= a[i * n + k]! * a[j * n + k]!;
      a[i * n + j] = s / d;
    }
  }
  for (let i = 0; i < n; i++) {
    let s = b[i]!;
    for (let k = 0; k < i; k++) s -= a[i * n + k]! * b[k]!;
    b[i] = s / a[i * n + i]!;
  }
  for (let i = n - 1; i >= 0; i--) {
    let s = b[i]!;
    for (let k = i + 1; k < n; k++) s -= a[k * n + i]! * b[k]!;
    b[i] = s / a[i * n + i]!;
  }
  return true;
}

/** Diagonal element `which` of the inverse of L Lt, L the lower triangle left by `solveSymmetric`. */
export function diagonalOfInverse(l: Float64Array, n: number, which: number): number {
  const z = new Float64Array(n);
  let sum = 0;
  for (let i = which; i < n; i++) {
    let s = i === which ? 1 : 0;
    for (let k = which; k < i; k++) s -= l[i * n + k]! * z[k]!;
    z[i] = s / l[i * n + i]!;
    sum += z[i]! ** 2;
  }
  return sum;
}
