import { describe, expect, it } from 'vitest';
import { leastSquares, withNumericalJacobian } from '../../src/numerics/least-squares.ts';
import { linearLeastSquares } from '../../src/numerics/linear-least-squares.ts';
import { seededRandom } from '../../src/numerics/random.ts';

const x = Float64Array.from({ length: 40 }, (_, i) => i / 10);
const random = seededRandom(7);
const y = x.map((t) => 3 * Math.exp(-0.7 * t) + 0.5 + 0.01 * random.gaussian());
const decay = withNumericalJacobian(40, (p, out) => {
  for (let i = 0; i < 40; i++) out[i] = p[0]! * Math.exp(-p[1]! * x[i]!) + p[2]! - y[i]!;
  return out.every(Number.isFinite);
});
const parabola = withNumericalJacobian(40, (p, out) => {
  for (let i = 0; i < 40; i++) out[i] = p[0]! + p[1]! * x[i]! + p[2]! * x[i]! ** 2 - y[i]!;
  return true;
});

describe('leastSquares', () => {
  it('equals the linear fit on a linear model, with its covariance', () => {
    const fit = leastSquares(parabola, new Float64Array([1, 1, 1]));
    const linear = linearLeastSquares([x.map(() => 1), x, x.map((t) => t * t)], y)!;
    expect(fit.status).toBe('converged');
    expect(fit.dof).toBe(37);
    for (let k = 0; k < 3; k++) expect(fit.parameters[k]! / linear.parameters[k]!).toBeCloseTo(1, 8);
    for (let k = 0; k < 9; k++) expect(fit.covariance![k]! / linear.cofactor[k]!).toBeCloseTo(1, 6);
    expect(fit.sumOfSquares / linear.sumOfSquares).toBeCloseTo(1, 10);
  });

  it('holds each parameter fixed in turn: the others find the minimum on that plane', () => {
    const free = leastSquares(decay, new Float64Array([1, 1, 0]));
    for (let held = 0; held < 3; held++) {
      const start = new Float64Array([1, 1, 0]);
      start[held] = free.parameters[held]!;
      const fit = leastSquares(decay, start, { fixed: [held === 0, held === 1, held === 2] });
      expect(fit.parameters[held]).toBe(start[held]);
      expect(fit.dof).toBe(38);
      for (let k = 0; k < 3; k++) {
        expect(fit.parameters[k]! / free.parameters[k]!).toBeCloseTo(1, 7);
        expect(fit.covariance![held * 3 + k]).toBe(0);
      }
    }
  });

  it('takes a prior as one more observation', () => {
    const loose = leastSquares(decay, new Float64Array([1, 1, 0]), { priors: [{ parameter: 1, value: 2, u: 1e6 }] });
    const tight = leastSquares(decay, new Float64Array([1, 1, 0]), { priors: [{ parameter: 1, value: 2, u: 1e-6 }] });
    const none = leastSquares(decay, new Float64Array([1, 1, 0]));
    expect(loose.parameters[1]! / none.parameters[1]!).toBeCloseTo(1, 8);
    expect(loose.dof).toBe(none.dof + 1);
    expect(tight.parameters[1]).toBeCloseTo(2, 6);
    expect(tight.covariance![4]! / 1e-12).toBeCloseTo(1, 6);
  });

  it('is blind to the unit of the data and of a parameter', () => {
    const base = leastSquares(decay, new Float64Array([1, 1, 0]));
    for (const unit of [1e-9, 1e9]) {
      const scaled = leastSquares(
        withNumericalJacobian(40, (p, out) => {
          for (let i = 0; i < 40; i++) {
            out[i] = unit * (p[0]! * unit * Math.exp(-p[1]! * x[i]!) + p[2]! - y[i]!);
          }
          return true;
        }),
        new Float64Array([1 / unit, 1, 0]),
      );
      expect(scaled.status).toBe('converged');
      expect((scaled.parameters[0]! * unit) / base.parameters[0]!).toBeCloseTo(1, 7);
      expect(scaled.parameters[1]! / base.parameters[1]!).toBeCloseTo(1, 7);
    }
  });

  it('says how it ended', () => {
    const undefinedStart = leastSquares(decay, new Float64Array([Number.NaN, 1, 0]));
    expect(undefinedStart.status).toBe('undefined_start');
    expect(undefinedStart.covariance).toBeNull();
    expect(leastSquares(decay, new Float64Array([1, 1, 0]), { maxEvaluations: 2 }).status).toBe('evaluations');
    const twins = withNumericalJacobian(40, (p, out) => {
      for (let i = 0; i < 40; i++) out[i] = (p[0]! + p[1]!) * x[i]! - y[i]!;
      return true;
    });
    expect(leastSquares(twins, new Float64Array([1, 1])).covariance).toBeNull();
    expect(() => leastSquares({ ...decay, rows: 2 }, new Float64Array(3))).toThrow(RangeError);
  });
});
