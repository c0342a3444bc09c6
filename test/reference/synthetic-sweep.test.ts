import { describe, expect, it } from 'vitest';
import { reduce } from '../../src/reduction/reduce.ts';
import type { Point } from '../../src/reduction/reduction.ts';
import { torqueConstant } from '../../src/reduction/torque-constant.ts';

/**
 * A sweep with exact inputs, computed (not published): J = 1.53125e-5 kg m², m = 3.0 A m², B = 20 µT along the coil axis,
 * κ = 3.0e-6 N m/rad, 154 turns, 0.200 m, CODATA 2022; f is undamped at small amplitude, the fibre untwisted on either side.
 */
const sweep = [
  [-0.5, 1.623700685],
  [-0.4, 1.280102401],
  [-0.3, 0.936504117],
  [-0.2, 0.592905833],
  [-0.1, 0.24930755],
  [0, 0.104216075],
  [0.1, 0.447814358],
  [0.2, 0.791412642],
  [0.3, 1.135010926],
  [0.4, 1.47860921],
  [0.5, 1.822207493],
] as const;

const k = 6.923657398e-4;
const apparatus = {
  coil: { turns_per_coil: 154, radius_m: 0.2, spacing_m: 0.2 },
  magnet: { inertia_kg_m2: 1.53125e-5 },
} as const;

function point(current_A: number, f0_Hz: number, u_relative = 1e-6): Point {
  return {
    id: `I=${current_A}`,
    current_A,
    u_current_A: 0,
    sweep: null,
    status: 'measured',
    f0_Hz: { value: f0_Hz, u: u_relative * f0_Hz, dof: 1000 },
    u_time_scale: 0,
    equilibrium_rad: null,
    viewFrame: 'A',
  };
}

/** The table to full digits, from its own inputs; the printed nine digits are asserted against it. */
function exact(current_A: number): number {
  const field = Math.abs(k_exact * current_A + 2e-5);
  return (3.0 * field + 3.0e-6) / (4 * Math.PI ** 2 * 1.53125e-5);
}
const k_exact = ((4 / 5) ** 1.5 * 1.25663706127e-6 * 154) / 0.2;

describe('the synthetic sweep', () => {
  it('is what its inputs give', () => {
    for (const [current, square] of sweep) expect(Math.abs(exact(current) - square)).toBeLessThan(6e-10);
  });

  it('gives back field, moment and stiffness from both branches, to 1e-9', () => {
    const r = reduce({ apparatus, points: sweep.map(([current]) => point(current, Math.sqrt(exact(current)))) });
    expect(r.model?.kind).toBe('two branches');
    expect(r.model?.turn).toBe('set back');
    expect(r.model?.fibre).toBe('separated');
    const off = (found: number | null, expected: number) => Math.abs(found! / expected - 1);
    expect(off(r.coil_constant_T_per_A, k_exact)).toBeLessThan(1e-12);
    expect(off(r.coil_constant_T_per_A, k)).toBeLessThan(1e-9);
    expect(off(r.slope_Hz2_per_A, 3.435982838)).toBeLessThan(1e-9);
    expect(off(r.intercept_Hz2, 0.104216075)).toBeLessThan(5e-9);
    expect(off(r.ambient_T, 2.0e-5)).toBeLessThan(1e-9);
    expect(off(r.moment_A_m2, 3.0)).toBeLessThan(1e-9);
    expect(off(r.fibre_stiffness_N_m_per_rad, 3.0e-6)).toBeLessThan(1e-9);
  });

  it('gives the field 5 % too high from one branch alone, says so, and covers it', () => {
    const one = sweep.filter(([current]) => current >= 0);
    const r = reduce({ apparatus, points: one.map(([current]) => point(current, Math.sqrt(exact(current)))) });
    expect(r.model).toMatchObject({ kind: 'line', fibre: 'assumed' });
    expect(Math.abs(r.ambient_T! / 2.1e-5 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(r.apparent_ambient_T! / 2.1e-5 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(r.moment_A_m2! / 3.0 - 1)).toBeLessThan(1e-9);
    expect(r.fibre_stiffness_N_m_per_rad).toBeNull();
    expect(r.checks.map(({ code }) => code)).toContain('fibre_not_separated');
    expect((r.ambient_T! - 2.0e-5) / r.u_ambient_T!).toBeLessThan(1);
    expect(r.u_apparent_ambient_T!).toBeLessThan(0.05 * r.u_ambient_T!);
  });

  it('takes the stiffness from a bar that no field turns', () => {
    // An equal-inertia non-magnetic bar would swing at 0.070446222 Hz.
    expect(torqueConstant(0.070446222 ** 2, 1.53125e-5) / 3.0e-6).toBeCloseTo(1, 7);
    const one = sweep.filter(([current]) => current >= 0);
    const run_without_field = { f0_Hz: 0.070446222, u_f0_Hz: 1e-9, body: { inertia_kg_m2: 1.53125e-5 } };
    const r = reduce({
      apparatus: { ...apparatus, fibre: { run_without_field } },
      points: one.map(([current]) => point(current, Math.sqrt(exact(current)))),
    });
    expect(Math.abs(r.fibre_stiffness_N_m_per_rad! / 3.0e-6 - 1)).toBeLessThan(1e-7);
    expect(r.model?.fibre).toBe('given');
    expect(Math.abs(r.ambient_T! / 2.0e-5 - 1)).toBeLessThan(1e-8);
  });

  it('has the stated bias where a straight line is put through a misaligned sweep', () => {
    // Computed: angle to the axis 2°, 5°, 10°, I = 0 … 0.5 A in 6 steps, no fibre: field -0.020, -0.123, -0.492 % (of the whole
    // field), moment 2.999921, 2.999507, 2.998031 by an unweighted line. Weighting is by equal u of f0² here.
    for (const [angle_deg, bias, moment] of [
      [2, -0.0002, 2.999921],
      [5, -0.00123, 2.999507],
      [10, -0.00492, 2.998031],
    ] as const) {
      const angle = (angle_deg * Math.PI) / 180;
      const points = [0, 0.1, 0.2, 0.3, 0.4, 0.5].map((current) => {
        const field = Math.hypot(k_exact * current + 2e-5 * Math.cos(angle), 2e-5 * Math.sin(angle));
        const f0 = Math.sqrt((3.0 * field) / (4 * Math.PI ** 2 * 1.53125e-5));
        // Coarse enough that the bend is not seen.
        return { ...point(current, f0), f0_Hz: { value: f0, u: 0.02 / (2 * f0), dof: 1000 } };
      });
      const r = reduce({ apparatus, points });
      expect(r.model?.kind).toBe('line');
      expect(r.ambient_T! / 2e-5 - 1).toBeCloseTo(bias, 4);
      expect(r.moment_A_m2!).toBeCloseTo(moment, 5);
    }
  });
});
