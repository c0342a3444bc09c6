import { describe, expect, it } from 'vitest';
import { dot, subtract } from '../../src/numerics/dot.ts';
import { seededRandom } from '../../src/numerics/random.ts';
import { mean } from '../../src/numerics/statistics.ts';
import { orthonormalBasis } from '../../src/oscillation/basis.ts';
import { combinationCovariance, fitResidualNoise, noiseLevel } from '../../src/oscillation/residual-noise.ts';

const n = 900;
const time_s = Float64Array.from({ length: n }, (_, i) => i / 30);

function autoregressive(phi: number, seed: number): Float64Array {
  const random = seededRandom(seed);
  let e = random.gaussian() / Math.sqrt(1 - phi * phi);
  return time_s.map(() => {
    e = phi * e + random.gaussian();
    return e;
  });
}

const levelOf = (phi: number, f_Hz: number) => 1 / (1 + phi * phi - 2 * phi * Math.cos((2 * Math.PI * f_Hz) / 30));
const average = (f: (seed: number) => number) => mean(Array.from({ length: 60 }, (_, seed) => f(seed + 1)));

describe('fitResidualNoise', () => {
  it.each([0, 0.5, 0.9])('finds the level of autoregressive noise, phi %f', (phi) => {
    for (const f of [1, 5]) {
      const ratio =
        average((seed) => noiseLevel(fitResidualNoise(time_s, autoregressive(phi, seed), [], 1 / 30), f)) /
        levelOf(phi, f);
      expect(Math.abs(ratio - 1)).toBeLessThan(0.1);
    }
  });

  it('bridges missing frames', () => {
    const keep = (_: number, i: number) => i % 7 !== 3 && !(i > 300 && i < 340);
    const ratio =
      average((seed) =>
        noiseLevel(fitResidualNoise(time_s.filter(keep), autoregressive(0.8, seed).filter(keep), [], 1 / 30), 1),
      ) / levelOf(0.8, 1);
    expect(Math.abs(ratio - 1)).toBeLessThan(0.15);
  });

  it('fills the hole a fit leaves in the spectrum', () => {
    // Twelve directions around 0.5 Hz in a record of 10 s: a good part of the noise there is gone.
    const short = time_s.subarray(0, 300);
    const columns = [0.3, 0.4, 0.5, 0.6, 0.7, 0.8].flatMap((f) => [
      short.map((t) => Math.cos(2 * Math.PI * f * t)),
      short.map((t) => Math.sin(2 * Math.PI * f * t)),
    ]);
    const { q } = orthonormalBasis(columns, [...columns.keys()]);
    const level = (absorbed: readonly Float64Array[]) =>
      average((seed) => {
        const rest = autoregressive(0.7, seed).subarray(0, 300).slice();
        for (const direction of q) subtract(rest, direction, dot(rest, direction));
        return noiseLevel(fitResidualNoise(short, rest, absorbed, 1 / 30), 0.5);
      }) / levelOf(0.7, 0.5);
    expect(level([])).toBeLessThan(0.75);
    expect(Math.abs(level(q) - 1)).toBeLessThan(0.15);
  });
});

describe('combinationCovariance', () => {
  it('is the scatter of a combination under the noise', () => {
    const weights = time_s.map((t) => Math.cos(6 * t));
    const noise = fitResidualNoise(time_s, autoregressive(0.8, 999), [], 1 / 30);
    const exact = { ...noise, coefficients: new Float64Array([0.8]), innovation: 1 };
    const stated = combinationCovariance(exact, [weights])[0]!;
    const seen = average((seed) => dot(autoregressive(0.8, seed), weights) ** 2);
    expect(Math.abs(stated / seen - 1)).toBeLessThan(3.5 * Math.sqrt(2 / 60));
    const narrow = (n / 2) * levelOf(0.8, 6 / (2 * Math.PI));
    expect(Math.abs(stated / narrow - 1)).toBeLessThan(0.02);
  });
});
