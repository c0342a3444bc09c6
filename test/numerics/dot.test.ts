import { expect, it } from 'vitest';
import { dot, subtract } from '../../src/numerics/dot.ts';

const a = Float64Array.from({ length: 11 }, (_, i) => i + 1);
const b = Float64Array.from({ length: 11 }, (_, i) => 2 * i - 3);

it('sums the products of any stretch, whatever its length', () => {
  for (let from = 0; from < 11; from++) {
    for (let to = from; to <= 11; to++) {
      let sum = 0;
      for (let i = from; i < to; i++) sum += a[i]! * b[i]!;
      expect(dot(a, b, from, to)).toBe(sum);
    }
  }
  expect(dot(a, b)).toBe(dot(a, b, 0, 11));
});

it('takes a multiple off a stretch and leaves the rest', () => {
  const c = a.slice();
  subtract(c, b, 2, 3, 6);
  expect([...c]).toEqual([...a].map((v, i) => (i >= 3 && i < 6 ? v - 2 * b[i]! : v)));
});
