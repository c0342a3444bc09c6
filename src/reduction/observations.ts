import type { Meter } from './apparatus.ts';
import type { UsablePoint } from './used-points.ts';

/** The used points as aligned columns; SI units. */
export interface Observations {
  readonly ids: readonly string[];
  readonly current_A: Float64Array;
  readonly u_current_A: Float64Array;
  /** f0², Hz². */
  readonly y: Float64Array;
  /** Its standard uncertainty without what the clock has in common for all points. */
  readonly u_y: Float64Array;
  readonly dof_y: Float64Array;
  /** Relative standard uncertainty of the clock; counts twice in f0². */
  readonly u_clock: Float64Array;
  /** Rest direction, 0 where there is none. */
  readonly angle: Float64Array;
  readonly u_angle: Float64Array;
  readonly dof_angle: Float64Array;
  /** Index of the point's zero of directions in `frames`, -1 where it has no direction that says anything. */
  readonly frame: Int32Array;
  readonly frames: readonly string[];
  /** No point has an uncertainty of its own in frequency or current. */
  readonly bare: boolean;
}

const usualClock = 2e-5;
/** Below this share of f0² an uncertainty is raised to it, so that no weight is infinite. */
const leastShare = 1e-9;

/**
 * Squares the frequencies, takes the clock's common part out of their uncertainties, adds the meter's last digit to those of the
 * currents (evenly spread over it: step / √12, JCGM 100:2008, F.2.2.1) and lays everything out in columns.
 */
export function observe(points: readonly UsablePoint[], meter?: Meter): Observations {
  const n = points.length;
  const column = (of: (point: UsablePoint) => number) => Float64Array.from(points, of);
  const clock = column((point) => point.u_time_scale ?? usualClock);
  const named = sharedFrames(points);
  const frameOf = (point: UsablePoint) => (point.equilibrium_rad === null ? -1 : named.indexOf(point.viewFrame));
  const bare = points.every((point) => point.f0_Hz.u === 0 && point.u_current_A === 0);
  return {
    ids: points.map((point) => point.id),
    current_A: column((point) => point.current_A),
    u_current_A: column((point) => Math.hypot(point.u_current_A, (meter?.resolution_A ?? 0) / Math.sqrt(12))),
    y: column((point) => point.f0_Hz.value ** 2),
    u_y: Float64Array.from({ length: n }, (_, i) => ownSquareUncertainty(points[i]!, clock[i]!)),
    dof_y: column((point) => point.f0_Hz.dof),
    u_clock: clock,
    angle: column((point) => point.equilibrium_rad?.value ?? 0),
    u_angle: column((point) => Math.max(point.equilibrium_rad?.u ?? 0, 1e-7)),
    dof_angle: column((point) => point.equilibrium_rad?.dof ?? Number.POSITIVE_INFINITY),
    frame: Int32Array.from(points, frameOf),
    frames: named,
    bare,
  };
}

/**
 * u of a frequency without what the clock (its relative u) has in common; at least a tenth of the whole, since the two can't be
 * told apart better than that.
 */
export function ownUncertainty(f0_Hz: { readonly value: number; readonly u: number }, clock = usualClock): number {
  return Math.sqrt(Math.max(f0_Hz.u ** 2 - (clock * f0_Hz.value) ** 2, (0.1 * f0_Hz.u) ** 2));
}

function ownSquareUncertainty({ f0_Hz }: UsablePoint, clock: number): number {
  return Math.max(2 * f0_Hz.value * ownUncertainty(f0_Hz, clock), leastShare * f0_Hz.value ** 2);
}

/** Names of the zeros of direction that at least two different currents share: one alone says nothing. */
function sharedFrames(points: readonly UsablePoint[]): string[] {
  const currents = new Map<string, Set<number>>();
  for (const { viewFrame, equilibrium_rad, current_A } of points) {
    if (equilibrium_rad === null) continue;
    currents.set(viewFrame, (currents.get(viewFrame) ?? new Set()).add(current_A));
  }
  return [...currents].filter(([, seen]) => seen.size >= 2).map(([name]) => name);
}

/** The same observations without those at `index`, for leaving one out. */
export function without(data: Observations, index: number): Observations {
  const keep = <T extends Float64Array | Int32Array>(column: T): T => column.filter((_, i) => i !== index) as T;
  return {
    ...data,
    ids: data.ids.filter((_, i) => i !== index),
    current_A: keep(data.current_A),
    u_current_A: keep(data.u_current_A),
    y: keep(data.y),
    u_y: keep(data.u_y),
    dof_y: keep(data.dof_y),
    u_clock: keep(data.u_clock),
    angle: keep(data.angle),
    u_angle: keep(data.u_angle),
    dof_angle: keep(data.dof_angle),
    frame: keep(data.frame),
  };
}

/** The same observations with uncertainties of frequency and current, and of direction, multiplied. */
export function scaled(data: Observations, frequencies: number, directions: number): Observations {
  const times = (column: Float64Array, factor: number) => column.map((value) => value * factor);
  return {
    ...data,
    u_current_A: times(data.u_current_A, frequencies),
    u_y: times(data.u_y, frequencies),
    u_angle: times(data.u_angle, directions),
  };
}

/**
 * The same observations as if they had been taken coarsely (a thousandth of f0², 0.3°): a fit from a rough start finds its way
 * on these and is finished on the real ones.
 */
export function coarse(data: Observations): Observations {
  return {
    ...data,
    u_y: data.u_y.map((u, i) => Math.hypot(u, 1e-3 * data.y[i]!)),
    u_angle: data.u_angle.map((u) => Math.hypot(u, 5e-3)),
  };
}
