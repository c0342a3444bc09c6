import { uDampedFrequency } from '../numerics/damped-frequency-bound.ts';
import type { Apparatus } from './apparatus.ts';
import { blankRest, restAt, wrappedLine } from './bar-on-fibre.ts';
import { coilConstant } from './coil-constant.ts';
import { inertia } from './inertia.ts';
import { magneticConstant_N_per_A2 } from './loop-field.ts';
import { torqueConstant } from './torque-constant.ts';

/** What a user knows or guesses before the bench is set up. */
export interface SweepPlanInput {
  /** Coil and magnet must be described; `fibre` where known. */
  readonly apparatus: Apparatus;
  readonly currents_A: readonly number[];
  /** Guess of the horizontal field of the place, T, and of its direction from the coil axis. */
  readonly ambient_T: number;
  readonly misalignment_deg?: number | undefined;
  /** Moment; or, for a cylinder, the remanence of its material (m = B_r V / μ0). */
  readonly moment_A_m2?: number | undefined;
  readonly remanence_T?: number | undefined;
  /** Damping, amplitude just after the nudge, scatter of the followed angle, frames per second and relative uncertainty of f0 aimed at. */
  readonly gamma_per_s?: number | undefined;
  readonly amplitude_deg?: number | undefined;
  readonly angle_noise_deg?: number | undefined;
  readonly frame_rate_Hz?: number | undefined;
  readonly u_relative?: number | undefined;
}

/** What to expect at one current. */
export interface PlannedStep {
  readonly current_A: number;
  /** Size of coil and ambient field together. */
  readonly field_T: number;
  readonly f0_Hz: number;
  /** Rest direction from the coil axis, in (-90, 90]. */
  readonly rest_deg: number;
  /** The bar has turned round. */
  readonly turned: boolean;
  /** Shortest ring-down that gives the uncertainty aimed at and at least six swings; null where damping forbids it at any length. */
  readonly shortest_s: number | null;
  /** Smallest frame rate: eight frames a swing (common practice), so that neither folding nor exposure matters. */
  readonly smallest_frame_rate_Hz: number;
}

/** The plan, or what it lacks. */
export type SweepPlan =
  | { readonly ok: true; readonly steps: readonly PlannedStep[]; readonly reversal_A: number }
  | { readonly ok: false; readonly lacks: readonly ('coil' | 'magnet' | 'moment' | 'ambient')[] };

const leastSwings = 6;
const framesPerSwing = 8;

/** Frequency, length and frame rate to expect at every step of a sweep, from the apparatus and a guess of the field. */
export function planSweep(input: SweepPlanInput): SweepPlan {
  const { apparatus } = input;
  const moment = input.moment_A_m2 ?? momentOf(apparatus, input.remanence_T);
  const lacks = [
    ...(apparatus.coil === undefined ? ['coil' as const] : []),
    ...(apparatus.magnet === undefined ? ['magnet' as const] : []),
    ...(moment === null || !(moment > 0) ? ['moment' as const] : []),
    ...(input.ambient_T > 0 ? [] : ['ambient' as const]),
  ];
  if (lacks.length > 0 || apparatus.coil === undefined || apparatus.magnet === undefined || moment === null) {
    return { ok: false, lacks };
  }
  const k = coilConstant(apparatus.coil, apparatus.magnet).value;
  const perHz2 = torqueConstant(1, inertia(apparatus.magnet).value);
  const direction = ((input.misalignment_deg ?? 0) * Math.PI) / 180;
  const bar = {
    slope: (moment * k) / perHz2,
    along_A: (input.ambient_T * Math.cos(direction)) / k,
    across_A: (input.ambient_T * Math.sin(direction)) / k,
    fibre_Hz2: (apparatus.fibre?.stiffness_N_m_per_rad ?? 0) / perHz2,
    twist_rad: 0,
  };
  const rest = blankRest();
  const steps = input.currents_A.flatMap((current_A) => {
    if (!restAt(current_A, bar, 'with the field', rest)) return [];
    const f0_Hz = Math.sqrt(rest.y);
    return [
      {
        current_A,
        field_T: Math.hypot(current_A + bar.along_A, bar.across_A) * k,
        f0_Hz,
        rest_deg: (wrappedLine(rest.angle) * 180) / Math.PI,
        turned: (current_A + bar.along_A) * bar.along_A < 0,
        shortest_s: shortest(f0_Hz, input),
        smallest_frame_rate_Hz: framesPerSwing * f0_Hz,
      },
    ];
  });
  return { ok: true, steps, reversal_A: -bar.along_A };
}

/** Moment of an evenly magnetised cylinder, A m²: B_r V / μ0. */
function momentOf({ magnet }: Apparatus, remanence_T: number | undefined): number | null {
  if (remanence_T === undefined || magnet === undefined || !('shape' in magnet) || magnet.shape !== 'cylinder')
    return null;
  return (remanence_T * Math.PI * (magnet.diameter_m / 2) ** 2 * magnet.length_m) / magneticConstant_N_per_A2;
}

/** Length at which the bound of the frequency's uncertainty reaches the aim, by halving; at least six swings. */
function shortest(f0_Hz: number, input: SweepPlanInput): number | null {
  const aim = (input.u_relative ?? 1e-4) * f0_Hz;
  const bound = (duration_s: number) =>
    uDampedFrequency({
      amplitude: input.amplitude_deg ?? 8,
      noise: input.angle_noise_deg ?? 0.05,
      rate_Hz: input.frame_rate_Hz ?? 30,
      duration_s,
      gamma_per_s: input.gamma_per_s ?? 0.05,
    });
  const least = leastSwings / f0_Hz;
  if (bound(least) <= aim) return least;
  let low = least;
  let high = least;
  while (bound(high) > aim) {
    low = high;
    high *= 2;
    if (high > 1e5) return null;
  }
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (bound(middle) > aim) low = middle;
    else high = middle;
  }
  return high;
}
