import { describe, expect, it } from 'vitest';
import { type Random, seededRandom } from '../../src/numerics/random.ts';
import { rootMeanSquare } from '../../src/numerics/statistics.ts';
import { fitRingDown } from '../../src/oscillation/fit-ring-down.ts';
import type { RingDownOptions } from '../../src/oscillation/ring-down.ts';
import { spectrum } from '../../src/oscillation/spectrum.ts';
import { wanderOfMean, wanderOfMotion } from '../../src/oscillation/wander.ts';
import type { Trace } from '../../src/tracking/trace.ts';
import { DEG, drawTrace, PLAN } from './drawn.ts';

const time_s = Float64Array.from({ length: 360 }, (_, i) => i / 30);
const white = (random: Random, sigma = 1) => time_s.map(() => sigma * random.gaussian());

function walk(random: Random, step: number): Float64Array {
  let sum = 0;
  return time_s.map(() => {
    sum += step * random.gaussian();
    return sum;
  });
}

describe('wanderOfMotion', () => {
  it('finds next to none in noise, white or of one colour', () => {
    const random = seededRandom(1);
    let e = 0;
    const kinds = [() => white(random), () => time_s.map(() => (e = 0.9 * e + random.gaussian()))];
    for (const noise of kinds) {
      const found = Array.from({ length: 100 }, () => wanderOfMotion(spectrum(time_s, noise())!, 360, 0.9));
      expect(found.filter((v) => v > 0).length).toBeLessThan(20);
    }
  });

  it('finds the noise that would tilt as much as a random walk does', () => {
    // Per sample n D T / 10, with D T the variance the walk has at its end: of one quadrature, which holds half the power of the oscillation.
    const random = seededRandom(2);
    const [n, step] = [360, 0.01];
    const found = Array.from({ length: 200 }, () => {
      const [w1, w2] = [walk(random, step), walk(random, step)].map((w) => {
        const [first, last] = [w[0]!, w[n - 1]!];
        return w.map((v, i) => v - first - ((last - first) * i) / (n - 1));
      });
      const value = time_s.map((t, i) => w1![i]! * Math.cos(5.6 * t) + w2![i]! * Math.sin(5.6 * t));
      return wanderOfMotion(spectrum(time_s, value)!, n, 5.6 / (2 * Math.PI));
    });
    const mean = found.reduce((a, b) => a + b, 0) / found.length;
    const expected = (n * n * step ** 2) / 10 / 2;
    expect(mean / expected).toBeGreaterThan(0.5);
    expect(mean / expected).toBeLessThan(2);
  });
});

it('wanderOfMean: the mean of a wandering record is covered better than by plain noise, and noise alone adds nothing', () => {
  const random = seededRandom(3);
  const z = Array.from({ length: 200 }, () => {
    // Each with its slope taken off, as the fit's drift does.
    const w = walk(random, 0.1);
    const slope = (w[359]! - w[0]!) / 359;
    const value = w.map((v, i) => v - slope * (i - 179.5) + random.gaussian());
    const mean = value.reduce((a, b) => a + b, 0) / 360;
    return [mean - w[180]!, Math.hypot(1 / Math.sqrt(360), wanderOfMean(spectrum(time_s, value)!, 360, 1))] as const;
  });
  const covered = rootMeanSquare(z.map(([error, u]) => error / u));
  const plain = rootMeanSquare(z.map(([error]) => error * Math.sqrt(360)));
  expect(covered).toBeLessThan(2.5);
  expect(covered).toBeLessThan(plain / 2);
  const quiet = Array.from({ length: 100 }, () => wanderOfMean(spectrum(time_s, white(random))!, 360, 1));
  expect(quiet.filter((v) => v > 0).length).toBeLessThan(15);
});

/** A bar on a stiff fibre alone, whose oscillation random torques carry off: both its quadratures walk at random. */
function pushed(random: Random, step_deg: number): Trace {
  const still = drawTrace(
    { f0_Hz: 0.9, gamma_per_s: 0, amplitude_deg: 6, duration_s: 12, rate_Hz: 30, noise_deg: 0.02 },
    random,
  );
  const [w1, w2] = [walk(random, step_deg), walk(random, step_deg)];
  const omega = 2 * Math.PI * 0.9;
  const angle = time_s.map(
    (t, i) => DEG * ((6 + w1[i]!) * Math.cos(omega * t) + w2[i]! * Math.sin(omega * t) + 17 + 0.02 * random.gaussian()),
  );
  return { ...still, time_s, angle };
}

it('covers an oscillation that draughts push about, and says so', () => {
  const options: RingDownOptions = { ...PLAN, fibreShare: { value: 1, u: 1e-5 } };
  const random = seededRandom(4);
  const outcomes = Array.from({ length: 40 }, () => fitRingDown(pushed(random, 0.01), options));
  const z = outcomes.map((o) => {
    if (!o.ok) throw new Error(o.checks[0]!.message);
    return (o.ringDown.f0_Hz.value - 0.9) / o.ringDown.f0_Hz.u;
  });
  // Plain noise with its correlation alone would make it 4 to 6.
  expect(rootMeanSquare(z)).toBeLessThan(2.5);
  const told = outcomes.filter((o) =>
    o.checks.some(({ code }) => ['pushed_about', 'residuals_correlated', 'jump'].includes(code)),
  );
  expect(told.length).toBeGreaterThan(20);
});
