import type { Estimate } from '../numerics/estimate.ts';

/** How much a check weighs: `note` to be read, `doubt` makes a segment doubtful, `fault` leaves it unmeasured. */
export type Severity = 'note' | 'doubt' | 'fault';

/** One finding about a segment or a reduction: a code for scripts, a plain sentence for people. */
export interface Check {
  readonly code: string;
  readonly severity: Severity;
  readonly message: string;
}

/** What the fit of one segment is told besides its trace. */
export interface RingDownOptions {
  /** Relative standard uncertainty of the recording's clock. */
  readonly u_time_scale: number;
  /** Fibre's share of the restoring torque where it is known from elsewhere, as value and u; absent: a thin fibre's is assumed. */
  readonly fibreShare?: { readonly value: number; readonly u: number };
  /** Exposure of a frame in seconds where known; it lowers the amplitude seen. */
  readonly exposure_s?: number;
  readonly view: 'plan' | 'oblique' | 'side';
  readonly facing_rad?: number | null;
}

/** The decaying oscillation of one segment as fitted. All frequencies in Hz, angles in radians (or px, see `unit`). */
export interface RingDown {
  readonly unit: 'rad' | 'px';
  /** Undamped natural frequency in the limit of small amplitude. */
  readonly f0_Hz: Estimate;
  /** Frequency as observed: damped, at the segment's mean-square amplitude. */
  readonly fd_Hz: Estimate;
  /** Amplitude decays as exp(-gamma t). */
  readonly gamma_per_s: Estimate;
  /** Quality factor pi f0 / gamma; null where gamma is not distinguishable from zero. */
  readonly q: Estimate | null;
  readonly equilibrium: Estimate;
  readonly amplitudeStart: number;
  readonly amplitudeEnd: number;
  readonly cycles: number;
  /** Number of poses used in the fit. */
  readonly used: number;
  readonly residualRms: number;
  /** Frequency by zero crossings, the independent cross-check; null where too few crossings. */
  readonly crossings_Hz: Estimate | null;
  readonly swing: { readonly frequency_Hz: number; readonly share: number } | null;
  /** Amplitude-dependent share of the period applied: f0 / (frequency at mean-square amplitude) - 1. */
  readonly amplitudeShift: number;
  /** Quadratic drag per radian where AICc asked for it, else 0. */
  readonly quadraticDrag: number;
  /** Aligned with the trace: model value and residual of every row, and 1 where the row was used in the fit. */
  readonly fitted: Float64Array;
  readonly residual: Float64Array;
  readonly usedRows: Uint8Array;
}

/** Either a ring-down with its checks, or none with the fault that says why. */
export type RingDownOutcome =
  | { readonly ok: true; readonly ringDown: RingDown; readonly checks: readonly Check[] }
  | { readonly ok: false; readonly checks: readonly Check[] };
