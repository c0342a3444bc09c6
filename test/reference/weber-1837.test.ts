import { describe, expect, it } from 'vitest';
import { linearLeastSquares } from '../../src/numerics/linear-least-squares.ts';
import { inertia } from '../../src/reduction/inertia.ts';
import { torqueConstant } from '../../src/reduction/torque-constant.ts';

/**
 * W. Weber, Göttingen, 18 January 1837, in "Results of the observations made by the Magnetic Association", Taylor's Scientific
 * Memoirs II (1841) pp. 65-87: times of 23 successive passages in seconds. Their "vibration" is half a full period.
 */
const passages_s = [
  3.25, 9.9, 16.65, 23.35, 30.0, 36.65, 43.3, 50.0, 56.7, 63.3, 69.8, 76.55, 83.3, 89.9, 96.65, 103.15, 109.8, 116.65,
  123.25, 129.95, 136.7, 143.35, 150.0,
];

describe('Weber’s observation of 1837', () => {
  const numbers = passages_s.map((_, i) => i);
  // Their estimator: sum of the intervals from the first passage over the sum of their numbers.
  const theirs_s =
    passages_s.reduce((sum, time) => sum + time - passages_s[0]!, 0) / numbers.reduce((sum, n) => sum + n, 0);
  const magnet = inertia({ shape: 'bar', mass_kg: 0.142, length_m: 0.101, width_m: 0.0175 });

  it('gives the printed sums', () => {
    // Printed: sum of numbers 253, sum of intervals 1687.40 s.
    expect(numbers.reduce((sum, n) => sum + n, 0)).toBe(253);
    expect(theirs_s * 253).toBeCloseTo(1687.4, 6);
  });

  it('gives the vibration time', () => {
    expect(theirs_s).toBeCloseTo(6.669565, 5);
    // Ordinary least squares of times on numbers, computed: 6.666403(2274) s, scatter 0.0723 s.
    const fit = linearLeastSquares(
      [new Float64Array(23).fill(1), Float64Array.from(numbers)],
      Float64Array.from(passages_s),
    )!;
    const scatter = Math.sqrt(fit.sumOfSquares / fit.dof);
    expect(fit.parameters[1]).toBeCloseTo(6.666403, 5);
    expect(Math.sqrt(fit.cofactor[3]!) * scatter).toBeCloseTo(0.002274, 6);
    expect(scatter).toBeCloseTo(0.0723, 4);
  });

  it('gives moment times field, and with Weber’s M/H his field', () => {
    const momentTimesField = torqueConstant((1 / (2 * theirs_s)) ** 2, magnet.value);
    // π² K / t² = 2.758677e7 mm-mg-s = 2.758677e-5 N m.
    expect(Math.abs(momentTimesField / 2.758677e-5 - 1)).toBeLessThan(1e-6);
    // M/H = 8.76584e6 mm³ follows from his result and is no check of its own; it carries MH to his printed H = 1.774 (mm-mg-s).
    const mm_mg_s = momentTimesField * 1e12;
    expect(Math.sqrt(mm_mg_s / 8.76584e6)).toBeCloseTo(1.774, 4);
    // His unit of field is 10 µT.
    expect(momentTimesField / (1.774 * 1e-5)).toBeCloseTo(1.55506, 4);
  });
});
