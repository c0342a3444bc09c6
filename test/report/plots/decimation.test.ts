import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decimated } from '../../../src/report/plots/decimation.ts';

describe('decimation', () => {
  it('keeps every row of a short curve', () => {
    expect(decimated([0, 1, 2], [5, 6, 7], 10)).toEqual([0, 1, 2]);
  });

  it('never loses a spike and keeps few rows', () => {
    const x = Float64Array.from({ length: 100_000 }, (_, i) => i / 60);
    const y = x.map((t) => Math.sin(t));
    y[54_321] = 9;
    y[12_345] = -9;
    const rows = decimated(x, y, 500);
    expect(rows.length).toBeLessThanOrEqual(4 * 501);
    expect(rows).toContain(54_321);
    expect(rows).toContain(12_345);
  });

  it('leaves out rows that are not finite or not to be kept', () => {
    expect(decimated([0, 1, 2, 3], [1, Number.NaN, 1, 1], 10, [1, 1, 0, 1])).toEqual([0, 3]);
    expect(decimated([], [], 10)).toEqual([]);
  });

  it('keeps the order, the first and last row, and the extremes', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: -10, max: 10, noNaN: true }), { minLength: 1, maxLength: 400 }), (y) => {
        const rows = decimated(
          y.map((_, i) => i),
          y,
          16,
        );
        expect([...rows].sort((a, b) => a - b)).toEqual(rows);
        expect(rows[0]).toBe(0);
        expect(rows.at(-1)).toBe(y.length - 1);
        expect(Math.max(...rows.map((i) => y[i] ?? 0))).toBe(Math.max(...y));
        expect(Math.min(...rows.map((i) => y[i] ?? 0))).toBe(Math.min(...y));
      }),
      { seed: 11, numRuns: 200 },
    );
  });
});
