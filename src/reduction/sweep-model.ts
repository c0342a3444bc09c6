import type { Prior } from '../numerics/least-squares.ts';
import { type Bar, type Rest, restAt, type Turn } from './bar-on-fibre.ts';

/** Places of the parameters in the vector; zeros of direction follow, one a frame. */
export const at = { slope: 0, along: 1, across: 2, fibre: 3, twist: 4, zeros: 5 } as const;

/** A model to be fitted. */
export interface SweepModel {
  readonly turn: Turn;
  /** With it f0² = slope · sign · (I + along) + fibre at each point, a straight line on either side; null: the sum of fields as a vector. */
  readonly signs: Int8Array | null;
  /** Rest directions are fitted as well. */
  readonly directions: boolean;
  /** Which parameters stay as they start; zeros of direction never do. */
  readonly fixed: { readonly across: boolean; readonly fibre: boolean; readonly twist: boolean };
  /** Knowledge of the fibre's part of f0² and of its untwisted direction from elsewhere. */
  readonly priors: readonly Prior[];
}

/** Reads the bar out of a parameter vector. */
export function barOf(p: Float64Array): Bar {
  return {
    slope: p[at.slope]!,
    along_A: p[at.along]!,
    across_A: p[at.across]!,
    fibre_Hz2: p[at.fibre]!,
    twist_rad: p[at.twist]!,
  };
}

/** f0² and rest direction of one point under a model; false where the model has no stable rest there. */
export function predict(model: SweepModel, p: Float64Array, point: number, current_A: number, out: Rest): boolean {
  return model.signs === null
    ? restAt(current_A, barOf(p), model.turn, out)
    : restOnBranch(current_A, p, model.signs[point]!, out);
}

function restOnBranch(current_A: number, p: Float64Array, sign: number, out: Rest): boolean {
  const slope = p[at.slope]! * sign;
  const x = current_A + p[at.along]!;
  out.y = slope * x + p[at.fibre]!;
  out.angle = sign > 0 ? 0 : Math.PI;
  out.dy.set([slope, sign * x, slope, 0, 1, 0]);
  out.dAngle.fill(0);
  return true;
}
