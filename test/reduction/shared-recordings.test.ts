import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { Apparatus } from '../../src/reduction/apparatus.ts';
import { reduce } from '../../src/reduction/reduce.ts';
import type { Point } from '../../src/reduction/reduction.ts';

/** Recordings drawn with a known truth; their folder may be missing. */
const folder = new URL('../../../shared/recordings/', import.meta.url);
const there = existsSync(folder);
if (!there) console.log('reduction of the shared recordings: left out, the folder ../shared/recordings is not there');

interface Truth {
  readonly apparatus: { readonly [name: string]: number };
  readonly segments: readonly {
    readonly id: string;
    readonly current_A: number;
    readonly f0_Hz: number;
    readonly equilibrium_deg: number;
  }[];
}

interface Session {
  readonly apparatus: Apparatus;
  readonly segments: readonly { readonly u_current_A?: number; readonly sweep?: 'rising' | 'falling' }[];
}

function read<T>(name: string, file: string): T {
  return JSON.parse(readFileSync(new URL(`${name}/${file}`, folder), 'utf8')) as T;
}

const degree = Math.PI / 180;

describe.skipIf(!there)('true frequencies and rest directions of the shared recordings', () => {
  const names = ['plan_sweep', 'plan_reversed', 'side_near_end', 'oblique_bench', 'plan_swing', 'plan_portrait_1080'];
  it.each(names)('%s gives back what it was drawn from', (name) => {
    const truth = read<Truth>(name, 'truth.json');
    const session = read<Session>(name, 'session.needlebeat.json');
    const points = truth.segments.map(
      (segment, i): Point => ({
        id: segment.id,
        current_A: segment.current_A,
        u_current_A: session.segments[i]?.u_current_A ?? 0,
        sweep: session.segments[i]?.sweep ?? null,
        status: 'measured',
        f0_Hz: { value: segment.f0_Hz, u: 3e-5 * segment.f0_Hz, dof: 200 },
        equilibrium_rad: { value: segment.equilibrium_deg * degree, u: 2e-4, dof: 200 },
        viewFrame: 'A',
      }),
    );
    const r = reduce({ points, apparatus: session.apparatus });
    const { apparatus: a } = truth;
    const moment = a.moment_A_m2!;
    const within = (value: number | null, u: number | null, expected: number, limit: number) => {
      expect(Math.abs(value! - expected) / u!).toBeLessThan(limit);
    };
    expect(r.model?.kind).toBe('turning');
    // No errors were drawn: only the coil's mean over the bar (up to 6 parts in 10 000 lower) and an unknown fibre set them apart.
    within(r.ambient_T, r.u_ambient_T, a.ambient_T!, 2);
    within(r.misalignment_deg, r.u_misalignment_deg, a.misalignment_deg!, 2);
    within(r.moment_A_m2, r.u_moment_A_m2, moment, 1);
    within(r.moment_to_inertia, r.u_moment_to_inertia, a.moment_to_inertia!, 1);
    within(r.slope_Hz2_per_A, r.u_slope_Hz2_per_A, a.slope_Hz2_per_A!, 0.5);
    within(r.intercept_Hz2, r.u_intercept_Hz2, a.intercept_Hz2!, 0.5);
    within(r.apparent_ambient_T, r.u_apparent_ambient_T, a.ambient_T! + a.fibre_stiffness_N_m_per_rad! / moment, 1);
    expect(r.coil_constant_T_per_A! / a.coil_constant_T_per_A! - 1).toBeLessThan(0);
    expect(r.coil_constant_T_per_A! / a.coil_constant_T_per_A! - 1).toBeGreaterThan(-6e-4);
    expect(r.inertia_kg_m2! / a.inertia_kg_m2!).toBeCloseTo(1, 8);
    if (name === 'plan_reversed') {
      expect(r.model).toMatchObject({ fibre: 'separated', turn: 'with the field' });
      within(r.fibre_stiffness_N_m_per_rad, r.u_fibre_stiffness_N_m_per_rad, a.fibre_stiffness_N_m_per_rad!, 1);
      expect(r.u_fibre_stiffness_N_m_per_rad! / r.fibre_stiffness_N_m_per_rad!).toBeLessThan(0.05);
    } else {
      expect(r.model?.fibre).toBe('assumed');
      expect(r.fibre_stiffness_N_m_per_rad).toBeNull();
    }
  });
});
