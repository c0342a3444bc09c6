import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { domainOf, linearScale, logScale, niceStep, niceTicks } from '../../../src/report/plots/scale.ts';

const texts = (low: number, high: number, count: number) => niceTicks(low, high, count).map((tick) => tick.text);

describe('ticks', () => {
  it('stand at round values and are written with as many decimals as they need', () => {
    expect(texts(0, 1, 5)).toEqual(['0.0', '0.2', '0.4', '0.6', '0.8', '1.0']);
    expect(texts(-0.005, 0.005, 4)).toEqual(['−0.004', '−0.002', '0.000', '0.002', '0.004']);
    expect(texts(3, 31, 6)).toEqual(['5', '10', '15', '20', '25', '30']);
    expect(texts(0, 4e6, 4)).toEqual(['0', '1e6', '2e6', '3e6', '4e6']);
    expect(texts(0, 4e-9, 4).at(-1)).toBe('4e−9');
  });

  it('are none where there is no span', () => {
    expect(niceTicks(1, 1, 5)).toEqual([]);
    expect(niceTicks(Number.NaN, 1, 5)).toEqual([]);
  });

  it('have steps of 1, 2 or 5 times a power of ten', () => {
    expect([0.9, 1.3, 1.5, 3, 3.3, 6, 8].map(niceStep)).toEqual([1, 1, 2, 2, 5, 5, 10]);
  });

  it('lie within the span, are told apart by their texts, and come about as many as asked for', () => {
    const ends = fc.tuple(
      fc.double({ min: -1e6, max: 1e6, noNaN: true }),
      fc.double({ min: 1e-3, max: 1e6, noNaN: true }),
      fc.integer({ min: 3, max: 12 }),
    );
    fc.assert(
      fc.property(ends, ([low, span, count]) => {
        const ticks = niceTicks(low, low + span, count);
        expect(ticks.length).toBeGreaterThanOrEqual(Math.floor(count / 2));
        expect(ticks.length).toBeLessThanOrEqual(2 * count);
        expect(new Set(ticks.map((tick) => tick.text)).size).toBe(ticks.length);
        for (const { value } of ticks) {
          expect(value).toBeGreaterThanOrEqual(low - 1e-6 * span);
          expect(value).toBeLessThanOrEqual(low + span + 1e-6 * span);
        }
      }),
      { seed: 7, numRuns: 300 },
    );
  });
});

describe('scales', () => {
  it('place values in proportion, either way up, and nothing that is not finite', () => {
    const scale = linearScale([0, 10], [100, 0], 5);
    expect([0, 2.5, 10].map(scale.place)).toEqual([100, 75, 0]);
    expect(scale.place(Number.NaN)).toBeNull();
  });

  it('have a tick at every power of ten when logarithmic, and no place for zero', () => {
    const scale = logScale([1e-4, 10], [100, 0], 6);
    expect(scale.ticks.map((tick) => tick.text)).toEqual(['10⁻⁴', '0.001', '0.01', '0.1', '1', '10']);
    expect(scale.place(0)).toBeNull();
    expect(scale.place(-1)).toBeNull();
    expect(scale.place(1e-4)).toBeCloseTo(100, 10);
  });

  it('have room for a single value, and for none', () => {
    const [low, high] = domainOf([5, 5, null]);
    expect(low).toBeLessThan(5);
    expect(high).toBeGreaterThan(5);
    expect(domainOf([])).toEqual([0, 1]);
    expect(domainOf([Number.NaN, 1, 3], 0)).toEqual([1, 3]);
  });
});
