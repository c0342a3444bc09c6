/**
 * Sum of the products of `a` and `b`, entries `from` up to but not `to`. In four partial sums: a single one would wait for itself at
 * every entry.
 */
export function dot(a: Float64Array, b: Float64Array, from = 0, to: number = a.length): number {
  let [s0, s1, s2, s3] = [0, 0, 0, 0];
  let i = from;
  for (; i + 3 < to; i += 4) {
    s0 += a[i]! * b[i]!;
    s1 += a[i + 1]! * b[i + 1]!;
    s2 += a[i + 2]! * b[i + 2]!;
    s3 += a[i + 3]! * b[i + 3]!;
  }
  for (; i < to; i++) s0 += a[i]! * b[i]!;
  return s0 + s1 + (s2 + s3);
}

/** Takes `factor` times `b` off `a`, in place, entries `from` up to but not `to`. */
export function subtract(a: Float64Array, b: Float64Array, factor: number, from = 0, to: number = a.length): void {
  for (let i = from; i < to; i++) a[i] = a[i]! - factor * b[i]!;
}
