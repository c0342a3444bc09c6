import { describe, expect, it } from 'vitest';
import { studentQuantile } from '../../src/numerics/distributions.ts';
import { seededRandom } from '../../src/numerics/random.ts';
import { rootMeanSquare, standardDeviation } from '../../src/numerics/statistics.ts';
import { setUp } from '../../src/oscillation/assumptions.ts';
import { fitRingDown } from '../../src/oscillation/fit-ring-down.ts';
import { OMEGA } from '../../src/oscillation/model.ts';
import { uncertaintyOf } from '../../src/oscillation/parameter-covariance.ts';
import { startCandidates } from '../../src/oscillation/start-values.ts';
import { fitTwist } from '../../src/oscillation/twist-fit.ts';
import { type Drawing, drawTrace, KNOWN, PLAN } from './drawn.ts';

const typical: Drawing = {
  f0_Hz: 1,
  gamma_per_s: 0.04,
  amplitude_deg: 5,
  duration_s: 12,
  rate_Hz: 30,
  noise_deg: 0.02,
};

const KINDS: readonly (readonly [string, Partial<Drawing>])[] = [
  ['white noise', {}],
  ['noise correlated over three frames', { correlation: 0.7 }],
  ['noise correlated over twenty frames', { correlation: 0.95 }],
  ['wander like 1/f', { wander: 1.7 }],
  ['a swing beside the twist', { swing: { f_Hz: 1.42, amplitude_px: 4, leak_deg: 0.1 } }],
];

describe('95 % intervals', () => {
  it('hold the truth 93 to 97 % of the time, with every kind of noise', () => {
    const runs = 60;
    let inside = 0;
    let gammaInside = 0;
    for (const [k, [, d]] of KINDS.entries()) {
      const random = seededRandom(300 + k);
      let here = 0;
      for (let run = 0; run < runs; run++) {
        // Quadratic drag as it is assumed to be.
        const drag = 0.005 + 0.01 * random.gaussian();
        const outcome = fitRingDown(drawTrace({ ...typical, ...d, drag }, random), KNOWN);
        if (!outcome.ok) throw new Error(outcome.checks[0]!.message);
        const { f0_Hz, gamma_per_s } = outcome.ringDown;
        const factor = studentQuantile(0.975, f0_Hz.dof);
        if (Math.abs(f0_Hz.value - 1) < factor * f0_Hz.u) here++;
        if (Math.abs(gamma_per_s.value - 0.04) < factor * gamma_per_s.u) gammaInside++;
      }
      // One kind alone, within what so few runs can tell.
      expect(here / runs).toBeGreaterThan(0.93 - 3.5 * Math.sqrt((0.95 * 0.05) / runs));
      inside += here;
    }
    const total = runs * KINDS.length;
    const slack = 2 * Math.sqrt((0.95 * 0.05) / total);
    for (const share of [inside / total, gammaInside / total]) {
      expect(share).toBeGreaterThan(0.93 - slack);
      expect(share).toBeLessThan(0.97 + slack);
    }
  });

  it('hold with the fibre share drawn from what is assumed of it', () => {
    const random = seededRandom(77);
    const z = Array.from({ length: 60 }, () => {
      const fibre = 0.015 + 0.045 * random.gaussian();
      const outcome = fitRingDown(drawTrace({ ...typical, amplitude_deg: 12, duration_s: 25, fibre }, random), PLAN);
      if (!outcome.ok) throw new Error(outcome.checks[0]!.message);
      return (outcome.ringDown.f0_Hz.value - 1) / outcome.ringDown.f0_Hz.u;
    });
    expect(Math.abs(rootMeanSquare(z) - 1)).toBeLessThan(3.5 / Math.sqrt(120));
  });
});

it('the stated uncertainty agrees with a block bootstrap of the residuals', () => {
  for (const correlation of [0, 0.8]) {
    const trace = drawTrace({ ...typical, duration_s: 40, correlation }, seededRandom(5));
    const series = { time_s: trace.time_s, value: trace.angle };
    const { model, start } = setUp(startCandidates(series)[0]!, 40, KNOWN, 'rad');
    const fit = fitTwist(series, model, start)!;
    // Blocks of a second, far longer than the noise remembers, put together anew; the fit's answer to them is linear.
    const random = seededRandom(6);
    const n = fit.residual.length;
    const size = fit.parameters.length;
    const weight = fit.residual.map((_, i) => {
      let sum = 0;
      fit.jacobian.forEach((column, k) => {
        sum += (fit.inverse[OMEGA * size + k]! * column[i]!) / fit.level;
      });
      return sum;
    });
    const shifts = Array.from({ length: 600 }, () => {
      let shift = 0;
      for (let i = 0; i < n; i += 30) {
        const from = random.integer(n - 30);
        for (let j = 0; j < 30 && i + j < n; j++) shift += weight[i + j]! * fit.residual[from + j]!;
      }
      return shift;
    });
    expect(Math.abs(standardDeviation(shifts) / uncertaintyOf(fit, OMEGA) - 1)).toBeLessThan(0.25);
  }
});
