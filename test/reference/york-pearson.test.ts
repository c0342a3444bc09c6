import { describe, expect, it } from 'vitest';
import { yorkLine } from '../../src/numerics/york-line.ts';
import { observe } from '../../src/reduction/observations.ts';
import { fitSweep } from '../../src/reduction/sweep-fit.ts';

/** Pearson, Phil. Mag. 2 (1901) 559, with the weights of York, Can. J. Phys. 44 (1966) 1079. */
const x = [0, 0.9, 1.8, 2.6, 3.3, 4.4, 5.2, 6.1, 6.5, 7.4];
const y = [5.9, 5.4, 4.4, 4.6, 3.5, 3.7, 2.8, 2.8, 2.4, 1.5];
const u_x = [1000, 1000, 500, 800, 200, 80, 60, 20, 1.8, 1].map((weight) => 1 / Math.sqrt(weight));
const u_y = [1, 1.8, 4, 8, 20, 20, 70, 70, 100, 500].map((weight) => 1 / Math.sqrt(weight));

describe('York’s line on Pearson’s data', () => {
  const line = yorkLine(x, y, u_x, u_y)!;

  it('gives slope and intercept', () => {
    // Exact solution: Neri et al., J. Phys. E 22 (1989) 215.
    expect(line.slope).toBeCloseTo(-0.480533407446, 10);
    expect(line.intercept).toBeCloseTo(5.479910224033, 9);
    expect(line.chiSquare / line.dof).toBeCloseTo(1.4832941493, 8);
  });

  it('gives the standard uncertainties in the convention of York et al. 2004 (adjusted points, unscaled)', () => {
    // Am. J. Phys. 72 (2004) 367. The form of York 1968 (observed points) would give 0.0583021, 0.2971258; scaling by the scatter
    // 0.0706203, 0.3592465; propagation from the inputs (Kalantar 1992) 0.0576167, 0.2919335.
    expect(line.u_slope).toBeCloseTo(0.057985009001, 8);
    expect(line.u_intercept).toBeCloseTo(0.294970735493, 7);
    expect(line.u_slope * Math.sqrt(line.chiSquare / line.dof)).toBeCloseTo(0.0706202695, 7);
  });

  it('inverts when x and y are swapped', () => {
    const swapped = yorkLine(y, x, u_y, u_x)!;
    expect(swapped.slope).toBeCloseTo(1 / line.slope, 9);
    expect(swapped.intercept).toBeCloseTo(-line.intercept / line.slope, 8);
    expect(swapped.chiSquare).toBeCloseTo(line.chiSquare, 9);
    // Computed: the x-intercept.
    expect(-line.intercept / line.slope).toBeCloseTo(11.40380698, 7);
  });

  it('is the ordinary line where x is exact and y weighs alike', () => {
    // Computed: -0.5395772750, 5.7611851904; standard errors from the scatter 0.0421265484, 0.1894851959.
    const plain = yorkLine(x, y, new Array<number>(10).fill(0), new Array<number>(10).fill(1))!;
    const s = Math.sqrt(plain.chiSquare / plain.dof);
    expect(plain.slope).toBeCloseTo(-0.539577275, 9);
    expect(plain.intercept).toBeCloseTo(5.7611851904, 9);
    expect(plain.u_slope * s).toBeCloseTo(0.0421265484, 9);
    expect(plain.u_intercept * s).toBeCloseTo(0.1894851959, 9);
  });

  it('is what the sweep’s fit gives for the same points', () => {
    // The line falls, so that all points lie beyond the reversal: sign -1 and slope +0.48; f0² = y.
    const points = x.map((current_A, i) => {
      const f0 = Math.sqrt(y[i]!);
      return {
        id: String(i),
        current_A,
        u_current_A: u_x[i]!,
        sweep: null,
        status: 'measured' as const,
        f0_Hz: { value: f0, u: u_y[i]! / (2 * f0), dof: Number.POSITIVE_INFINITY },
        u_time_scale: 0,
        equilibrium_rad: null,
        viewFrame: 'A',
      };
    });
    const model = {
      turn: 'free' as const,
      signs: new Int8Array(10).fill(-1),
      directions: false,
      fixed: { across: true, fibre: true, twist: true },
      priors: [],
    };
    const fit = fitSweep(observe(points), model, Float64Array.from([0.5, -11, 0, 0, 0]))!;
    const [slope, along] = fit.parameters as unknown as [number, number];
    expect(-slope).toBeCloseTo(line.slope, 8);
    expect(-slope * along).toBeCloseTo(line.intercept, 7);
    expect(fit.chiSquare).toBeCloseTo(line.chiSquare, 8);
    expect(Math.sqrt(fit.covariance[0]!)).toBeCloseTo(line.u_slope, 7);
  });

  it('refuses points without any uncertainty and gives null without two x', () => {
    expect(() => yorkLine([0, 1], [0, 1], [0, 0], [1, 0])).toThrow(RangeError);
    expect(yorkLine([1, 1], [0, 1], [0, 0], [1, 1])).toBeNull();
  });
});
