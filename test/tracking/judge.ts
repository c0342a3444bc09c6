import type { Trace, TrackOutcome } from '../../src/tracking/trace.ts';
import type { Drawn } from './drawn-bar.ts';

/** How a trace compares with what was drawn; degrees and pixels. */
export interface Verdict {
  readonly poses: number;
  /** Mean error, what its own standard uncertainty says of it, slope of measured against true, rms of the rest. */
  readonly bias_deg: number;
  readonly u_common_deg: number;
  readonly slope: number;
  readonly noise_deg: number;
  /** Greatest distance of the error from its mean. */
  readonly worst_deg: number;
  /** Mean and scatter of the middle's error. */
  readonly middle_px: number;
  readonly middleNoise_px: number;
}

const DEG = 180 / Math.PI;

/** The trace of an outcome that must be one. */
export function traceOf(outcome: TrackOutcome): Trace {
  if (!outcome.ok) throw new Error(`no trace: ${outcome.message}`);
  return outcome.trace;
}

/** Compares a trace with the truth of the drawing it was taken from. */
export function judge(outcome: TrackOutcome, drawn: Drawn): Verdict {
  const trace = traceOf(outcome);
  const truth = new Map(drawn.frames.map((frame, i) => [frame.index, drawn.truth[i]!]));
  const rows = Array.from(trace.frame_index, (index, i) => {
    const { angle_deg, x_px, y_px } = truth.get(index)!;
    return {
      truth: angle_deg,
      error: trace.angle[i]! * DEG - angle_deg,
      dx: trace.x_px[i]! - x_px,
      dy: trace.y_px[i]! - y_px,
    };
  });
  const mean = (of: (row: (typeof rows)[number]) => number) =>
    rows.reduce((sum, row) => sum + of(row), 0) / rows.length;
  // A bar is the same after half a turn.
  const error = mean((row) => row.error);
  const bias_deg = error - 180 * Math.round(error / 180);
  const middle = mean((row) => row.truth);
  const tt = mean((row) => (row.truth - middle) ** 2);
  const excess = mean((row) => (row.truth - middle) * (row.error - error)) / tt;
  const dx = mean((row) => row.dx);
  const dy = mean((row) => row.dy);
  return {
    poses: rows.length,
    bias_deg,
    u_common_deg: trace.u_common * DEG,
    slope: 1 + excess,
    noise_deg: Math.sqrt(mean((row) => (row.error - error - excess * (row.truth - middle)) ** 2)),
    worst_deg: Math.max(...rows.map((row) => Math.abs(row.error - error))),
    middle_px: Math.hypot(dx, dy),
    middleNoise_px: Math.sqrt(mean((row) => (row.dx - dx) ** 2 + (row.dy - dy) ** 2)),
  };
}
