import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { reduce } from '../../src/reduction/reduce.ts';
import type { Point, Reduction } from '../../src/reduction/reduction.ts';
import { apparatusOf, bench, bothSides, careful, oneSide, pointsAt, stiffnessOf } from './bench.ts';

const apparatus = apparatusOf(bench, 0.002);
const codes = (reduction: Reduction) => reduction.checks.map(({ code }) => code);
const off = (found: number | null, expected: number) => Math.abs(found! / expected - 1);

/** Every number in a value, with its path. */
function numbers(value: unknown, path = ''): [string, number][] {
  if (typeof value === 'number') return [[path, value]];
  if (value === null || typeof value !== 'object') return [];
  return Object.entries(value).flatMap(([key, inner]) => numbers(inner, `${path}.${key}`));
}

describe('reduce', () => {
  it('chooses a line on one side, two branches through the reversal, the turning where there are rest directions', () => {
    const line = reduce({ points: pointsAt(bench, oneSide, careful), apparatus });
    expect(line.model).toMatchObject({ kind: 'line', fibre: 'assumed', turn: 'one side' });
    const branches = reduce({ points: pointsAt(bench, bothSides, { ...careful, u_current_A: 1e-4 }), apparatus });
    expect(branches.model).toMatchObject({ kind: 'two branches', fibre: 'separated', turn: 'set back' });
    expect(off(branches.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(off(branches.fibre_stiffness_N_m_per_rad, stiffnessOf(bench))).toBeLessThan(1e-5);
    const tilted = { ...bench, misalignment_rad: 0.15, turn: 'with the field' as const, twist_rad: 0.1 };
    const care = { u_f0_relative: 1e-4, u_current_A: 3e-4, u_angle_rad: 1e-3 };
    const turning = reduce({ points: pointsAt(tilted, bothSides, care), apparatus });
    expect(turning.model).toMatchObject({ kind: 'turning', fibre: 'separated', turn: 'with the field' });
    // No errors were drawn, but what is assumed of the fibre's untwisted direction (0 ± 15°; here 6°) pulls a little.
    const within = (value: number | null, expected: number, u: number | null) => {
      expect(Math.abs(value! - expected) / u!).toBeLessThan(0.25);
    };
    within(turning.ambient_T, bench.ambient_T, turning.u_ambient_T);
    within(turning.moment_A_m2, bench.moment_A_m2, turning.u_moment_A_m2);
    within(turning.misalignment_deg, (0.15 * 180) / Math.PI, turning.u_misalignment_deg);
    expect(codes(turning)).toContain('reversal');
    const hyperbola = reduce({
      points: pointsAt({ ...tilted, misalignment_rad: 0.3 }, bothSides, { ...care, u_angle_rad: null }),
      apparatus,
    });
    expect(hyperbola.model?.kind).toBe('hyperbola');
    expect(codes(hyperbola)).toContain('across_from_frequencies');
    expect(hyperbola.misalignment_deg).toBeNull();
  });

  it('tells how the fibre followed a bar that turned round', () => {
    const care = { u_f0_relative: 1e-5, u_current_A: 1e-4, u_angle_rad: 1e-3 };
    for (const turn of ['with the field', 'set back', 'against the field'] as const) {
      const currents = turn === 'against the field' ? bothSides.filter((current) => current !== -0.12) : bothSides;
      const b = { ...bench, misalignment_rad: 0.15, turn, twist_rad: 0.1, fibreShare: 0.03 };
      const r = reduce({ points: pointsAt(b, currents, care), apparatus });
      expect(r.model?.turn).toBe(turn);
      expect(off(r.ambient_T, b.ambient_T)).toBeLessThan(1e-4);
    }
  });

  it('uses a stiffness from elsewhere, and says where the data contradict it', () => {
    const given = { ...apparatus, fibre: { stiffness_N_m_per_rad: stiffnessOf(bench), u_stiffness_N_m_per_rad: 1e-8 } };
    const r = reduce({ points: pointsAt(bench, oneSide, careful), apparatus: given });
    expect(r.model?.fibre).toBe('given');
    expect(off(r.ambient_T, bench.ambient_T)).toBeLessThan(1e-6);
    expect(codes(r)).not.toContain('fibre_not_separated');
    const wrong = {
      ...apparatus,
      fibre: { stiffness_N_m_per_rad: 3 * stiffnessOf(bench), u_stiffness_N_m_per_rad: 1e-7 },
    };
    const both = pointsAt(bench, bothSides, { ...careful, u_current_A: 1e-4 });
    expect(codes(reduce({ points: both, apparatus: wrong }))).toContain('fibre_disagrees');
  });

  it('says which points it left out and why', () => {
    const points = pointsAt(bench, oneSide, careful);
    const set = (i: number, change: Partial<Point>) => {
      points[i] = { ...points[i]!, ...change };
    };
    set(1, { status: 'unmeasured', f0_Hz: null });
    set(2, { current_A: null });
    set(3, { status: 'doubtful', f0_Hz: { value: 9, u: 1e-3, dof: 5 } });
    set(4, { leftOut: 'somebody walked past' });
    const r = reduce({ points, apparatus });
    expect(r.points_used).toEqual(['s01', 's06', 's07', 's08']);
    expect(r.points_left_out).toEqual([
      { id: 's02', reason: 'no frequency could be measured' },
      { id: 's03', reason: 'its current has not been typed' },
      { id: 's04', reason: 'its frequency is doubtful' },
      { id: 's05', reason: 'somebody walked past' },
    ]);
    // Those with a current and a frequency are still shown against the fit.
    const shown = r.points.filter(({ used }) => !used);
    expect(shown.map(({ id }) => id)).toEqual(['s04', 's05']);
    expect(shown[0]!.standardised_residual).toBeGreaterThan(1000);
    expect(shown[1]!.standardised_residual).toBeCloseTo(0, 5);
    expect(off(r.apparent_ambient_T, bench.ambient_T * 1.07)).toBeLessThan(1e-6);
  });

  it('uses doubtful points only where too few others are left, and says so', () => {
    const points = pointsAt(bench, [0, 0.5, 1], careful).map((point) => ({ ...point, status: 'doubtful' as const }));
    const r = reduce({ points, apparatus });
    expect(r.points_used).toHaveLength(3);
    expect(codes(r)).toContain('doubtful_used');
  });

  it('goes exactly through two points, with the uncertainty of the inputs alone', () => {
    const r = reduce({ points: pointsAt(bench, [0, 1], careful), apparatus });
    expect(codes(r)).toContain('no_spare_points');
    expect(r.fit?.dof).toBe(0);
    expect(r.fit?.p_value).toBeNull();
    // By hand: u of the slope from f0² at both ends and the current at both ends.
    const [low, high] = r.points as [Reduction['points'][0], Reduction['points'][0]];
    const slope = r.slope_Hz2_per_A!;
    const u = Math.sqrt(low.u_f0_squared_Hz2 ** 2 + high.u_f0_squared_Hz2 ** 2 + 2 * (slope * 1e-3) ** 2);
    const { rows } = r.budget.slope_Hz2_per_A!;
    const part = rows.filter(({ input }) => /frequencies|currents/.test(input)).map(({ contribution }) => contribution);
    expect(Math.hypot(...part) / u).toBeCloseTo(1, 6);
  });

  it('gives reasons instead of numbers where there is too little', () => {
    const one = reduce({ points: pointsAt(bench, [0.5, 0.5], careful), apparatus });
    expect(one.ambient_T).toBeNull();
    expect(one.u_ambient_T).toBeNull();
    expect(one.coil_constant_T_per_A).toBe(bench.coil_T_per_A);
    expect(codes(one)).toContain('too_few_currents');
    expect(one.model).toBeNull();
    const none = reduce({ points: [] });
    expect(codes(none)).toEqual(['too_few_currents', 'no_coil', 'no_magnet']);
    const bare = reduce({ points: pointsAt(bench, oneSide, careful) });
    expect(bare.slope_Hz2_per_A).not.toBeNull();
    expect(bare.ambient_T).toBeNull();
    expect(codes(bare)).toEqual(expect.arrayContaining(['no_coil', 'no_magnet']));
    const falling = pointsAt(bench, oneSide, careful).map((point) => ({
      ...point,
      current_A: 0.5 + 0 * point.current_A!,
    }));
    expect(codes(reduce({ points: falling, apparatus }))).toContain('too_few_currents');
  });

  it('raises uncertainties to the scatter and points out, but keeps, the point that is off', () => {
    const points = pointsAt(bench, [...oneSide, ...oneSide.toReversed()], { ...careful, seed: 11 });
    points[3] = { ...points[3]!, current_A: points[3]!.current_A! + 0.03 };
    const r = reduce({ points, apparatus });
    expect(r.points_used).toHaveLength(16);
    expect(r.fit!.scale_frequencies).toBeGreaterThan(3);
    expect(codes(r)).toContain('scatter_above_uncertainty');
    const row = r.checks.find(({ code }) => code === 'off_the_line');
    expect(row?.message).toContain('s04');
    expect(r.checks.filter(({ code }) => code === 'off_the_line')).toHaveLength(1);
    const moved = r.leave_one_out.find(({ id }) => id === 's04')!;
    const others = r.leave_one_out.filter(({ id }) => id !== 's04').map((other) => other.largest_change_in_u!);
    expect(moved.largest_change_in_u!).toBeGreaterThan(Math.max(...others));
  });

  it('notes where the points agree better than their currents’ uncertainties would have it', () => {
    // The errors drawn are a tenth of those stated.
    const quiet = reduce({ points: pointsAt(bench, oneSide, { ...careful, scatter: 0.1, seed: 11 }), apparatus });
    expect(codes(quiet)).toContain('scatter_below_uncertainty');
    const usual = reduce({ points: pointsAt(bench, oneSide, { ...careful, seed: 11 }), apparatus });
    expect(codes(usual)).not.toContain('scatter_below_uncertainty');
  });

  it('leaving one out is what a sweep without it gives', () => {
    const points = pointsAt(bench, oneSide, { ...careful, seed: 5 });
    const all = reduce({ points, apparatus });
    const less = reduce({ points: points.filter((_, i) => i !== 2), apparatus });
    expect(
      all.leave_one_out[2]!.moment_to_inertia_change! / (less.moment_to_inertia! - all.moment_to_inertia!),
    ).toBeCloseTo(1, 4);
    expect(all.leave_one_out[2]!.ambient_change_T! / (less.ambient_T! - all.ambient_T!)).toBeCloseTo(1, 2);
  });

  it('tells falling from rising steps, and the scatter of repeated currents', () => {
    const up = pointsAt(bench, oneSide, { ...careful, u_current_A: 1e-4, seed: 2 });
    const down = pointsAt(bench, oneSide, { ...careful, u_current_A: 1e-4, seed: 3 });
    const points = [
      ...up.map((point, i) => ({ ...point, current_A: oneSide[i]!, sweep: 'rising' as const })),
      ...down.map((point, i) => ({ ...point, id: `d${i}`, current_A: oneSide[i]!, sweep: 'falling' as const })),
    ];
    const quiet = reduce({ points, apparatus });
    expect(quiet.sweeps!.p_value).toBeGreaterThan(0.01);
    expect(quiet.repeats).toHaveLength(oneSide.length);
    const spread = quiet.repeats.map(({ scatter_over_u }) => scatter_over_u ** 2);
    expect(spread.reduce((sum, value) => sum + value, 0) / spread.length).toBeLessThan(2.5);
    // The field of the place rises by 0.5 µT before the way down.
    const drifted = points.map((point) => {
      if (point.sweep === 'rising') return point;
      const square = point.f0_Hz!.value ** 2 + (quiet.slope_Hz2_per_A! / bench.coil_T_per_A) * 0.5e-6;
      return { ...point, f0_Hz: { ...point.f0_Hz!, value: Math.sqrt(square) } };
    });
    const r = reduce({ points: drifted, apparatus });
    expect(codes(r)).toContain('sweeps_differ');
    expect(r.sweeps!.difference_T! * 1e6).toBeCloseTo(0.5, 0);
  });

  it('ignores rest directions that belong to no field', () => {
    const points = pointsAt(bench, oneSide, { ...careful, u_angle_rad: 1e-3 }).map((point, i) => ({
      ...point,
      equilibrium_rad: { ...point.equilibrium_rad!, value: [0, 1, 0.3, -1.2, 0.8, -0.4, 1.4, -0.9][i]! },
    }));
    const r = reduce({ points, apparatus });
    expect(codes(r)).toContain('directions_ignored');
    expect(r.model?.kind).toBe('line');
    expect(off(r.apparent_ambient_T, bench.ambient_T * 1.07)).toBeLessThan(1e-4);
  });

  it('moves with its data as it must: order, zero of directions, mirror, reversed leads, unit of the current', () => {
    const tilted = { ...bench, misalignment_rad: 0.15, turn: 'with the field' as const, twist_rad: 0.1 };
    const points = pointsAt(tilted, bothSides, { u_f0_relative: 1e-4, u_current_A: 3e-4, u_angle_rad: 1e-3, seed: 8 });
    const base = reduce({ points, apparatus });
    const same = (other: Reduction, sign: 1 | -1, tolerance = 1e-6) => {
      expect(off(other.ambient_T, base.ambient_T!)).toBeLessThan(tolerance);
      expect(off(other.u_ambient_T, base.u_ambient_T!)).toBeLessThan(1e-3);
      expect(off(other.moment_A_m2, base.moment_A_m2!)).toBeLessThan(tolerance);
      expect(off(other.fibre_stiffness_N_m_per_rad, base.fibre_stiffness_N_m_per_rad!)).toBeLessThan(1e-4);
      expect(other.misalignment_deg).toBeCloseTo(sign * base.misalignment_deg!, 3);
    };
    same(reduce({ points: points.toReversed(), apparatus }), 1);
    const turned = (shift: number, sign: 1 | -1) =>
      points.map((point) => ({
        ...point,
        equilibrium_rad: { ...point.equilibrium_rad!, value: sign * point.equilibrium_rad!.value + shift },
      }));
    same(reduce({ points: turned(2.1, 1), apparatus }), 1);
    same(reduce({ points: turned(0, -1), apparatus }), -1);
    const leads = reduce({ points: points.map((point) => ({ ...point, current_A: -point.current_A! })), apparatus });
    same(leads, 1);
    expect(leads.ambient_along_axis_T!).toBeLessThan(0);
    expect(codes(leads)).toContain('ambient_opposed');
    const milli = points.map((point) => ({
      ...point,
      current_A: 1000 * point.current_A!,
      u_current_A: 1000 * point.u_current_A,
    }));
    const coil = {
      constant_T_per_A: apparatus.coil.constant_T_per_A / 1000,
      u_constant_T_per_A: apparatus.coil.u_constant_T_per_A / 1000,
    };
    same(reduce({ points: milli, apparatus: { ...apparatus, coil } }), 1);
  });

  it('gives plain JSON without NaN or Infinity, whatever comes in', () => {
    const point = fc.record({
      current_A: fc.option(
        fc.oneof(
          fc.constantFrom(0, 0.1, -0.1, 0.5),
          fc.double({ min: -2, max: 2, noNaN: true }).map((current) => current + 0),
        ),
      ),
      f0: fc.option(fc.double({ min: 0, max: 5, noNaN: true })),
      u: fc.constantFrom(0, 1e-6, 1e-3, 0.1),
      u_current_A: fc.constantFrom(0, 1e-3),
      angle: fc.option(fc.double({ min: -1.5, max: 1.5, noNaN: true }).map((angle) => angle + 0)),
      status: fc.constantFrom('measured' as const, 'doubtful' as const, 'unmeasured' as const),
      sweep: fc.constantFrom('rising' as const, 'falling' as const, null),
    });
    fc.assert(
      fc.property(fc.array(point, { maxLength: 7 }), (drawn) => {
        const points = drawn.map(({ f0, u, angle, ...rest }, i) => ({
          ...rest,
          id: `s${i}`,
          f0_Hz: f0 === null ? null : { value: f0, u, dof: Number.POSITIVE_INFINITY },
          equilibrium_rad: angle === null ? null : { value: angle, u: 1e-4, dof: 10 },
          viewFrame: 'A',
        }));
        const r = reduce({
          points,
          apparatus,
          place: { latitude_deg: 50, longitude_deg: 8, height_m: 100, date: '2026-12-01' },
        });
        expect(JSON.parse(JSON.stringify(r))).toEqual(r);
        for (const [path, value] of numbers(r)) expect(Number.isFinite(value), `${path} = ${value}`).toBe(true);
        expect(r.points_used.length + r.points_left_out.length >= (r.model === null ? 0 : points.length)).toBe(true);
      }),
      { seed: 1, numRuns: 60 },
    );
  });

  it('shows the expected field beside the measured one, or why not', () => {
    const points = pointsAt(bench, oneSide, careful);
    const place = { latitude_deg: 51.5, longitude_deg: -0.1, height_m: 0, date: '2026-12-01' };
    const r = reduce({ points, apparatus, place });
    // Spot value of the package's model: 19557.04 nT.
    expect(r.expected_field!.horizontal_T * 1e9).toBeCloseTo(19557.0, 0);
    expect(r.expected_field!.measured_less_expected_share).toBeCloseTo(r.ambient_T! / 19.557e-6 - 1, 4);
    const late = reduce({ points, apparatus, place: { ...place, date: '2040-01-01' } });
    expect(late.expected_field).toBeNull();
    expect(codes(late)).toContain('no_expected_field');
  });

  it('has a curve that passes where the fitted points do', () => {
    const r = reduce({ points: pointsAt(bench, bothSides, { ...careful, u_current_A: 1e-4 }), apparatus });
    const { current_A, f0_squared_Hz2, u_f0_squared_Hz2, rest_from_axis_deg } = r.curve!;
    expect(rest_from_axis_deg).toBeNull();
    expect(f0_squared_Hz2).toHaveLength(current_A.length);
    for (const point of r.points) {
      const next = current_A.findIndex((current) => current >= point.current_A);
      const [x0, x1] = [current_A[next - 1]!, current_A[next]!];
      const share = (point.current_A - x0) / (x1 - x0);
      const value = f0_squared_Hz2[next - 1]! * (1 - share) + f0_squared_Hz2[next]! * share;
      expect(value).toBeCloseTo(point.fitted_f0_squared_Hz2!, 6);
    }
    expect(Math.min(...u_f0_squared_Hz2)).toBeGreaterThan(0);
  });
});
