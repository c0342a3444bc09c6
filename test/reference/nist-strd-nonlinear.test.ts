import { describe, expect, it } from 'vitest';
import { leastSquares, withNumericalJacobian } from '../../src/numerics/least-squares.ts';

// NIST Statistical Reference Datasets (StRD), nonlinear regression, Misra1a (dental research, lower difficulty): data,
// both starts and certified values.
const Y = [10.07, 14.73, 17.94, 23.93, 29.61, 35.18, 40.02, 44.82, 50.76, 55.05, 61.01, 66.4, 75.47, 81.78];
const X = [77.6, 114.9, 141.1, 190.8, 239.9, 289.0, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760.0];
const CERTIFIED = { b: [2.3894212918e2, 5.5015643181e-4], u: [2.7070075241, 7.2668688436e-6], rss: 1.2455138894e-1 };

const analytic = {
  rows: 14,
  evaluate(p: Float64Array, residual: Float64Array, jacobian: readonly Float64Array[]) {
    X.forEach((x, i) => {
      const e = Math.exp(-p[1]! * x);
      residual[i] = p[0]! * (1 - e) - Y[i]!;
      jacobian[0]![i] = 1 - e;
      jacobian[1]![i] = p[0]! * x * e;
    });
    return residual.every(Number.isFinite);
  },
};
const numerical = withNumericalJacobian(14, (p, out) =>
  analytic.evaluate(p, out, [new Float64Array(14), new Float64Array(14)]),
);

describe('NIST StRD, Misra1a', () => {
  for (const start of [
    [500, 1e-4],
    [250, 5e-4],
  ]) {
    it.each([
      ['analytic', analytic],
      ['numerical', numerical],
    ] as const)(`from ${start.join(', ')} with %s derivatives`, (_, problem) => {
      const fit = leastSquares(problem, Float64Array.from(start));
      expect(fit.status).toBe('converged');
      expect(fit.dof).toBe(12);
      expect(Math.abs(fit.sumOfSquares / CERTIFIED.rss - 1)).toBeLessThan(1e-9);
      const s = Math.sqrt(fit.sumOfSquares / fit.dof);
      expect(Math.abs(s / 1.018787633e-1 - 1)).toBeLessThan(1e-9);
      for (let k = 0; k < 2; k++) {
        expect(Math.abs(fit.parameters[k]! / CERTIFIED.b[k]! - 1)).toBeLessThan(1e-7);
        const u = s * Math.sqrt(fit.covariance![3 * k]!);
        expect(Math.abs(u / CERTIFIED.u[k]! - 1)).toBeLessThan(2e-6);
      }
    });
  }
});
