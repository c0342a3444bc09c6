import { describe, expect, it } from 'vitest';
import type { Apparatus, Fibre } from '../../src/reduction/apparatus.ts';
import { reduce } from '../../src/reduction/reduce.ts';
import type { Point } from '../../src/reduction/reduction.ts';
import { apparatusOf, bench, careful, oneSide, pointsAt, stiffnessOf } from './bench.ts';

const inertia = bench.inertia_kg_m2;
const stiffness = stiffnessOf(bench);
const four = 4 * Math.PI ** 2;
const points = pointsAt(bench, oneSide, careful);
const rig = apparatusOf(bench, 0.002);
const withFibre = (fibre: Fibre): Apparatus => ({ ...rig, fibre });
const off = (found: number | null, expected: number) => Math.abs(found! / expected - 1);
const codes = (r: ReturnType<typeof reduce>) => r.checks.map(({ code }) => code);
/** f0 of the magnet in the place's field on a fibre of some length, where that of the sweep is 0.5 m long. */
const atLength = (length_m: number) =>
  Math.sqrt((bench.moment_A_m2 * bench.ambient_T + (stiffness * 0.5) / length_m) / (four * inertia));
/** A segment that is no step: its frequency without field, or on another length. */
function run(id: string, f0_Hz: number, change: Partial<Point> = {}): Point {
  const estimate = { value: f0_Hz, u: 1e-4 * f0_Hz, dof: 50 };
  return { ...points[0]!, id, current_A: null, f0_Hz: estimate, torsion_Hz: estimate, ...change };
}

describe('the fibre’s stiffness from runs of its own', () => {
  const free = Math.sqrt(stiffness / (four * inertia));

  it('comes from the magnet itself where no field turns it, and then needs no inertia', () => {
    const fibre = { run_without_field: { f0_Hz: free, u_f0_Hz: 1e-3 * free } };
    const r = reduce({ points, apparatus: withFibre(fibre) });
    expect(r.model?.fibre).toBe('given');
    expect(r.model?.sentence).toContain('the run without field');
    expect(off(r.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(off(r.fibre_stiffness_N_m_per_rad, stiffness)).toBeLessThan(1e-6);
    const row = r.budget.fibre_stiffness_N_m_per_rad!.rows.find(({ input }) => input === 'frequency without field')!;
    expect(row.contribution / (2e-3 * stiffness)).toBeCloseTo(1, 3);
    // The field's budget doesn't hold the inertia: both parts of f0² are divided by the same one.
    expect(r.budget.ambient_T!.rows.map(({ input }) => input)).not.toContain('moment of inertia');
    const { magnet: _unknown, ...bare } = withFibre(fibre);
    const without = reduce({ points, apparatus: bare });
    expect(without.model?.fibre).toBe('given');
    expect(off(without.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
  });

  it('comes from another body of known inertia, whose dimensions are in the budget', () => {
    const body = { shape: 'cylinder', mass_kg: 0.02, u_mass_kg: 2e-5, length_m: 0.05, diameter_m: 0.008 } as const;
    const other = (body.mass_kg * (0.75 * body.diameter_m ** 2 + body.length_m ** 2)) / 12;
    const fibre = { run_without_field: { f0_Hz: Math.sqrt(stiffness / (four * other)), body } };
    const r = reduce({ points, apparatus: withFibre(fibre) });
    expect(off(r.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(off(r.fibre_stiffness_N_m_per_rad, stiffness)).toBeLessThan(1e-6);
    const { rows } = r.budget.fibre_stiffness_N_m_per_rad!;
    const mass = rows.find(({ input }) => input === 'mass of the other body')!;
    expect(mass.contribution / (1e-3 * stiffness)).toBeCloseTo(1, 3);
    // κ is that of the other body: the magnet's own inertia drops out of it, but not of the field.
    expect(rows.find(({ input }) => input === 'moment of inertia')?.contribution ?? 0).toBeLessThan(1e-6 * stiffness);
    const field = r.budget.ambient_T!.rows.find(({ input }) => input === 'moment of inertia')!;
    expect(field.contribution / (bench.ambient_T * bench.fibreShare * 0.002)).toBeCloseTo(1, 2);
  });

  it('comes from a segment, which is then no step, with the frequency that a fibre alone gives', () => {
    const segment = run('free', free * 1.001, { torsion_Hz: { value: free, u: 1e-4 * free, dof: 50 }, current_A: 0.4 });
    const fibre = { run_without_field: { segment: 'free' } };
    const r = reduce({ points: [...points, segment], apparatus: withFibre(fibre) });
    expect(off(r.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(r.points_used).not.toContain('free');
    expect(r.points_left_out).toEqual([
      { id: 'free', reason: 'made to find the fibre’s stiffness, no step of the sweep' },
    ]);
    expect(r.fibre_sources).toMatchObject([{ origin: 'run without field', segments: ['free'], weight: 1 }]);
    // One clock for all: it stretches both parts of f0² alike and drops out of the field.
    const clocked = [...points, segment].map((point) => ({ ...point, u_time_scale: 1e-3 }));
    const slow = reduce({ points: clocked, apparatus: withFibre(fibre) });
    const clock = slow.budget.ambient_T!.rows.find(({ input }) => input === 'clock, common to all');
    expect(clock?.contribution ?? 0).toBeLessThan(1e-6 * bench.ambient_T);
    const typed = reduce({
      points: clocked.slice(0, -1),
      apparatus: withFibre({ run_without_field: { f0_Hz: free } }),
    });
    const own = typed.budget.ambient_T!.rows.find(({ input }) => input === 'clock, common to all')!;
    expect(own.contribution / (2e-3 * bench.fibreShare * bench.ambient_T)).toBeCloseTo(1, 1);
  });

  it('comes from several lengths of fibre, typed or as segments', () => {
    const lengths = [0.1, 0.2, 0.35, 0.5];
    const runs_at_lengths = lengths.map((length_m) => ({
      length_m,
      u_length_m: 2e-4,
      f0_Hz: atLength(length_m),
      u_f0_Hz: 1e-4 * atLength(length_m),
    }));
    const fibre = { length_m: 0.5, u_length_m: 5e-4, runs_at_lengths };
    const r = reduce({ points, apparatus: withFibre(fibre) });
    expect(r.model?.sentence).toContain('the runs at several lengths');
    expect(off(r.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(off(r.fibre_lengths!.magnetic_Hz2, (bench.moment_A_m2 * bench.ambient_T) / (four * inertia))).toBeLessThan(
      1e-6,
    );
    expect(r.fibre_lengths!.runs).toHaveLength(4);
    const names = r.budget.ambient_T!.rows.map(({ input }) => input);
    expect(names).toEqual(expect.arrayContaining(['length of the fibre', 'fibre’s part of f0² times its length']));
    const segments = lengths.map((length_m, i) => run(`l${i}`, atLength(length_m)));
    const named = runs_at_lengths.map(({ length_m, u_length_m }, i) => ({ length_m, u_length_m, segment: `l${i}` }));
    const filmed = reduce({
      points: [...points, ...segments],
      apparatus: withFibre({ ...fibre, runs_at_lengths: named }),
    });
    expect(off(filmed.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(filmed.points_left_out).toHaveLength(4);
    const apart = segments.map((point, i) => ({ ...point, current_A: i / 10 }));
    expect(
      codes(reduce({ points: [...points, ...apart], apparatus: withFibre({ ...fibre, runs_at_lengths: named }) })),
    ).toContain('fibre_lengths_at_currents');
  });

  it('is combined where it is known twice, by the uncertainties, and raised where the two disagree', () => {
    const typed = { stiffness_N_m_per_rad: stiffness * 1.02, u_stiffness_N_m_per_rad: 0.02 * stiffness };
    const run_without_field = { f0_Hz: free, u_f0_Hz: 0.005 * free };
    const r = reduce({ points, apparatus: withFibre({ ...typed, run_without_field }) });
    expect(codes(r)).toContain('fibre_sources_combined');
    expect(r.fibre_sources.map(({ origin }) => origin)).toEqual(['typed', 'run without field']);
    // By hand: u 2 % (with the inertia's 0.2 %) and 1 % of the fibre's part.
    const [a, b] = [1 / (0.02 ** 2 + 0.00204 ** 2), 1 / 0.01 ** 2];
    expect(r.fibre_sources[0]!.weight).toBeCloseTo(a / (a + b), 2);
    expect(off(r.fibre_stiffness_N_m_per_rad, stiffness * (1 + (0.02 * a) / (a + b)))).toBeLessThan(1e-3);
    expect(r.u_fibre_stiffness_N_m_per_rad! / stiffness).toBeLessThan(0.0095);
    const wrong = { ...typed, stiffness_N_m_per_rad: stiffness * 1.3 };
    const apart = reduce({ points, apparatus: withFibre({ ...wrong, run_without_field }) });
    expect(codes(apart)).toContain('fibre_sources_disagree');
    expect(apart.u_fibre_stiffness_N_m_per_rad!).toBeGreaterThan(5 * r.u_fibre_stiffness_N_m_per_rad!);
    const unsure = { stiffness_N_m_per_rad: stiffness * 1.3 };
    const one = reduce({ points, apparatus: withFibre({ ...unsure, run_without_field }) });
    expect(codes(one)).toContain('fibre_source_chosen');
    expect(off(one.fibre_stiffness_N_m_per_rad, stiffness)).toBeLessThan(1e-6);
  });

  it('says why a run could not be used', () => {
    const bad = run('free', free, { status: 'unmeasured', f0_Hz: null, torsion_Hz: null });
    const r = reduce({ points: [...points, bad], apparatus: withFibre({ run_without_field: { segment: 'free' } }) });
    expect(codes(r)).toContain('fibre_run_unmeasured');
    expect(r.model?.fibre).toBe('assumed');
    const left = run('free', free, { leftOut: 'a draught' });
    const without = reduce({
      points: [...points, left],
      apparatus: withFibre({ run_without_field: { segment: 'free' } }),
    });
    expect(codes(without)).toContain('fibre_run_left_out');
    expect(without.points_left_out).toEqual([{ id: 'free', reason: 'a draught' }]);
    const some = [0.2, 0.5].map((length_m) => ({ length_m, f0_Hz: atLength(length_m) }));
    const too = reduce({ points, apparatus: withFibre({ length_m: 0.5, runs_at_lengths: some }) });
    expect(codes(too)).toContain('fibre_lengths_too_few');
    const sure = some.map((one) => ({ ...one, u_f0_Hz: 1e-4 }));
    expect(codes(reduce({ points, apparatus: withFibre({ runs_at_lengths: sure }) }))).toContain(
      'fibre_length_missing',
    );
    const back = sure.map((one, i) => ({ ...one, f0_Hz: sure[1 - i]!.f0_Hz }));
    const none = reduce({ points, apparatus: withFibre({ length_m: 0.5, runs_at_lengths: back }) });
    expect(codes(none)).toContain('fibre_lengths_show_none');
    const { magnet: _unknown, ...bare } = withFibre({ stiffness_N_m_per_rad: stiffness });
    expect(codes(reduce({ points, apparatus: bare }))).toContain('stiffness_needs_inertia');
  });

  it('agrees with drawing its inputs (JCGM 101)', () => {
    const draws = 400;
    const fibre = {
      stiffness_N_m_per_rad: stiffness,
      u_stiffness_N_m_per_rad: 0.03 * stiffness,
      run_without_field: { f0_Hz: free, u_f0_Hz: 0.01 * free, body: { inertia_kg_m2: inertia, u_inertia_kg_m2: 1e-8 } },
    };
    const r = reduce({ points, apparatus: withFibre(fibre), monteCarloDraws: draws, seed: 5 });
    for (const { name, u_over_budget } of r.monte_carlo!.results) {
      expect(Math.abs(u_over_budget - 1), name).toBeLessThan(3.5 / Math.sqrt(2 * draws) + 0.03);
    }
  });
});
