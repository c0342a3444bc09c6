import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import {
  mean,
  median,
  quantile,
  robustDeviation,
  rootMeanSquare,
  standardDeviation,
} from '../../src/numerics/statistics.ts';

describe('seededRandom', () => {
  it('repeats with its seed and differs with another', () => {
    const draw = (seed: number) =>
      Array.from(
        { length: 5 },
        (
          (r) => () =>
            r.gaussian()
        )(seededRandom(seed)),
      );
    expect(draw(1)).toEqual(draw(1));
    expect(draw(1)).not.toEqual(draw(2));
  });

  it('has the moments of the distributions it claims', () => {
    const random = seededRandom(42);
    const n = 100_000;
    const normal = Float64Array.from({ length: n }, () => random.gaussian());
    expect(Math.abs(mean(normal))).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(standardDeviation(normal) - 1)).toBeLessThan(4 / Math.sqrt(2 * n));
    expect(Math.abs(mean(normal.map((v) => v ** 4)) - 3)).toBeLessThan(4 * Math.sqrt(96 / n));
    expect(Math.abs(mean(normal.map((v, i) => v * (normal[i - 1] ?? 0))))).toBeLessThan(4 / Math.sqrt(n));
    const uniform = Float64Array.from({ length: n }, () => random.uniform());
    expect(Math.abs(mean(uniform) - 0.5)).toBeLessThan(4 / Math.sqrt(12 * n));
    expect(Math.abs(quantile(uniform, 0.1) - 0.1)).toBeLessThan(4 * Math.sqrt(0.09 / n));
    expect(new Set(Array.from({ length: 100 }, () => random.integer(4)))).toEqual(new Set([0, 1, 2, 3]));
  });
});

describe('statistics', () => {
  it('of a small list', () => {
    const values = [3, 1, 4, 1, 5];
    expect(mean(values)).toBeCloseTo(2.8, 14);
    expect(median(values)).toBe(3);
    expect(quantile(values, 0.25)).toBe(1);
    expect(standardDeviation(values)).toBeCloseTo(Math.sqrt(12.8 / 4), 14);
    expect(rootMeanSquare([3, 4])).toBeCloseTo(Math.sqrt(12.5), 14);
    expect(() => mean([])).toThrow(RangeError);
  });

  it('robustDeviation is not moved by outliers', () => {
    const random = seededRandom(3);
    const values = Float64Array.from({ length: 2000 }, (_, i) => (i % 10 === 0 ? 1000 : random.gaussian()));
    expect(robustDeviation(values)).toBeGreaterThan(0.95);
    expect(robustDeviation(values)).toBeLessThan(1.25);
  });
});
