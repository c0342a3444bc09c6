import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { fitRingDown } from '../../src/oscillation/fit-ring-down.ts';
import { DEG, drawTrace, KNOWN, PLAN } from '../oscillation/drawn.ts';

// Relations of IEC 60050-351, entry 351-45-19 (damping ratio; eigen and characteristic angular frequency) and ISO 80000-3 (damping
// coefficient, logarithmic decrement = damping coefficient times period). Values computed for f0 = 1 Hz from these.
const TABLE = [
  { gamma: 0.01, fd: 0.999998733484, decrement: 0.010000012665, ratio: 0.001591549431, q: 314.159265359 },
  { gamma: 0.05, fd: 0.999968336629, decrement: 0.050001583219, ratio: 0.007957747155, q: 62.831853072 },
  { gamma: 0.2, fd: 0.999493265692, decrement: 0.200101398244, ratio: 0.031830988618, q: 15.707963268 },
  { gamma: 1, fd: 0.987253616904, decrement: 1.012910951024, ratio: 0.159154943092, q: Math.PI },
];

describe('damped oscillator', () => {
  it.each(TABLE)('gamma $gamma per second', ({ gamma, fd, decrement, ratio, q }) => {
    // A torque of the fibre alone has no amplitude effect: the linear oscillator of the standards.
    const linear = { ...PLAN, fibreShare: { value: 1, u: 1e-6 } };
    const trace = drawTrace(
      { f0_Hz: 1, gamma_per_s: gamma, amplitude_deg: 10, duration_s: 12, rate_Hz: 60, noise_deg: 1e-8, fibre: 1 },
      seededRandom(4),
    );
    const outcome = fitRingDown(trace, linear);
    if (!outcome.ok) throw new Error(outcome.checks[0]!.message);
    const r = outcome.ringDown;
    expect(Math.abs(r.f0_Hz.value - 1)).toBeLessThan(1e-8);
    expect(Math.abs(r.fd_Hz.value - fd)).toBeLessThan(1e-8);
    expect(Math.abs(r.gamma_per_s.value / r.fd_Hz.value / decrement - 1)).toBeLessThan(1e-6);
    expect(Math.abs(r.q!.value / q - 1)).toBeLessThan(1e-6);
    expect(Math.abs(1 / (2 * r.q!.value) / ratio - 1)).toBeLessThan(1e-6);
    expect(Math.abs(r.amplitudeEnd / r.amplitudeStart / Math.exp(-gamma * trace.time_s.at(-1)!) - 1)).toBeLessThan(
      1e-4,
    );
  });

  it('exposure lowers the amplitude by sin(pi f tau) / (pi f tau)', () => {
    const trace = drawTrace(
      { f0_Hz: 1, gamma_per_s: 0.02, amplitude_deg: 5, duration_s: 12, rate_Hz: 60, noise_deg: 1e-6 },
      seededRandom(4),
    );
    // Computed values of the formula.
    for (const [exposure_s, left] of [
      [1 / 30, 0.998173297],
      [1 / 60, 0.999543137],
      [1 / 120, 0.999885772],
    ] as const) {
      const outcome = fitRingDown(trace, { ...KNOWN, exposure_s });
      if (!outcome.ok) throw new Error(outcome.checks[0]!.message);
      expect(outcome.ringDown.amplitudeStart / (5 * DEG)).toBeCloseTo(1 / left, 3);
    }
  });
});
