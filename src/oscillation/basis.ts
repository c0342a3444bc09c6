/** Orthonormal columns that span given ones, each with the number of the column it was made from. */
export interface Basis {
  readonly q: readonly Float64Array[];
  readonly from: readonly number[];
}

/**
 * Orthonormal basis of the columns in the order given by `order`, by the modified Gram-Schmidt process done twice; a column of which the
 * earlier ones leave less than 1e-9 adds nothing.
 */
export function orthonormalBasis(columns: readonly Float64Array[], order: readonly number[]): Basis {
  const q: Float64Array[] = [];
  const from: number[] = [];
  for (const k of order) {
    const column = columns[k]!.slice();
    const before = Math.sqrt(dot(column, column));
    for (let pass = 0; pass < 2; pass++) for (const other of q) subtract(column, other, dot(column, other));
    const norm = Math.sqrt(dot(column, column));
    if (!(norm > 1e-9 * before)) continue;
    for (let i = 0; i < column.length; i++) column[i] = column[i]! / norm;
    q.push(column);
    from.push(k);
  }
  return { q, from };
}

/** Sum of products. */
export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

/** Takes `factor` times `b` off `a`, in place. */
export function subtract(a: Float64Array, b: Float64Array, factor: number): void {
  for (let i = 0; i < a.length; i++) a[i] = a[i]! - factor * b[i]!;
}
