import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { positionMotion } from '../../src/oscillation/swing.ts';

const time_s = Float64Array.from({ length: 400 }, (_, i) => i / 30);
const twist = time_s.map((t) => 0.1 * Math.cos(5 * t));
const later = time_s.map((t) => -0.1 * Math.sin(5 * t));
const noise = (seed: number) => {
  const random = seededRandom(seed);
  return time_s.map(() => 0.05 * random.gaussian());
};
const swing = (px: number, f_Hz: number, turn: number) =>
  time_s.map((t) => px * Math.exp(-0.03 * t) * Math.cos(2 * Math.PI * f_Hz * t + turn));
const sum = (...columns: Float64Array[]) => time_s.map((_, i) => columns.reduce((s, c) => s + c[i]!, 300));

describe('positionMotion', () => {
  it('gives frequency, decay and amplitude of a swing', () => {
    const x = sum(noise(1), swing(3, 1.42, 0.3));
    const y = sum(noise(2), swing(4, 1.42, 1.3));
    const [line, ...others] = positionMotion(time_s, x, y, twist, later, 2)!.lines;
    expect(others).toEqual([]);
    expect(line!.frequency_Hz).toBeCloseTo(1.42, 3);
    expect(line!.decay_per_s).toBeCloseTo(0.03, 2);
    expect(line!.amplitude_px).toBeCloseTo(5, 1);
  });

  it('tells two of them apart', () => {
    const x = sum(noise(1), swing(3, 1.42, 0.3));
    const y = sum(noise(2), swing(2, 1.9, 1.3));
    const found = positionMotion(time_s, x, y, twist, later, 2)!.lines.map((l) => l.frequency_Hz);
    expect(found[0]).toBeCloseTo(1.42, 2);
    expect(found[1]).toBeCloseTo(1.9, 2);
  });

  it('sees none in noise, none in what follows the twist, and says how much does', () => {
    expect(positionMotion(time_s, sum(noise(1)), sum(noise(2)), twist, later, 2)!.lines).toEqual([]);
    const x = sum(
      noise(1),
      twist.map((v) => 12 * Math.cos(0.4 + v)),
    );
    const y = sum(
      noise(2),
      twist.map((v) => 12 * Math.sin(0.4 + v)),
    );
    const motion = positionMotion(time_s, x, y, twist, later, 2)!;
    expect(motion.lines).toEqual([]);
    expect(motion.inPhase_px).toBeCloseTo(12, 0);
    expect(motion.quadrature_px).toBeLessThan(0.5);
  });

  it('has nothing to say of few rows or of positions that are missing', () => {
    expect(
      positionMotion(
        time_s.subarray(0, 20),
        twist.subarray(0, 20),
        twist.subarray(0, 20),
        twist.subarray(0, 20),
        later.subarray(0, 20),
        1,
      ),
    ).toBeNull();
    expect(
      positionMotion(
        time_s,
        time_s.map(() => Number.NaN),
        twist,
        twist,
        later,
        1,
      ),
    ).toBeNull();
  });
});
