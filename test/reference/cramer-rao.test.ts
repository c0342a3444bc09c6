import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { mean, standardDeviation } from '../../src/numerics/statistics.ts';
import { fitRingDown } from '../../src/oscillation/fit-ring-down.ts';
import { drawTrace, KNOWN } from '../oscillation/drawn.ts';

/**
 * Lower bound of the standard deviation of the frequency of a damped sine in white noise of `sigma` a sample, amplitude and phase
 * unknown (many cycles): Rife and Boorstyn, IEEE Trans. Inf. Theory 20 (1974) 591 for gamma = 0; with damping equivalent to Yao and
 * Pandit, IEEE Trans. Signal Process. 43 (1995) 878 (both citations from memory; formulas derived anew).
 */
function bound_Hz(amplitude: number, sigma: number, rate_Hz: number, duration_s: number, gamma: number): number {
  const ratio = (sigma / amplitude) ** 2;
  if (gamma === 0) return Math.sqrt((24 * ratio) / (rate_Hz * duration_s ** 3)) / (2 * Math.PI);
  const x = 2 * gamma * duration_s;
  const e = Math.exp(-x);
  return (
    Math.sqrt((((2 * ratio) / rate_Hz) * (2 * gamma) ** 3 * (1 - e)) / (1 - (2 + x * x) * e + e * e)) / (2 * Math.PI)
  );
}

describe('Cramer-Rao bound', () => {
  it.each([
    // Computed values of the closed form.
    [10, 0.02, 30, 30, 0, 1.73266e-6],
    [10, 0.02, 30, 30, 0.01, 2.016035e-6],
    [10, 0.02, 30, 30, 0.05, 3.756598e-6],
    [10, 0.02, 30, 30, 0.1, 7.714205e-6],
    [10, 0.02, 60, 60, 0.05, 1.928551e-6],
    [5, 0.05, 30, 20, 0.05, 2.660386e-5],
  ])('closed form %f %f %f %f %f', (amplitude, sigma, rate, duration, gamma, value) => {
    expect(Math.abs(bound_Hz(amplitude, sigma, rate, duration, gamma) / value - 1)).toBeLessThan(1e-6);
  });

  it.each([0, 0.05])('f0 scatters at the bound and its uncertainty says so, gamma %f', (gamma) => {
    const random = seededRandom(17);
    const runs = 160;
    const errors: number[] = [];
    const stated: number[] = [];
    for (let k = 0; k < runs; k++) {
      const trace = drawTrace(
        { f0_Hz: 1, gamma_per_s: gamma, amplitude_deg: 10, duration_s: 30, rate_Hz: 30, noise_deg: 0.02 },
        random,
      );
      const outcome = fitRingDown(trace, KNOWN);
      if (!outcome.ok) throw new Error(outcome.checks[0]!.message);
      errors.push(outcome.ringDown.f0_Hz.value - 1);
      stated.push(outcome.ringDown.f0_Hz.u);
    }
    const bound = bound_Hz(10, 0.02, 30, 30, gamma);
    const scatter = standardDeviation(errors);
    // How well a scatter is known from so many runs, at 3.5 standard deviations.
    const slack = 3.5 / Math.sqrt(2 * runs);
    expect(scatter / bound).toBeLessThan(1.1 + slack);
    expect(scatter / bound).toBeGreaterThan(1 - slack);
    expect(Math.abs(mean(stated) / scatter - 1)).toBeLessThan(0.1 + slack);
    // Against the bound itself the stated uncertainty has no scatter to hide behind.
    expect(Math.abs(mean(stated) / bound - 1)).toBeLessThan(0.1);
    expect(Math.abs(mean(errors))).toBeLessThan(3.5 * (scatter / Math.sqrt(runs)) + 1e-7);
  });
});
