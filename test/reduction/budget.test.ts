import { describe, expect, it } from 'vitest';
import { reduce } from '../../src/reduction/reduce.ts';
import type { ResultName } from '../../src/reduction/reduction.ts';
import { bench, bothSides, careful, oneSide, pointsAt } from './bench.ts';

const dimensions = {
  coil: { turns_per_coil: 94, radius_m: 0.15, u_radius_m: 3e-4, spacing_m: 0.15, u_spacing_m: 5e-4 },
  magnet: {
    shape: 'cylinder',
    mass_kg: 0.0171,
    u_mass_kg: 5e-6,
    length_m: 0.052,
    u_length_m: 5e-5,
    diameter_m: 0.0075,
    u_diameter_m: 2e-5,
  },
  meter: { u_gain: 0.003, u_zero_A: 2e-4, resolution_A: 1e-3 },
} as const;

describe('the budget', () => {
  const points = pointsAt(bench, oneSide, { ...careful, seed: 4 }).map((point) => ({ ...point, u_time_scale: 2e-5 }));
  const r = reduce({ points, apparatus: dimensions });

  it('has rows that combine to the uncertainty of every result', () => {
    for (const [name, budget] of Object.entries(r.budget)) {
      const total = Math.hypot(...budget.rows.map(({ contribution }) => contribution));
      expect(total / budget.u, name).toBeCloseTo(1, 9);
      expect(budget.u).toBe(r[`u_${name as ResultName}`]);
      expect(budget.expanded_u / budget.u).toBeCloseTo(budget.coverage_factor, 9);
      for (const row of budget.rows) {
        if (row.sensitivity !== null && row.u !== null) {
          expect(Math.abs(row.sensitivity) * row.u).toBeCloseTo(row.contribution, 12);
        }
      }
    }
  });

  it('carries what all steps have in common whole', () => {
    const row = (name: ResultName, input: string) => r.budget[name]!.rows.find((other) => other.input === input)!;
    // A meter's scale stretches the current axis: the field goes with it, m/J against it; its zero shifts the field by k times it.
    expect(row('ambient_T', 'meter’s scale, common to all').contribution / (0.003 * r.ambient_T!)).toBeCloseTo(1, 3);
    expect(
      row('moment_to_inertia', 'meter’s scale, common to all').contribution / (0.003 * r.moment_to_inertia!),
    ).toBeCloseTo(1, 3);
    expect(
      row('ambient_T', 'meter’s zero, common to all').contribution / (2e-4 * r.coil_constant_T_per_A!),
    ).toBeCloseTo(1, 3);
    // A clock that runs fast by a share makes f0², slope and moment larger by twice it, and leaves the field alone.
    expect(row('slope_Hz2_per_A', 'clock, common to all').contribution / (2 * 2e-5 * r.slope_Hz2_per_A!)).toBeCloseTo(
      1,
      3,
    );
    expect(row('ambient_T', 'clock, common to all').contribution).toBeLessThan(1e-4 * r.u_ambient_T!);
    // The mass enters the moment in proportion, and nothing else here.
    expect(row('moment_A_m2', 'mass of the bar').contribution / (r.moment_A_m2! * (5e-6 / 0.0171))).toBeCloseTo(1, 4);
    // The bar's length enters coil constant and inertia as one input.
    expect(r.budget.moment_A_m2!.rows.filter(({ input }) => input === 'length of the bar')).toHaveLength(1);
  });

  it('adds the last digit of the meter to each step, evenly spread', () => {
    expect(r.points[0]!.u_current_A).toBeCloseTo(Math.hypot(1e-3, 1e-3 / Math.sqrt(12)), 9);
  });

  it('gives degrees of freedom and a factor from Student’s t where the scatter set the uncertainty', () => {
    const loud = reduce({ points: pointsAt(bench, oneSide, { ...careful, scatter: 5, seed: 21 }), apparatus: {} });
    const { effective_dof, coverage_factor } = loud.budget.slope_Hz2_per_A!;
    expect(loud.fit!.scale_frequencies).toBeGreaterThan(2);
    expect(effective_dof!).toBeGreaterThan(5.9);
    expect(effective_dof!).toBeLessThan(12);
    expect(coverage_factor).toBeGreaterThan(2.17);
  });

  it('says which inputs carry no uncertainty', () => {
    const { magnet } = dimensions;
    const bare = reduce({ points, apparatus: { coil: dimensions.coil, magnet: { ...magnet, u_mass_kg: 0 } } });
    const check = bare.checks.find(({ code }) => code === 'inputs_without_uncertainty');
    expect(check?.message).toContain('mass of the bar');
    expect(check?.message).not.toContain('coil radius');
  });

  it('has correlations between -1 and 1, and strong ones where results share their inputs', () => {
    const { results, matrix } = r.correlation;
    for (const row of matrix) for (const value of row) expect(Math.abs(value)).toBeLessThanOrEqual(1 + 1e-9);
    const of = (a: ResultName, b: ResultName) => matrix[results.indexOf(a)]![results.indexOf(b)]!;
    expect(of('moment_to_inertia', 'moment_A_m2')).toBeGreaterThan(0.9);
    expect(of('coil_constant_T_per_A', 'moment_A_m2')).toBeLessThan(0);
    expect(of('ambient_T', 'ambient_along_axis_T')).toBeCloseTo(1, 6);
  });

  it('agrees with drawing the inputs (JCGM 101)', () => {
    const care = { u_f0_relative: 1e-4, u_current_A: 3e-4, u_angle_rad: 1e-3, seed: 6 };
    const tilted = { ...bench, misalignment_rad: 0.15, turn: 'with the field' as const, twist_rad: 0.1 };
    const draws = 600;
    for (const input of [
      { points: pointsAt(tilted, bothSides, care), apparatus: dimensions },
      // One side: the fibre's share and its untwisted direction are assumed, and only their product turns the rest directions.
      { points: pointsAt(tilted, oneSide, care), apparatus: dimensions },
      { points, apparatus: { ...dimensions, fibre: { stiffness_N_m_per_rad: 2.7e-6, u_stiffness_N_m_per_rad: 2e-7 } } },
    ]) {
      const drawn = reduce({ ...input, monteCarloDraws: draws, seed: 3 });
      expect(drawn.monte_carlo!.failed).toBe(0);
      expect(drawn.monte_carlo!.results.length).toBeGreaterThan(8);
      for (const { name, mean, u, low, high, u_over_budget } of drawn.monte_carlo!.results) {
        // Three and a half standard errors of a standard deviation of so many draws, and what curvature may add.
        expect(Math.abs(u_over_budget - 1), name).toBeLessThan(3.5 / Math.sqrt(2 * draws) + 0.03);
        // A misalignment that frequencies don't show moves the results one way only: the value is that of none.
        const oneWay = drawn.model!.kind === 'line';
        expect(Math.abs(mean - drawn[name]!), name).toBeLessThan((oneWay ? 0.5 : 0.25) * u);
        expect((high - low) / 2 / drawn.budget[name]!.expanded_u, name).toBeGreaterThan(0.8);
        expect((high - low) / 2 / drawn.budget[name]!.expanded_u, name).toBeLessThan(1.2);
      }
      const again = reduce({ ...input, monteCarloDraws: draws, seed: 3 });
      expect(again.monte_carlo).toEqual(drawn.monte_carlo);
    }
  });
});
