import { Matrix, QrDecomposition, SingularValueDecomposition } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { linearLeastSquares } from '../../src/numerics/linear-least-squares.ts';
import { invertUpper, solveUpper, triangularise } from '../../src/numerics/qr.ts';
import { seededRandom } from '../../src/numerics/random.ts';

function randomColumns(seed: number, m: number, n: number): { columns: Float64Array[]; y: Float64Array } {
  const random = seededRandom(seed);
  const column = () => Float64Array.from({ length: m }, () => random.gaussian());
  return { columns: Array.from({ length: n }, column), y: column() };
}

describe('triangularise', () => {
  it('gives the triangle of ml-matrix up to signs of rows', () => {
    const { columns, y } = randomColumns(1, 30, 5);
    const { r } = triangularise(columns, y);
    const oracle = new QrDecomposition(new Matrix(columns.map((c) => [...c])).transpose()).upperTriangularMatrix;
    for (let i = 0; i < 5; i++) {
      for (let j = 0; j < 5; j++) expect(Math.abs(r[i * 5 + j]!)).toBeCloseTo(Math.abs(oracle.get(i, j)), 12);
    }
  });

  it('solves and inverts as ml-matrix does', () => {
    const { columns, y } = randomColumns(2, 40, 6);
    const { r, qty, n } = triangularise(columns, y);
    const x = solveUpper(r, n, qty)!;
    const a = new Matrix(columns.map((c) => [...c])).transpose();
    const oracle = new SingularValueDecomposition(a, { autoTranspose: true }).solve(Matrix.columnVector([...y]));
    for (let k = 0; k < 6; k++) expect(x[k]).toBeCloseTo(oracle.get(k, 0), 12);
    const inverse = invertUpper(r, n)!;
    const product = new Matrix(Array.from({ length: n }, (_, i) => [...r.subarray(i * n, i * n + n)])).mmul(
      new Matrix(Array.from({ length: n }, (_, i) => [...inverse.subarray(i * n, i * n + n)])),
    );
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) expect(product.get(i, j)).toBeCloseTo(i === j ? 1 : 0, 12);
  });

  it('refuses fewer rows than columns and finds dependent columns', () => {
    const { columns, y } = randomColumns(3, 4, 5);
    expect(() => triangularise(columns, y)).toThrow(RangeError);
    const twin = Float64Array.from({ length: 10 }, (_, i) => i + 1);
    expect(linearLeastSquares([twin, twin.map((v) => 3 * v)], twin)).toBeNull();
  });
});
