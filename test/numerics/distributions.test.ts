import { describe, expect, it } from 'vitest';
import {
  chiSquareProbability,
  normalProbability,
  normalQuantile,
  studentProbability,
  studentQuantile,
} from '../../src/numerics/distributions.ts';
import { incompleteBeta, logGamma } from '../../src/numerics/special-functions.ts';

describe('quantiles', () => {
  it('of the normal distribution', () => {
    // Computed with scipy 1.10.1, norm.ppf and norm.cdf.
    expect(normalQuantile(0.975)).toBeCloseTo(1.959963984540054, 12);
    expect(normalQuantile(0.995)).toBeCloseTo(2.5758293035489004, 12);
    expect(normalQuantile(1e-10)).toBeCloseTo(-6.361340902404056, 9);
    expect(normalProbability(-6) / 9.865876450376946e-10).toBeCloseTo(1, 11);
  });

  it('of Student t, as printed in JCGM 100:2008 table G.2 (t95)', () => {
    // Values of table G.2 from memory, two decimals as printed.
    for (const [dof, t] of [
      [1, 12.71],
      [2, 4.3],
      [5, 2.57],
      [10, 2.23],
      [20, 2.09],
      [50, 2.01],
    ] as const) {
      expect(Math.abs(studentQuantile(0.975, dof) - t)).toBeLessThan(0.005);
    }
    // Computed with scipy 1.10.1, t.ppf.
    expect(studentQuantile(0.975, 19)).toBeCloseTo(2.093024054408263, 11);
    expect(studentQuantile(0.995, 16)).toBeCloseTo(2.920781622425087, 11);
    expect(studentQuantile(0.975, Number.POSITIVE_INFINITY)).toBeCloseTo(1.959963984540054, 12);
  });

  it('undo the probabilities', () => {
    for (const dof of [1.5, 4, 30, 1000]) {
      for (const p of [0.001, 0.2, 0.5, 0.9])
        expect(studentProbability(studentQuantile(p, dof), dof)).toBeCloseTo(p, 12);
    }
    expect(() => normalQuantile(1)).toThrow(RangeError);
    expect(() => studentQuantile(0.5, 0)).toThrow(RangeError);
  });

  it('chi-square and the functions below', () => {
    // scipy 1.10.1: chi2.cdf(3.84, 1), betainc(2.5, 1.5, 0.3), gammaln(0.1), gammaln(10.5)
    expect(chiSquareProbability(3.84, 1)).toBeCloseTo(0.9499565, 7);
    expect(incompleteBeta(0.3, 2.5, 1.5)).toBeCloseTo(0.08894372317066562, 11);
    expect(logGamma(10.5)).toBeCloseTo(13.940625219403763, 11);
    expect(logGamma(0.1)).toBeCloseTo(2.252712651734206, 11);
  });
});
