import { describe, expect, it } from 'vitest';
import { nextSteps } from '../../src/reduction/next-steps.ts';
import { reduce } from '../../src/reduction/reduce.ts';
import { apparatusOf, bench, bothSides, pointsAt } from './bench.ts';

const care = { u_f0_relative: 1e-4, u_current_A: 3e-4, u_angle_rad: null };
const apparatus = apparatusOf(bench, 1e-4);

describe('the next step', () => {
  it('is as good as it is said to be', () => {
    const currents = bothSides.filter((_, i) => i !== 1 && i !== 5);
    const before = reduce({ points: pointsAt(bench, currents, care), apparatus });
    const candidates = [-0.34, -0.2, -0.12, 0.05, 0.15, 0.3];
    const next = nextSteps(before, { currents_A: candidates })!;
    for (const { current_A, remaining } of next.steps) {
      const after = reduce({ points: pointsAt(bench, [...currents, current_A], care), apparatus });
      const share = (name: 'ambient_T' | 'moment_to_inertia' | 'fibre_stiffness_N_m_per_rad') => {
        const fitPart = (r: typeof before) =>
          Math.hypot(
            ...r.budget[name]!.rows.filter(({ input }) => /frequencies|currents/.test(input)).map(
              (row) => row.contribution,
            ),
          );
        return fitPart(after) / fitPart(before);
      };
      // The rest of the budget (coil, inertia, choice of model) is small for these, or moves with the fit.
      expect(remaining.moment_to_inertia).toBeCloseTo(share('moment_to_inertia'), 1);
      expect(remaining.ambient_T!).toBeLessThan(1);
    }
    expect(Math.abs(next.best.moment_to_inertia!.current_A)).toBeGreaterThanOrEqual(0.3);
  });

  it('asks for reversed current where fibre and field are not separated', () => {
    const r = reduce({ points: pointsAt(bench, [0, 0.1, 0.3, 0.6], care), apparatus });
    const next = nextSteps(r)!;
    expect(next.best.ambient_T!.current_A).toBeLessThan(-bench.ambient_T / bench.coil_T_per_A);
    expect(next.best.ambient_T!.remaining.ambient_T!).toBeLessThan(0.5);
    expect(next.best.fibre_stiffness_N_m_per_rad!.current_A).toBeLessThan(0);
    // The fit's own current range is not left, but for its mirror image.
    for (const { current_A } of next.steps) expect(Math.abs(current_A)).toBeLessThanOrEqual(0.6);
  });

  it('is nothing without a fit', () => {
    expect(nextSteps(reduce({ points: [] }))).toBeNull();
  });
});
