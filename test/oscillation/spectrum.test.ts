import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { spectralLines, spectrum } from '../../src/oscillation/spectrum.ts';
import { startAt, startCandidates } from '../../src/oscillation/start-values.ts';

const even = Float64Array.from({ length: 900 }, (_, i) => i / 30);

describe('spectralLines', () => {
  it.each([0, 0.05])('finds the frequency to a hundredth of a line, gamma %f', (gamma) => {
    for (let delta = -0.45; delta <= 0.46; delta += 0.1) {
      const f = (30 + delta) / 30;
      const y = even.map((t) => 3 + Math.exp(-gamma * t) * Math.cos(2 * Math.PI * f * t + 1));
      const line = spectralLines(spectrum(even, y)!, 1)[0]!;
      expect(Math.abs(line.frequency_Hz - f) * 30).toBeLessThan(0.01);
    }
  });

  it('stands uneven times and a gap', () => {
    const random = seededRandom(2);
    const uneven = even.map((t) => t + 0.01 * random.uniform()).filter((t) => t < 10 || t > 11);
    const y = uneven.map((t) => Math.cos(2 * Math.PI * 1.234 * t) + 0.1 * random.gaussian());
    expect(spectralLines(spectrum(uneven, y)!, 1)[0]!.frequency_Hz).toBeCloseTo(1.234, 2);
  });

  it('gives amplitudes, strongest first', () => {
    const y = even.map((t) => 0.5 * Math.sin(2 * Math.PI * 3 * t) + 2 * Math.cos(2 * Math.PI * t));
    const [first, second] = spectralLines(spectrum(even, y)!, 2);
    expect(first!.frequency_Hz).toBeCloseTo(1, 3);
    expect(first!.amplitude).toBeCloseTo(2, 1);
    expect(second!.frequency_Hz).toBeCloseTo(3, 2);
  });

  it('has nothing to say of too few samples', () => {
    expect(spectrum(even.subarray(0, 7), even.subarray(0, 7))).toBeNull();
    expect(startCandidates({ time_s: even.subarray(0, 5), value: even.subarray(0, 5) })).toEqual([]);
  });
});

describe('startAt', () => {
  it('gives amplitude, phase, offset and drift at a known frequency', () => {
    const y = even.map(
      (t) => 7 + 0.01 * (t - 15) + Math.exp(-t / 30) * (0.3 * Math.cos(9 * t) - 0.4 * Math.sin(9 * t)),
    );
    const start = startAt({ time_s: even, value: y }, 9 / (2 * Math.PI))!;
    expect(start.cosine).toBeCloseTo(0.3, 2);
    expect(start.sine).toBeCloseTo(-0.4, 2);
    expect(start.offset).toBeCloseTo(7, 3);
    expect(start.drift).toBeCloseTo(0.01, 4);
    expect(start.gamma_per_s * 30).toBeCloseTo(1, 1);
  });
});
