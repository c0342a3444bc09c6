import type { SessionRecordings } from '../../src/measuring/open-recordings.ts';
import type { Check, RingDown, RingDownOptions } from '../../src/oscillation/ring-down.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import type { Apparatus } from '../../src/reduction/apparatus.ts';
import type { Results, SegmentResult } from '../../src/report/results.ts';
import type { SessionFile } from '../../src/session/read-session.ts';
import type { TrackOutcome } from '../../src/tracking/trace.ts';

/** The fit of one stretch, exactly as measuring does it, and spectra for drawing. */
export interface FitTask {
  readonly kind: 'fit';
  readonly outcome: TrackOutcome;
  readonly options: RingDownOptions;
  readonly apparatus: Apparatus | undefined;
}

/** The results file's object over what has been measured, its reduction included. */
export interface ResultsTask {
  readonly kind: 'results';
  readonly file: SessionFile;
  readonly recordings: SessionRecordings;
  readonly rows: readonly SegmentResult[];
  readonly tools: FfmpegTools;
}

export type CalculatorTask = FitTask | ResultsTask;

/** What a task yields. */
export interface CalculatorYield {
  readonly fit: Fit;
  readonly results: Results;
}

/** Spectra of a trace and of what the fit leaves of it; amplitudes in the trace's unit. `residualAmplitude` null: no fit. */
export interface Spectra {
  readonly frequency_Hz: Float64Array;
  readonly amplitude: Float64Array;
  readonly residualAmplitude: Float64Array | null;
}

/** What a fit yields. */
export interface Fit {
  readonly ringDown: RingDown | null;
  readonly checks: readonly Check[];
  readonly spectra: Spectra | null;
}

/** What the thread is asked. */
export interface CalculatorRequest {
  readonly number: number;
  readonly task: CalculatorTask;
}

/** The thread's answer to one request. */
export type CalculatorAnswer =
  | { readonly number: number; readonly ok: true; readonly value: Fit | Results }
  | { readonly number: number; readonly ok: false; readonly message: string };
