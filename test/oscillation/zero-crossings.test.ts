import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { compareCrossings, crossings } from '../../src/oscillation/zero-crossings.ts';

const time_s = Float64Array.from({ length: 600 }, (_, i) => i / 30);
const period_s = 1 / 0.73;
const curve = (t: number, f = 0.73) => Math.exp(-0.05 * t) * Math.cos(2 * Math.PI * f * t + 0.4);
const amplitude = (t: number) => Math.exp(-0.05 * t);
const clean = { time_s, value: time_s.map((t) => curve(t)) };

describe('crossings', () => {
  it('finds every passage, up and down, to a thousandth of a frame without noise', () => {
    const found = crossings(clean, period_s, amplitude);
    const expected: number[] = [];
    for (let k = 0; ; k++) {
      const t = ((k + 0.5) * Math.PI - 0.4) / (2 * Math.PI * 0.73);
      if (t > 19.5) break;
      expected.push(t);
    }
    // The first passage may come before the curve has swung far enough to be trusted.
    expect(found.time_s.length).toBeGreaterThanOrEqual(expected.length - 1);
    found.time_s.forEach((t) => {
      expect(Math.min(...expected.map((e) => Math.abs(t - e)))).toBeLessThan(0.02 / 30);
    });
  });

  it('is not fooled by noise that crosses many times', () => {
    const random = seededRandom(3);
    const noisy = { time_s, value: clean.value.map((v) => v + 0.05 * random.gaussian()) };
    const found = crossings(noisy, period_s, amplitude);
    found.number.forEach((n, k) => {
      if (k > 0) expect(n).toBeGreaterThan(found.number[k - 1]!);
    });
    expect(found.time_s.length).toBeLessThanOrEqual(30);
  });

  it('counts on across a gap', () => {
    const keep = (_: number, i: number) => i < 200 || i > 300;
    const gapped = { time_s: time_s.filter(keep), value: clean.value.filter(keep) };
    const whole = crossings(clean, period_s, amplitude);
    const found = crossings(gapped, period_s, amplitude);
    expect(found.number.at(-1)).toBe(whole.number.at(-1));
    expect(found.time_s.length).toBeLessThan(whole.time_s.length);
  });
});

describe('compareCrossings', () => {
  it('agrees within its uncertainty where the model is right, and sees where it is not', () => {
    const random = seededRandom(5);
    const noisy = { time_s, value: clean.value.map((v) => v + 0.01 * random.gaussian()) };
    const data = crossings(noisy, period_s, amplitude);
    const right = compareCrossings(data, crossings(clean, period_s, amplitude), period_s)!;
    expect(Math.abs(right.frequency_Hz - 0.73) / right.u_Hz).toBeLessThan(4);
    expect(right.u_Hz).toBeLessThan(1e-3);
    expect(Math.abs(right.model_Hz - 0.73)).toBeLessThan(1e-4);
    const other = { time_s, value: time_s.map((t) => curve(t, 0.735)) };
    const wrong = compareCrossings(data, crossings(other, period_s, amplitude), period_s)!;
    expect(Math.abs(wrong.frequency_Hz - wrong.model_Hz)).toBeGreaterThan(5 * wrong.u_Hz);
  });

  it('has nothing to say of four passages', () => {
    const short = { time_s: time_s.subarray(0, 75), value: clean.value.subarray(0, 75) };
    const few = crossings(short, period_s, amplitude);
    expect(compareCrossings(few, few, period_s)).toBeNull();
  });
});
