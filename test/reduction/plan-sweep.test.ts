import { describe, expect, it } from 'vitest';
import { uDampedFrequency } from '../../src/numerics/damped-frequency-bound.ts';
import { planSweep } from '../../src/reduction/plan-sweep.ts';

const apparatus = {
  coil: { turns_per_coil: 154, radius_m: 0.2, spacing_m: 0.2 },
  magnet: { inertia_kg_m2: 1.53125e-5 },
  fibre: { stiffness_N_m_per_rad: 3.0e-6 },
};

function stepsOf(plan: ReturnType<typeof planSweep>) {
  if (!plan.ok) throw new Error(plan.lacks.join());
  return plan.steps;
}

describe('planning a sweep', () => {
  it('expects the frequencies that the bench then has', () => {
    // The synthetic set of test/reference: 0.322825146 Hz at no current, 1.349891660 Hz at 0.5 A.
    const [none, half] = stepsOf(planSweep({ apparatus, currents_A: [0, 0.5], ambient_T: 2e-5, moment_A_m2: 3 }));
    expect(none!.f0_Hz).toBeCloseTo(0.322825146, 8);
    expect(half!.f0_Hz).toBeCloseTo(1.34989166, 8);
    expect(half!.smallest_frame_rate_Hz).toBeCloseTo(8 * 1.34989166, 6);
    expect(none!.turned).toBe(false);
  });

  it('gives the shortest ring-down that reaches the uncertainty aimed at, or six swings', () => {
    const input = { apparatus, currents_A: [0, 1], ambient_T: 2e-5, moment_A_m2: 3, u_relative: 5e-5 };
    const [slow, fast] = stepsOf(planSweep(input));
    const bound = (f0: number, duration_s: number) =>
      uDampedFrequency({ amplitude: 8, noise: 0.05, rate_Hz: 30, duration_s, gamma_per_s: 0.05 }) / f0;
    expect(slow!.shortest_s!).toBeGreaterThan(6 / slow!.f0_Hz - 1e-9);
    expect(bound(slow!.f0_Hz, slow!.shortest_s!)).toBeLessThanOrEqual(5e-5 * 1.0001);
    expect(fast!.shortest_s!).toBeLessThan(slow!.shortest_s!);
    // Damping so strong that no length reaches it.
    expect(stepsOf(planSweep({ ...input, gamma_per_s: 5, u_relative: 1e-6 }))[0]!.shortest_s).toBeNull();
  });

  it('says what it lacks, and takes a cylinder’s moment from its remanence', () => {
    expect(planSweep({ apparatus: {}, currents_A: [0], ambient_T: 0 })).toEqual({
      ok: false,
      lacks: ['coil', 'magnet', 'moment', 'ambient'],
    });
    const magnet = { shape: 'cylinder', mass_kg: 0.035, length_m: 0.06, diameter_m: 0.01 } as const;
    const input = { apparatus: { coil: apparatus.coil, magnet }, currents_A: [0.5], ambient_T: 2e-5 };
    // m = B_r V / μ0: 1.30 T, 5 mm radius, 60 mm give 4.875 A m² (computed).
    const byRemanence = stepsOf(planSweep({ ...input, remanence_T: 1.3 }));
    expect(byRemanence[0]!.f0_Hz).toBeCloseTo(stepsOf(planSweep({ ...input, moment_A_m2: 4.875 }))[0]!.f0_Hz, 3);
  });

  it('shows where the bar turns round', () => {
    const plan = planSweep({ apparatus, currents_A: [-0.1], ambient_T: 2e-5, moment_A_m2: 3, misalignment_deg: 4 });
    expect(stepsOf(plan)[0]!.turned).toBe(true);
    expect(plan.ok && plan.reversal_A).toBeCloseTo((-2e-5 * Math.cos((4 * Math.PI) / 180)) / 6.923657398e-4, 6);
  });
});

describe('the bound of a damped frequency', () => {
  it('has the published closed-form values', () => {
    // Computed from the formula: amplitude, noise (one unit), rate, time, damping, bound in Hz.
    for (const [amplitude, noise, rate_Hz, duration_s, gamma_per_s, bound] of [
      [10, 0.02, 30, 30, 0, 1.73266e-6],
      [10, 0.02, 30, 30, 0.05, 3.756598e-6],
      [10, 0.02, 30, 30, 0.01, 2.016035e-6],
      [10, 0.02, 30, 30, 0.1, 7.714205e-6],
      [10, 0.02, 30, 30, 0.2, 2.080118e-5],
      [10, 0.02, 60, 60, 0.05, 1.928551e-6],
      [5, 0.05, 30, 20, 0.05, 2.660386e-5],
    ] as const) {
      expect(uDampedFrequency({ amplitude, noise, rate_Hz, duration_s, gamma_per_s }) / bound).toBeCloseTo(1, 6);
    }
  });

  it('goes evenly to its limit without damping', () => {
    const at = (gamma_per_s: number) =>
      uDampedFrequency({ amplitude: 1, noise: 0.01, rate_Hz: 30, duration_s: 20, gamma_per_s });
    // To first order the bound grows by half of γT.
    for (const gamma of [1e-6, 1e-5, 1e-4]) expect((at(gamma) / at(0) - 1) / (gamma * 10)).toBeCloseTo(1, 2);
    // Where the two ways of writing it meet (2γT = 0.5).
    expect(at(0.0124999999) / at(0.0125000001)).toBeCloseTo(1, 8);
  });
});
