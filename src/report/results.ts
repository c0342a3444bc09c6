import type { Check } from '../oscillation/ring-down.ts';
import type { Apparatus, Place } from '../reduction/apparatus.ts';
import type { Reduction } from '../reduction/reduction.ts';

/** Whether a segment has a number, and whether to trust it yet: `doubtful` and `unmeasured` have a check that says why. */
export type Status = 'measured' | 'doubtful' | 'unmeasured';

/** One segment in the results file: a row of results.csv. Units are in the names; `u_…` are standard uncertainties; null: not to be had. */
export interface SegmentResult {
  readonly id: string;
  readonly recording: string;
  readonly view: string;
  /** null only where a results file made elsewhere doesn't say: its rest directions can't be compared then. */
  readonly view_kind: 'plan' | 'oblique' | 'side' | null;
  readonly start_s: number;
  readonly end_s: number;
  readonly current_A: number | null;
  readonly u_current_A: number;
  readonly sweep: 'rising' | 'falling' | null;
  readonly status: Status;
  readonly f0_Hz: number | null;
  readonly u_f0_Hz: number | null;
  /** Degrees of freedom of u_f0_Hz, as far as the segment itself shows. */
  readonly dof_f0: number | null;
  readonly fd_Hz: number | null;
  readonly u_fd_Hz: number | null;
  readonly gamma_per_s: number | null;
  readonly u_gamma_per_s: number | null;
  readonly q_factor: number | null;
  readonly u_q_factor: number | null;
  readonly amplitude_start_deg: number | null;
  readonly amplitude_end_deg: number | null;
  readonly equilibrium_deg: number | null;
  readonly u_equilibrium_deg: number | null;
  readonly cycles: number | null;
  /** Frames the container claims within the segment. */
  readonly frames: number;
  /** Of those, how many could not be decoded. */
  readonly frames_lost: number;
  /** Decoded frames in which the bar was not followed. */
  readonly frames_refused: number;
  /** Poses used in the fit. */
  readonly frames_used: number;
  readonly residual_rms_deg: number | null;
  readonly swing_Hz: number | null;
  readonly swing_share: number;
  /** Relative standard uncertainty of the recording's clock, contained in u_f0_Hz and common to all segments of a recording. */
  readonly u_time_scale: number;
  readonly left_out: string | null;
  readonly note: string;
  readonly checks: readonly Check[];
}

/** The results file, `results.json`. */
export interface Results {
  readonly format: 'needlebeat/results';
  readonly version: 1;
  readonly program: string;
  readonly session: { readonly title: string; readonly sha256: string };
  /** The recordings measured: file name, size and a hash that recognises the file. */
  readonly recordings: readonly RecordingResult[];
  /** The ffmpeg that decoded them. */
  readonly ffmpeg: string;
  readonly apparatus?: Apparatus;
  readonly place?: Place;
  readonly segments: readonly SegmentResult[];
  readonly reduction: Reduction;
}

/** A recording as the results remember it. */
export interface RecordingResult {
  readonly id: string;
  readonly file: string;
  readonly bytes: number;
  /** Hash of size and both ends of the file: recognises a file that has moved. */
  readonly content: string;
  readonly time_scale: number;
  readonly u_time_scale: number;
}
