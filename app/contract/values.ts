import { z } from 'zod';
import type { Results } from '../../src/report/results.ts';
import { sessionSchema } from '../../src/session/session.ts';

/*
 * The plain data that crosses between window and host. Long data are aligned columns in typed arrays.
 * Units are in the names; angles are in degrees on this border, or pixels where `unit` says so.
 */

export const bytes = z.custom<Uint8Array<ArrayBuffer>>((v) => v instanceof Uint8Array, 'bytes');
export const reals = z.custom<Float64Array>((v) => v instanceof Float64Array, 'a column of numbers');

export const id = z.string().min(1).max(64);
const nonNegative = z.number().nonnegative();

/** A file that the user chose, dropped or named, as the window knows it. `token` is opaque. */
export const fileToken = z.strictObject({ token: z.string().min(1).max(128), name: z.string().max(1024) });
export type FileToken = z.infer<typeof fileToken>;

export const region = z.strictObject({ x: z.number(), y: z.number(), width: z.number(), height: z.number() });

/** A view that needn't be in the session yet: `SessionView` without id and recording. Displayed pixels, degrees. */
export const looseView = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('plan'), region }),
  z.strictObject({ kind: z.literal('oblique'), region, elevation_deg: z.number().gt(0).lte(90) }),
  z.strictObject({
    kind: z.literal('side'),
    region,
    axis_x_px: z.number(),
    half_length_px: z.number().positive().nullable(),
    facing_deg: z.number().min(-90).max(90).nullable(),
  }),
]);
export type LooseView = z.infer<typeof looseView>;

/** Facts of a recording, as `needlebeat inspect` prints them; the window shows them and reads the named ones. */
export const recordingFacts = z.looseObject({
  width_px: z.number(),
  height_px: z.number(),
  rotation_deg: z.number(),
  frames: z.number(),
  duration_s: z.number(),
  container: z.string(),
  codec: z.string(),
  nominal_rate_Hz: z.number().nullable(),
  measured_rate_Hz: z.number().nullable(),
  longest_gap_s: z.number().nullable(),
  rate_varies: z.boolean(),
});
export type RecordingFacts = z.infer<typeof recordingFacts>;

/**
 * One recording of the session as the host has it. `ready`: it can be looked at, and `frameTimes` answers.
 * `missing`: not where the session says; ask the user for it. `unusable`: there, but `problem` says what is wrong.
 */
export const recordingState = z.object({
  id,
  name: z.string(),
  state: z.enum(['opening', 'ready', 'missing', 'unusable']),
  problem: z.string().nullable(),
  facts: recordingFacts.nullable(),
});
export type RecordingState = z.infer<typeof recordingState>;

/** The document: the session (null: nothing is open) and what can be done with it. The host has the only copy that counts. */
export const documentState = z.object({
  /** Changes whenever another document is opened, never on an edit. */
  key: z.string(),
  session: sessionSchema.nullable(),
  /** Grows with every change; an edit names the revision it was made on. */
  revision: z.number(),
  canUndo: z.boolean(),
  undoLabel: z.string().nullable(),
  canRedo: z.boolean(),
  redoLabel: z.string().nullable(),
  /** Differs from what its file holds (or has no file). The working copy is always safe on disk. */
  dirty: z.boolean(),
  /** Base name of its file, null: never saved. */
  fileName: z.string().nullable(),
  /** The session was brought back from the working copy of a run that ended without warning. */
  restored: z.boolean(),
  recordings: z.array(recordingState),
});
export type DocumentState = z.infer<typeof documentState>;

export const check = z.object({
  code: z.string(),
  severity: z.enum(['note', 'doubt', 'fault']),
  message: z.string(),
});

/** Value and standard uncertainty (k = 1) in the unit of the field that holds it. */
export const estimate = z.object({ value: z.number(), u: z.number() });

/** The results file's object; the host makes it itself, so that a look at its outline is enough. */
const resultsObject = z.custom<Results>(
  (r) => typeof r === 'object' && r !== null && 'segments' in r && Array.isArray(r.segments) && 'reduction' in r,
  'a results object',
);

/**
 * The results as they would be exported now, segments in session order (only those measured so far), and the reduction
 * over them. `pending`: segments to be measured or being measured; `stale`: their last results are of an earlier edit.
 */
export const resultsState = z.object({
  revision: z.number(),
  results: resultsObject.nullable(),
  pending: z.array(id),
  stale: z.array(id),
  /** Segments that can't be measured as the session stands (recording missing, region outside the picture), and why. */
  problems: z.array(z.object({ segment: id, message: z.string() })),
  /** The segment being measured, and how far: 0 to 1. */
  measuring: z.object({ segment: id, share: z.number() }).nullable(),
});
export type ResultsState = z.infer<typeof resultsState>;

/** A trace for drawing: rows ascending in time. */
export const traceColumns = z.object({
  unit: z.enum(['deg', 'px']),
  time_s: reals,
  angle: reals,
  quality: reals,
  x_px: reals,
  y_px: reals,
});
export type TraceColumns = z.infer<typeof traceColumns>;

/** What has been followed of one view, and the stretches that are covered (start, end in seconds). */
export const overview = traceColumns.extend({ covered: z.array(z.tuple([z.number(), z.number()])) });
export type Overview = z.infer<typeof overview>;

/** A fit drawn over its data, row by row of the segment's trace; `used` is 1 where the row went into the fit. Spectra: amplitude in `unit`. */
export const fitCurves = z.object({
  unit: z.enum(['deg', 'px']),
  time_s: reals,
  angle: reals,
  fitted: reals.nullable(),
  residual: reals.nullable(),
  used: bytes,
  spectrum: z.object({ frequency_Hz: reals, amplitude: reals, residualAmplitude: reals.nullable() }).nullable(),
});
export type FitCurves = z.infer<typeof fitCurves>;

/** The quick fit of a stretch of the overview trace. Lengths in `unit` where a field says so. */
export const previewFit = z.discriminatedUnion('ok', [
  z.object({
    ok: z.literal(true),
    unit: z.enum(['deg', 'px']),
    f0_Hz: estimate,
    fd_Hz: estimate,
    gamma_per_s: estimate,
    q: estimate.nullable(),
    /** In `unit`. */
    amplitudeStart: z.number(),
    amplitudeEnd: z.number(),
    equilibrium: estimate,
    residualRms: z.number(),
    cycles: z.number(),
    checks: z.array(check),
    curves: fitCurves,
  }),
  z.object({ ok: z.literal(false), checks: z.array(check), curves: fitCurves.nullable() }),
]);
export type PreviewFit = z.infer<typeof previewFit>;

/** One picture of a recording; `width_px`, `height_px` are the JPEG's own size, `index` and `time_s` the frame's. */
export const picture = z.object({
  jpeg: bytes,
  index: z.number(),
  time_s: z.number(),
  width_px: z.number(),
  height_px: z.number(),
});
export type Picture = z.infer<typeof picture>;

/** Where the bar was seen in one frame: outline points [x, y] in displayed pixels of the full-size frame. */
export const barFound = z.discriminatedUnion('found', [
  z.object({
    found: z.literal(true),
    frame: z.number(),
    outline: z.array(z.tuple([z.number(), z.number()])),
    unit: z.enum(['deg', 'px']),
    angle: z.number(),
    quality: z.number(),
  }),
  z.object({ found: z.literal(false), message: z.string() }),
]);
export type BarFound = z.infer<typeof barFound>;

const share = z.number().min(0).max(1);
export const SHEETS = ['view', 'segment', 'field', 'apparatus'] as const;
/** How the window was laid out last: shares of its width that each sheet takes, of its height that the time board takes, the open sheet. */
export const layout = z.strictObject({
  sheets: z.strictObject({ view: share, segment: share, field: share, apparatus: share }),
  board: share,
  sheet: z.enum(SHEETS),
});
export type Layout = z.infer<typeof layout>;

/**
 * What became of something that was to be saved. `file`: it is at the place that the user chose. `download`: the browser is to fetch
 * `address` (same origin, works once). `needs_place`: nothing was written; ask the user where, then call again with the token.
 * `to_print`: nothing was written; the browser is to show the page at `address` (same origin, works once) and print it.
 */
export const saved = z.discriminatedUnion('saved', [
  z.object({ saved: z.literal('file'), name: z.string() }),
  z.object({ saved: z.literal('download'), name: z.string(), address: z.string() }),
  z.object({ saved: z.literal('needs_place'), suggestedName: z.string() }),
  z.object({ saved: z.literal('to_print'), address: z.string() }),
]);
export type Saved = z.infer<typeof saved>;

export const recentSession = z.object({ id, name: z.string(), title: z.string(), opened: z.string() });
export type RecentSession = z.infer<typeof recentSession>;

/** What About shows. */
export const aboutFacts = z.object({
  program: z.string(),
  version: z.string(),
  runtime: z.array(z.object({ name: z.string(), version: z.string() })),
  ffmpeg: z.object({ version: z.string(), source: z.string() }).nullable(),
  ffprobe: z.object({ version: z.string(), source: z.string() }).nullable(),
});
export type AboutFacts = z.infer<typeof aboutFacts>;

/** Share of a job that is done. `rate` is seconds of recording per second, `frameRate_Hz` frames per second; null until known. */
export const jobProgress = z.object({
  job: id,
  done_s: nonNegative,
  total_s: nonNegative,
  rate: z.number().nullable(),
  frameRate_Hz: z.number().nullable(),
  remaining_s: z.number().nullable(),
});
export type JobProgress = z.infer<typeof jobProgress>;
