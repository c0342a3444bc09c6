import * as fc from 'fast-check';
import { expect, it } from 'vitest';
import { median, quantile } from '../../src/numerics/statistics.ts';

it('quantiles are those of the sorted values, ties and order as may be, and leave the values alone', () => {
  fc.assert(
    fc.property(
      fc.array(fc.oneof(fc.integer({ min: -5, max: 5 }), fc.double({ noNaN: true, min: -1e6, max: 1e6 })), {
        minLength: 1,
        maxLength: 60,
      }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (values, q) => {
        const before = [...values];
        const sorted = Float64Array.from(values).sort();
        const at = q * (sorted.length - 1);
        const low = Math.floor(at);
        const high = Math.min(low + 1, sorted.length - 1);
        expect(quantile(values, q)).toBeCloseTo(sorted[low]! + (at - low) * (sorted[high]! - sorted[low]!), 9);
        expect(values).toEqual(before);
      },
    ),
  );
});

it('the median of an even count lies between the two in the middle', () => {
  expect(median([4, 1, 3, 2])).toBe(2.5);
  expect(median([7])).toBe(7);
  expect(() => median([])).toThrow(RangeError);
});
