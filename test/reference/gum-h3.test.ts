import { describe, expect, it } from 'vitest';
import { linearLeastSquares } from '../../src/numerics/linear-least-squares.ts';
import { yorkLine } from '../../src/numerics/york-line.ts';

/** JCGM 100:2008 (GUM), annex H.3, table H.6: calibration of a thermometer. */
const t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.01, 26.511];
const b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.16];

describe('GUM H.3', () => {
  const x = Float64Array.from(t, (value) => value - 20);
  const y = Float64Array.from(b);

  it('gives intercept, slope, their uncertainties and correlation', () => {
    const fit = linearLeastSquares([new Float64Array(11).fill(1), x], y)!;
    const s2 = fit.sumOfSquares / fit.dof;
    // Printed: y1 = -0.1712(29) °C, y2 = 0.00218(67), r = -0.930, s = 0.0035 °C; more digits computed.
    expect(fit.parameters[0]).toBeCloseTo(-0.171203790131, 11);
    expect(fit.parameters[1]).toBeCloseTo(0.00218269773989, 12);
    expect(Math.sqrt(fit.cofactor[0]! * s2)).toBeCloseTo(0.002877597835, 11);
    expect(Math.sqrt(fit.cofactor[3]! * s2)).toBeCloseTo(0.00066793877323, 12);
    expect(fit.cofactor[1]! / Math.sqrt(fit.cofactor[0]! * fit.cofactor[3]!)).toBeCloseTo(-0.9304296031, 9);
    expect(Math.sqrt(s2)).toBeCloseTo(0.0034975639635, 11);
    // Printed: correction at 30 °C -0.1494(41) °C.
    const at30 = fit.parameters[0]! + 10 * fit.parameters[1]!;
    const u30 = Math.sqrt((fit.cofactor[0]! + 20 * fit.cofactor[1]! + 100 * fit.cofactor[3]!) * s2);
    expect(at30).toBeCloseTo(-0.1493768127, 9);
    expect(u30).toBeCloseTo(0.0041385958, 9);
  });

  it('gives the zero crossing, the way an ambient field comes from a line, with its covariance', () => {
    const n = y.length;
    // Without uncertainty in x York's line is the least-squares line; scaled by the scatter it must agree.
    const line = yorkLine(x, y, new Float64Array(n), new Float64Array(n).fill(1))!;
    const s2 = line.chiSquare / line.dof;
    const crossing = -line.intercept / line.slope;
    const variance = (covariance: number) =>
      ((line.u_intercept ** 2 + crossing ** 2 * line.u_slope ** 2 + 2 * crossing * covariance) * s2) / line.slope ** 2;
    // Computed: 78.43678353, u with covariance 22.78132676, without 24.039030.
    expect(crossing).toBeCloseTo(78.43678353, 7);
    expect(Math.sqrt(variance(line.covariance))).toBeCloseTo(22.78132676, 6);
    expect(Math.sqrt(variance(0))).toBeCloseTo(24.03903, 5);
  });
});
