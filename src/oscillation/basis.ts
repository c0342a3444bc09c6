import { dot, subtract } from '../numerics/dot.ts';

/** Orthonormal columns that span given ones, each with the number of the column it was made from. */
export interface Basis {
  readonly q: readonly Float64Array[];
  readonly from: readonly number[];
}

/**
 * Orthonormal basis of the columns in the order given by `order`, by the modified Gram-Schmidt process, done twice where that takes most of a column away; a column of which the
 * earlier ones leave less than 1e-9 adds nothing. Vectors orthonormal already may come `before` them: they stand first in `q` and not in `from`.
 */
export function orthonormalBasis(
  columns: readonly Float64Array[],
  order: readonly number[],
  before: readonly Float64Array[] = [],
): Basis {
  const q = [...before];
  const from: number[] = [];
  for (const k of order) {
    const column = columns[k]!.slice();
    const length = Math.sqrt(dot(column, column));
    let norm = length;
    for (let pass = 0; pass === 0 || (pass === 1 && norm < 0.1 * length); pass++) {
      for (const other of q) subtract(column, other, dot(column, other));
      norm = Math.sqrt(dot(column, column));
    }
    if (!(norm > 1e-9 * length)) continue;
    for (let i = 0; i < column.length; i++) column[i] = column[i]! / norm;
    q.push(column);
    from.push(k);
  }
  return { q, from };
}
