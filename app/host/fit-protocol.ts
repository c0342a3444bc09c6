import type { Check, RingDown, RingDownOptions } from '../../src/oscillation/ring-down.ts';
import type { Apparatus } from '../../src/reduction/apparatus.ts';
import type { TrackOutcome } from '../../src/tracking/trace.ts';

/** What the fitting thread is asked: the fit of one stretch, exactly as measuring does it, and spectra for drawing. */
export interface FitRequest {
  readonly number: number;
  readonly outcome: TrackOutcome;
  readonly options: RingDownOptions;
  readonly apparatus: Apparatus | undefined;
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

/** The thread's answer to one request. */
export type FitAnswer =
  | { readonly number: number; readonly ok: true; readonly fit: Fit }
  | { readonly number: number; readonly ok: false; readonly message: string };
