import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { TraceColumns } from '../../../../app/contract.ts';
import { type GrowingTrace, withStretch } from '../../../../app/window/state/traces.ts';

const rows = (times: readonly number[], angle: number): TraceColumns => {
  const column = (value: number) => Float64Array.from(times, () => value);
  return {
    unit: 'deg',
    time_s: Float64Array.from(times),
    angle: column(angle),
    quality: column(1),
    x_px: column(0),
    y_px: column(0),
  };
};

test('new rows stand for whatever was in their stretch, and older objects stay as they were', () => {
  const first = withStretch(null, 0, 3, rows([0, 1, 2, 3], 1));
  const longer = withStretch(first, 4, 5, rows([4, 5], 2));
  const mended = withStretch(longer, 2, 4, rows([2, 2.5, 4], 3));
  expect([...first.time_s]).toEqual([0, 1, 2, 3]);
  expect([...longer.time_s]).toEqual([0, 1, 2, 3, 4, 5]);
  expect([...mended.time_s]).toEqual([0, 1, 2, 2.5, 4, 5]);
  expect([...mended.angle]).toEqual([1, 1, 3, 3, 3, 2]);
  expect([...longer.angle]).toEqual([1, 1, 1, 1, 2, 2]);
});

test('a trace grown in any pieces is that of all its rows', () => {
  fc.assert(
    fc.property(fc.array(fc.integer({ min: 1, max: 900 }), { minLength: 1, maxLength: 8 }), (sizes) => {
      let trace: GrowingTrace | null = null;
      let next = 0;
      for (const size of sizes) {
        const times = Array.from({ length: size }, (_, i) => next + i);
        trace = withStretch(trace, next, next + size - 1, rows(times, size));
        next += size;
      }
      expect(trace?.length).toBe(next);
      expect([...(trace?.time_s ?? [])]).toEqual(Array.from({ length: next }, (_, i) => i));
    }),
  );
});
