import { describe, expect, it } from 'vitest';
import { boathouse } from '../../samples/boathouse-bench.ts';
import type { Apparatus } from '../../samples/drawing/bench.ts';
import { inertia_kg_m2, restDirection_rad, smallMotion, totalField } from '../../samples/drawing/magnet.ts';
import { integrateMotion, type Motion, placeAt } from '../../samples/drawing/motion.ts';
import type { Schedule } from '../../samples/drawing/schedule.ts';

const still: Schedule = { steps: [], length_s: 30, currents: [] };

/** A bar whose undamped small motion in the ambient field alone has 1 Hz. */
function oneHertz(changes: Partial<Apparatus>): Apparatus {
  const plain: Apparatus = {
    ...boathouse.apparatus,
    misalignment_deg: 0,
    fibreStiffness_N_m_per_rad: 0,
    gamma_per_s: 0,
    squareDrag_per_rad: 0,
    ...changes,
  };
  return { ...plain, ambient_T: ((2 * Math.PI) ** 2 * inertia_kg_m2(plain)) / plain.moment_A_m2 };
}

/** Upward passages through zero. */
function passages(motion: Motion): number[] {
  const times: number[] = [];
  for (let i = 0; i + 1 < motion.angle_rad.length; i++) {
    if (motion.angle_rad[i]! < 0 && motion.angle_rad[i + 1]! >= 0) {
      let low = i * motion.step_s;
      let high = low + motion.step_s;
      for (let k = 0; k < 60; k++) {
        const middle = (low + high) / 2;
        if (placeAt(motion, middle).angle_rad < 0) low = middle;
        else high = middle;
      }
      times.push((low + high) / 2);
    }
  }
  return times;
}

function period(motion: Motion): number {
  const times = passages(motion);
  return (times[times.length - 1]! - times[0]!) / (times.length - 1);
}

describe('equation of motion', () => {
  // T/T0 = (2/pi) K(sin(a/2)). Values for 10, 20, 30 and 80 degrees from the published periods of a pendulum with L = 1 m and
  // g = 9.81 m/s^2, T0 = 2.006066680710647 s, at physics.gmu.edu/~mrseth/pass6.html.
  it.each([
    [10, 2.0098926272986],
    [20, 2.021451257824576],
    [30, 2.04098988951913],
    [80, 2.281885924019639],
  ])('has the published period at an amplitude of %d degrees', (amplitude_deg, pendulum_s) => {
    const motion = integrateMotion(oneHertz({}), still, (amplitude_deg * Math.PI) / 180);
    expect(period(motion) / (pendulum_s / 2.006066680710647)).toBeCloseTo(1, 8);
  });

  // Damped oscillator, f0 = 1 Hz: T_d = 1 / sqrt(1 - (gamma / 2 pi)^2); IEC 60050-351-45-19 for the relation.
  it.each([
    [0.05, 1.000031664374],
    [0.2, 1.000506991218],
    [1, 1.012910951024],
  ])('with gamma = %d per second has the damped period and decay', (gamma, period_s) => {
    const motion = integrateMotion(oneHertz({ gamma_per_s: gamma }), { ...still, length_s: 8 }, 1e-5);
    expect(period(motion)).toBeCloseTo(period_s, 8);
    // After a whole period the amplitude has fallen by exp(-gamma T).
    expect(placeAt(motion, 2 * period_s).angle_rad / placeAt(motion, period_s).angle_rad).toBeCloseTo(
      Math.exp(-gamma * period_s),
      6,
    );
  });

  it('keeps the small motion that the truth states at a twisted, misaligned rest', () => {
    const apparatus: Apparatus = {
      ...boathouse.apparatus,
      fibreStiffness_N_m_per_rad: 6e-6,
      fibreRest_deg: 60,
      gamma_per_s: 0,
      squareDrag_per_rad: 0,
    };
    const rest = restDirection_rad(apparatus, 0, totalField(apparatus, 0).direction_rad);
    const { f0_Hz, shift_per_rad2 } = smallMotion(apparatus, 0, rest);
    for (const amplitude of [0.001, 0.2]) {
      const motion = integrateMotion(apparatus, { ...still, length_s: 60 }, rest + amplitude);
      const about = { ...motion, angle_rad: motion.angle_rad.map((angle) => angle - rest) };
      const f = 1 / period(about);
      // Two turning points: half of peak to peak is the amplitude, which a one-sided start misses by a little.
      const low = Math.min(...about.angle_rad);
      const half = (amplitude - low) / 2;
      expect(f / (f0_Hz * (1 + shift_per_rad2 * half * half))).toBeCloseTo(1, 5);
    }
  });

  it('does not depend on the step of integration', () => {
    const coarse = integrateMotion(oneHertz({ gamma_per_s: 0.05, squareDrag_per_rad: 0.01 }), still, 0.3, 1000);
    const fine = integrateMotion(oneHertz({ gamma_per_s: 0.05, squareDrag_per_rad: 0.01 }), still, 0.3, 4000);
    for (const time of [1.2345, 9.87, 28.6]) {
      expect(placeAt(coarse, time).angle_rad).toBeCloseTo(placeAt(fine, time).angle_rad, 9);
    }
  });
});
