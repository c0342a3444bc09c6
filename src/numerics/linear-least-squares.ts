import { invertUpper, solveUpper, triangularise } from './qr.ts';

/** Result of a linear least-squares fit y = sum of parameter k times column k. */
export interface LinearFit {
  readonly parameters: Float64Array;
  /** y less the fitted value, unweighted. */
  readonly residual: Float64Array;
  /** Sum of squares of the residuals, each divided by its `u` where these were given. */
  readonly sumOfSquares: number;
  /** Rows less columns. */
  readonly dof: number;
  /** (X'X)^-1, row by row, with rows divided by `u` where given: the covariance for unit variance. */
  readonly cofactor: Float64Array;
}

/**
 * Fits `y` by a combination of `columns` (each as long as `y`), by QR; with `u`, each row is divided by its standard
 * uncertainty. Null where the columns are linearly dependent to rounding; RangeError where there are fewer rows than columns.
 */
export function linearLeastSquares(
  columns: readonly Float64Array[],
  y: Float64Array,
  u?: Float64Array,
): LinearFit | null {
  const n = columns.length;
  const weighted = (column: Float64Array) => (u === undefined ? column : column.map((value, i) => value / u[i]!));
  const x = columns.map(weighted);
  const norm = x.map((column) => Math.sqrt(column.reduce((sum, value) => sum + value * value, 0)));
  if (norm.some((value) => !(value > 0))) return null;
  const triangle = triangularise(
    x.map((column, k) => column.map((value) => value / norm[k]!)),
    weighted(y),
  );
  const scaled = solveUpper(triangle.r, n, triangle.qty);
  const inverse = invertUpper(triangle.r, n);
  if (scaled === null || inverse === null) return null;
  const parameters = scaled.map((value, k) => value / norm[k]!);
  const residual = y.map((value, i) => {
    let rest = value;
    for (let k = 0; k < n; k++) rest -= parameters[k]! * columns[k]![i]!;
    return rest;
  });
  const cofactor = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let sum = 0;
      for (let k = Math.max(i, j); k < n; k++) sum += inverse[i * n + k]! * inverse[j * n + k]!;
      cofactor[i * n + j] = sum / (norm[i]! * norm[j]!);
    }
  }
  return { parameters, residual, sumOfSquares: triangle.rest, dof: y.length - n, cofactor };
}
