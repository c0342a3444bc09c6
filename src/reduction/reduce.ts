import { yorkLine } from '../numerics/york-line.ts';
import type { Check } from '../oscillation/ring-down.ts';
import { coilConstant } from './coil-constant.ts';
import { inertia } from './inertia.ts';
import type { Reduction, ReductionInput } from './reduction.ts';
import { noCoil, noMagnet, tooFewCurrents } from './sentences.ts';
import { distinctCurrents, selectPoints } from './used-points.ts';

/** From frequencies and currents to field, moment and stiffness. Never throws for anything a user can meet. */
export function reduce(input: ReductionInput): Reduction {
  const { used, leftOut } = selectPoints(input.points);
  const checks: Check[] = [];
  const coil = input.apparatus?.coil;
  const magnet = input.apparatus?.magnet;
  const k = coil ? coilConstant(coil, magnet) : null;
  const j = magnet ? inertia(magnet) : null;
  if (k === null) checks.push(noCoil());
  if (j === null) checks.push(noMagnet());
  const currents = distinctCurrents(used);
  if (currents < 2) checks.push(tooFewCurrents(currents));
  const tiny = 1e-12;
  const line =
    currents < 2
      ? null
      : yorkLine(
          used.map((p) => p.current_A),
          used.map((p) => p.f0_Hz.value ** 2),
          used.map((p) => p.u_current_A),
          used.map((p) => Math.max(2 * p.f0_Hz.value * p.f0_Hz.u, tiny)),
        );
  const four = 4 * Math.PI ** 2;
  const ratio = line && k ? (four * Math.abs(line.slope)) / k.value : null;
  const u_ratio = line && k ? ratio! * Math.hypot(line.u_slope / line.slope, k.u / k.value) : null;
  const along_A = line ? line.intercept / line.slope : null;
  const u_along_A = line
    ? Math.sqrt(line.u_intercept ** 2 + (along_A! * line.u_slope) ** 2 - 2 * along_A! * line.covariance) /
      Math.abs(line.slope)
    : null;
  const ambient = along_A !== null && k ? Math.abs(along_A) * k.value : null;
  const u_ambient = along_A !== null && k ? Math.hypot(u_along_A! * k.value, along_A * k.u) : null;
  const moment = ratio !== null && j ? ratio * j.value : null;
  return {
    ambient_T: ambient,
    u_ambient_T: u_ambient,
    apparent_ambient_T: ambient,
    u_apparent_ambient_T: u_ambient,
    ambient_along_axis_T: along_A !== null && k ? along_A * k.value : null,
    u_ambient_along_axis_T: u_ambient,
    ambient_across_axis_T: null,
    u_ambient_across_axis_T: null,
    misalignment_deg: null,
    u_misalignment_deg: null,
    slope_Hz2_per_A: line?.slope ?? null,
    u_slope_Hz2_per_A: line?.u_slope ?? null,
    intercept_Hz2: line?.intercept ?? null,
    u_intercept_Hz2: line?.u_intercept ?? null,
    coil_constant_T_per_A: k?.value ?? null,
    u_coil_constant_T_per_A: k?.u ?? null,
    moment_to_inertia: ratio,
    u_moment_to_inertia: u_ratio,
    moment_A_m2: moment,
    u_moment_A_m2: moment !== null ? moment * Math.hypot(u_ratio! / ratio!, j!.u / j!.value) : null,
    inertia_kg_m2: j?.value ?? null,
    u_inertia_kg_m2: j?.u ?? null,
    fibre_stiffness_N_m_per_rad: null,
    u_fibre_stiffness_N_m_per_rad: null,
    fibre_share: null,
    u_fibre_share: null,
    points_used: line ? used.map((p) => p.id) : [],
    points_left_out: leftOut,
    checks,
    model: null,
    fit: null,
    points: [],
    leave_one_out: [],
    sweeps: null,
    repeats: [],
    budget: {},
    correlation: { results: [], matrix: [] },
    monte_carlo: null,
    expected_field: null,
    curve: null,
  };
}
