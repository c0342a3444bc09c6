import type { Estimate } from '../numerics/estimate.ts';
import type { Check } from '../oscillation/ring-down.ts';

/** One segment as the reduction sees it: SI units, angles in radians. */
export interface Point {
  readonly id: string;
  /** null: not typed yet. */
  readonly current_A: number | null;
  readonly u_current_A: number;
  readonly sweep: 'rising' | 'falling' | null;
  readonly status: 'measured' | 'doubtful' | 'unmeasured';
  readonly f0_Hz: Estimate | null;
  /** Rest direction in the horizontal plane, anticlockwise from above; null where unknown. Only differences within one `viewFrame` mean anything. */
  readonly equilibrium_rad: Estimate | null;
  /** Points whose rest directions share one zero carry the same name here (recording and view kind). */
  readonly viewFrame: string;
  /** The user left it out, with this reason. */
  readonly leftOut?: string;
}
