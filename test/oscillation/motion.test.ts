import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { amplitudeAt, frequencyRatio, startAmplitude } from '../../src/oscillation/amplitude.ts';
import { integrate, MOTION_PARAMETERS, type Motion } from '../../src/oscillation/motion.ts';
import { DEG, finely } from './drawn.ts';

const time_s = Float64Array.from({ length: 600 }, (_, i) => i / 30 + 0.005 * Math.sin(i));
time_s[0] = 0;
const typical: Motion = { omega: 6.3, gamma: 0.05, drag: 0.01, share: 0.95, skew: 0.1, x0: 0.2, v0: 0.3 };

describe('integrate', () => {
  it('follows the equation of motion as a plain, far finer integration does', () => {
    for (const motion of [
      typical,
      { ...typical, x0: 25 * DEG },
      { ...typical, omega: 20, gamma: 0.3 },
      { ...typical, gamma: -0.01 },
    ]) {
      const x = new Float64Array(time_s.length);
      expect(integrate(motion, time_s, x, null)).toBe(true);
      const truth = finely(motion, time_s);
      const worst = Math.max(...x.map((v, i) => Math.abs(v - truth[i]!)));
      // Against noise of 3e-4 rad.
      expect(worst).toBeLessThan(3e-6);
    }
  });

  it('is the closed damped cosine where the torque is the fibre alone', () => {
    const motion = { ...typical, share: 0, skew: 0, drag: 0, v0: 0 };
    const x = new Float64Array(time_s.length);
    integrate(motion, time_s, x, null);
    const damped = Math.sqrt(6.3 ** 2 - 0.05 ** 2);
    time_s.forEach((t, i) => {
      const exact = 0.2 * Math.exp(-0.05 * t) * (Math.cos(damped * t) + (0.05 / damped) * Math.sin(damped * t));
      expect(Math.abs(x[i]! - exact)).toBeLessThan(1e-13);
    });
  });

  it.each(MOTION_PARAMETERS.map((name, k) => [name, k] as const))('gives the derivative by %s', (name, k) => {
    const columns = Array.from({ length: 7 }, () => new Float64Array(time_s.length));
    const x = new Float64Array(time_s.length);
    integrate(typical, time_s, x, columns);
    const step = 1e-5;
    const high = new Float64Array(time_s.length);
    const low = new Float64Array(time_s.length);
    integrate({ ...typical, [name]: typical[name] + step }, time_s, high, null);
    integrate({ ...typical, [name]: typical[name] - step }, time_s, low, null);
    const largest = Math.max(...columns[k]!.map(Math.abs));
    time_s.forEach((_, i) => {
      expect(Math.abs((high[i]! - low[i]!) / (2 * step) - columns[k]![i]!)).toBeLessThan(5e-5 * largest);
    });
  });

  it('refuses what does not oscillate', () => {
    const x = new Float64Array(time_s.length);
    expect(integrate({ ...typical, gamma: 7 }, time_s, x, null)).toBe(false);
    expect(integrate({ ...typical, x0: 3.1, v0: 20 }, time_s, x, null)).toBe(false);
    expect(integrate({ ...typical, omega: Number.NaN }, time_s, x, null)).toBe(false);
  });

  it('mirrors: angle, rate and skew reversed give the reversed motion', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -0.5, max: 0.5, noNaN: true }),
        fc.double({ min: -0.2, max: 0.2, noNaN: true }),
        (x0, skew) => {
          const a = new Float64Array(time_s.length);
          const b = new Float64Array(time_s.length);
          integrate({ ...typical, x0, skew }, time_s, a, null);
          integrate({ ...typical, x0: -x0, v0: -typical.v0, skew: -skew }, time_s, b, null);
          a.forEach((v, i) => {
            expect(v + b[i]!).toBeCloseTo(0, 12);
          });
        },
      ),
      { numRuns: 20 },
    );
  });
});

describe('amplitude', () => {
  it('falls as the integrated motion does', () => {
    const motion = { ...typical, skew: 0, drag: 0.05, v0: 0 };
    const dense = Float64Array.from({ length: 20_000 }, (_, i) => i / 1000);
    const x = finely(motion, dense);
    const a0 = startAmplitude(motion);
    let peaks = 0;
    for (let i = 1; i < x.length - 1; i++) {
      if (!(x[i]! > x[i - 1]! && x[i]! >= x[i + 1]!)) continue;
      expect(Math.abs(amplitudeAt(motion, a0, dense[i]!) / x[i]! - 1)).toBeLessThan(2e-3);
      peaks++;
    }
    expect(peaks).toBeGreaterThan(18);
  });

  it('shifts the frequency as Lindstedt says, skew included', () => {
    const motion = { ...typical, gamma: 0, drag: 0, share: 0.9, skew: 0.2, x0: 0, v0: 1.2 };
    const dense = Float64Array.from({ length: 40_000 }, (_, i) => i / 1000);
    const x = finely(motion, dense);
    const ups: number[] = [];
    for (let i = 1; i < x.length; i++)
      if (x[i - 1]! < 0 && x[i]! >= 0) ups.push((i - x[i]! / (x[i]! - x[i - 1]!)) / 1000);
    const period = (ups.at(-1)! - ups[0]!) / (ups.length - 1);
    const a = (Math.max(...x) - Math.min(...x)) / 2;
    expect(Math.abs((2 * Math.PI) / period / motion.omega / frequencyRatio(motion, a) - 1)).toBeLessThan(1e-5);
  });
});
