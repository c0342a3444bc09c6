import { seededRandom } from '../../src/numerics/random.ts';
import { blankRest, restAt, type Turn } from '../../src/reduction/bar-on-fibre.ts';
import type { Point } from '../../src/reduction/reduction.ts';

/** A bench whose truth is known, from which points are drawn. */
export interface Bench {
  readonly coil_T_per_A: number;
  readonly inertia_kg_m2: number;
  readonly moment_A_m2: number;
  readonly ambient_T: number;
  /** Direction of the ambient field from the coil axis. */
  readonly misalignment_rad: number;
  /** Fibre stiffness over moment times ambient field. */
  readonly fibreShare: number;
  readonly twist_rad: number;
  readonly turn: Turn;
}

export const bench: Bench = {
  coil_T_per_A: 5.6e-4,
  inertia_kg_m2: 4e-6,
  moment_A_m2: 1.35,
  ambient_T: 2.9e-5,
  misalignment_rad: 0,
  fibreShare: 0.07,
  twist_rad: 0,
  turn: 'free',
};

/** How well the points are measured, and how much more they scatter than they say. */
export interface Care {
  readonly u_f0_relative: number;
  readonly u_current_A: number;
  /** null: no rest directions. */
  readonly u_angle_rad: number | null;
  readonly scatter?: number;
  /** Seed of the errors; absent: none are drawn. */
  readonly seed?: number;
}

export const careful: Care = { u_f0_relative: 1e-4, u_current_A: 1e-3, u_angle_rad: null };

/** Stiffness of the bench's fibre, N m/rad. */
export function stiffnessOf(b: Bench): number {
  return b.fibreShare * b.moment_A_m2 * b.ambient_T;
}

/** Points of a sweep at the bench. */
export function pointsAt(b: Bench, currents: readonly number[], care: Care): Point[] {
  const random = care.seed === undefined ? null : seededRandom(care.seed);
  const error = (u: number) => (random === null ? 0 : u * (care.scatter ?? 1) * random.gaussian());
  const four = 4 * Math.PI ** 2 * b.inertia_kg_m2;
  const bar = {
    slope: (b.moment_A_m2 * b.coil_T_per_A) / four,
    along_A: (b.ambient_T * Math.cos(b.misalignment_rad)) / b.coil_T_per_A,
    across_A: (b.ambient_T * Math.sin(b.misalignment_rad)) / b.coil_T_per_A,
    fibre_Hz2: stiffnessOf(b) / four,
    twist_rad: b.twist_rad,
  };
  const rest = blankRest();
  return currents.map((current, i) => {
    if (!restAt(current, bar, b.turn, rest)) throw new Error(`the bench has no rest direction at ${current} A`);
    const f0 = Math.sqrt(rest.y);
    return {
      id: `s${String(i + 1).padStart(2, '0')}`,
      current_A: current + error(care.u_current_A),
      u_current_A: care.u_current_A,
      sweep: null,
      status: 'measured',
      f0_Hz: { value: f0 * (1 + error(care.u_f0_relative)), u: care.u_f0_relative * f0, dof: 200 },
      u_time_scale: 0,
      equilibrium_rad:
        care.u_angle_rad === null
          ? null
          : { value: rest.angle + 0.7 + error(care.u_angle_rad), u: care.u_angle_rad, dof: 200 },
      viewFrame: 'A plan',
    };
  });
}

/** The apparatus as it is, or as it was measured with errors of the stated size. */
export function apparatusOf(b: Bench, u_relative = 0, seed?: number) {
  const random = seed === undefined ? null : seededRandom(seed);
  const measured = (value: number) => value * (1 + (random === null ? 0 : u_relative * random.gaussian()));
  return {
    coil: { constant_T_per_A: measured(b.coil_T_per_A), u_constant_T_per_A: u_relative * b.coil_T_per_A },
    magnet: { inertia_kg_m2: measured(b.inertia_kg_m2), u_inertia_kg_m2: u_relative * b.inertia_kg_m2 },
  };
}

/** Currents of a sweep on one side of the reversal, and through it. */
export const oneSide = [0, 0.06, 0.14, 0.25, 0.4, 0.58, 0.78, 1.0];
export const bothSides = [0.3, 0.15, 0.05, 0, -0.03, -0.12, -0.2, -0.34];
