import fc from 'fast-check';
import { expect, test } from 'vitest';
import { columnExtremes, lowerBound, nearestIndex, rangeWithin } from '../../../../app/window/plots/extremes.ts';

const ascending = fc
  .array(fc.double({ min: 0, max: 100, noNaN: true }), { minLength: 1, maxLength: 200 })
  .map((a) => Float64Array.from(a).sort());

test('a column keeps the smallest and largest value that falls into it, and its ends', () => {
  const x = Float64Array.from([0, 1, 2, 3, 10, 11]);
  const y = Float64Array.from([5, 9, 1, 4, 7, 8]);
  const { low, high, first, last } = columnExtremes(x, y, 0, 12, 3);
  expect([...low]).toEqual([1, Number.NaN, 7]);
  expect([...high]).toEqual([9, Number.NaN, 8]);
  expect([...first]).toEqual([5, Number.NaN, 7]);
  expect([...last]).toEqual([4, Number.NaN, 8]);
});

test('nothing above or below what is drawn is lost', () => {
  fc.assert(
    fc.property(ascending, fc.integer({ min: 1, max: 50 }), (x, columns) => {
      const y = x.map((value, i) => Math.sin(value * 7) * (i + 1));
      const found = columnExtremes(x, y, 0, 101, columns);
      expect(Math.max(...found.high.filter((v) => !Number.isNaN(v)))).toBe(Math.max(...y));
      expect(Math.min(...found.low.filter((v) => !Number.isNaN(v)))).toBe(Math.min(...y));
      expect(rangeWithin(x, y, 0, 101)).toEqual([Math.min(...y), Math.max(...y)]);
    }),
  );
});

test('the nearest element is found as by looking at all of them', () => {
  fc.assert(
    fc.property(ascending, fc.double({ min: -10, max: 110, noNaN: true }), (x, value) => {
      const best = Math.min(...x.map((one) => Math.abs(one - value)));
      expect(Math.abs(x[nearestIndex(x, value)]! - value)).toBe(best);
      expect(lowerBound(x, value)).toBe(x.filter((one) => one < value).length);
    }),
  );
  expect(rangeWithin([1, 2], [3, 4], 5, 6)).toBeNull();
});
