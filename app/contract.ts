import { z } from 'zod';
import { type Session, sessionSchema } from '../src/session/session.ts';
import { type CommandId, type CommandState, commands } from './contract/commands.ts';
import * as v from './contract/values.ts';

export type { Results, SegmentResult } from '../src/report/results.ts';
export type { Session, SessionRecording, SessionSegment, SessionView } from '../src/session/session.ts';
export * from './contract/commands.ts';
export type * from './contract/transport.ts';
export type * from './contract/values.ts';
export { SHEETS } from './contract/values.ts';
export * from './contract/wire.ts';

/*
 * `app/contract/client.ts` speaks this contract for the window, `app/host` answers it.
 */

/** Version of this contract; window and host must agree. */
export const CONTRACT_VERSION = 1;

/**
 * What can be exported. `csvw` is the metadata file that goes with the table, `trace` the trace of one segment; `report.pdf` is printed by
 * the desktop shell, in a browser by the browser itself.
 */
export type ExportItem =
  | { readonly kind: 'results.csv' | 'results.json' | 'csvw' | 'report' | 'session' }
  | { readonly kind: 'report.pdf' }
  | { readonly kind: 'trace'; readonly segment: string };

/** Every call of the window on the host. Each takes one object and answers once, or is refused with a `HostError`. */
export interface HostApi {
  /** First call: what the host is and can do. `dialogs`: it shows native file dialogs; `uploads`: files are posted to `POST /upload` (`X-File-Name`: encodeURIComponent of the name), which answers a FileToken as JSON. */
  hello(a: { contract: number }): {
    contract: number;
    program: string;
    version: string;
    dialogs: boolean;
    uploads: boolean;
    cautions: string[];
  };
  about(a: Empty): v.AboutFacts;
  /** The layout that a window before this one had; null: none is known. */
  layout(a: Empty): v.Layout | null;
  /** Keeps the layout for the next start, in the user's folder. */
  keepLayout(a: { layout: v.Layout }): Empty;

  getDocument(a: Empty): v.DocumentState;
  /** Opens a session or a recording. `add`: a recording is added to the session that is open (undoable) instead of starting a new one. */
  openFile(a: { token: string; add?: boolean | undefined }): { opened: 'session' | 'recording' };
  openDemo(a: Empty): { opened: 'session' };
  recentSessions(a: Empty): v.RecentSession[];
  openRecent(a: { id: string }): { opened: 'session' };
  closeDocument(a: Empty): Empty;
  /**
   * Gives a missing recording its file. `same`: its content is what it was when the session was last seen; `unknown`: the session was never
   * seen with its recording; `different`: another content, and nothing was done unless `evenIfDifferent`.
   */
  locateRecording(a: { recording: string; token: string; evenIfDifferent?: boolean | undefined }): {
    recognised: 'same' | 'unknown' | 'different';
  };

  /** Replaces the session. `base` is the revision it was made from. Edits in a row with the same `merge` become one undo step. */
  edit(a: { session: Session; base: number; label: string; merge?: string | undefined }): { revision: number };
  undo(a: Empty): { revision: number };
  redo(a: Empty): { revision: number };
  /** Saves in place; with `token` (of a save dialog) there. `asCopy`: where no token is given ask for a new place. */
  save(a: { token?: string | undefined; asCopy?: boolean | undefined }): v.Saved;
  exportItem(a: { item: ExportItem; token?: string | undefined }): v.Saved;
  /** Everything that can be exported, into one folder (`token` of a folder dialog), or as downloads. */
  exportAll(a: { token?: string | undefined }): v.Saved[];
  /** Saves what the window drew (a plot). */
  saveBytes(a: { name: string; bytes: Uint8Array<ArrayBuffer>; token?: string | undefined }): v.Saved;

  /** Native dialogs; only where `hello` said `dialogs`. null: the user thought better of it. */
  chooseFile(a: { purpose: 'open' | 'recording' }): v.FileToken | null;
  choosePlace(a: { suggestedName: string }): v.FileToken | null;
  chooseFolder(a: Empty): v.FileToken | null;
  /** What the native menu shows as enabled. */
  menuState(a: { state: CommandState; undoLabel: string | null; redoLabel: string | null }): Empty;

  /** Presentation time of every displayed frame, seconds from the first one after time_scale: a frame's index is its position here. Ask again where time_scale was edited. */
  frameTimes(a: { recording: string }): { time_s: Float64Array };
  /** One frame as JPEG. `frame` is its index; `crop` in displayed pixels. */
  picture(a: {
    recording: string;
    frame: number;
    maxWidth_px: number;
    crop?: z.infer<typeof v.region> | undefined;
  }): v.Picture;
  /** Job: `count` small pictures spread over the stretch arrive as `filmStripPicture` events. */
  filmStrip(a: { recording: string; start_s: number; end_s: number; count: number; maxWidth_px: number }): Job;
  /** Job: frames arrive as `playFrame` events, none more than 8 ahead of the last `playAck`. */
  play(a: { recording: string; start_s: number; end_s: number; maxWidth_px: number }): Job;
  playAck(a: { job: string; index: number }): Empty;
  /** Looks for the bar with a view that needn't be saved, in a short stretch around the frame. */
  findBar(a: { recording: string; view: v.LooseView; frame: number }): v.BarFound;

  /** Job: follows the bar of a view of the session; `poses` and `progress` events, then `jobEnded`. Left out start or end: the recording's. */
  follow(a: { view: string; start_s?: number | undefined; end_s?: number | undefined }): Job;
  /** Jobs that run, for a window that has just been loaded. Jobs of `filmStrip` and `play` end with the window that asked for them. */
  jobs(a: Empty): { job: string; kind: 'follow' | 'filmStrip' | 'play'; view: string | null }[];
  /** Ends a job; it answers at once, `jobEnded` follows. A job that has ended already is no error. */
  cancel(a: { job: string }): Empty;
  /** What has been followed of a view, null: nothing. */
  overview(a: { view: string }): v.Overview | null;
  /** Quick fit of a stretch of the overview trace; a newer request with the same `lane` cancels an older one. */
  previewFit(a: { view: string; start_s: number; end_s: number; lane: string }): v.PreviewFit;

  results(a: Empty): v.ResultsState;
  /** Curves of a segment as measured last; null: not measured yet. */
  segmentCurves(a: { segment: string }): v.FitCurves | null;
}

/** What the host pushes. */
export interface HostEvents {
  document: v.DocumentState;
  results: v.ResultsState;
  progress: v.JobProgress;
  /** Rows of a trace that is being followed: they replace whatever the overview had from `from_s` to `to_s` (both included). */
  poses: { job: string; view: string; from_s: number; to_s: number; trace: v.TraceColumns };
  filmStripPicture: { job: string; position: number; picture: v.Picture };
  playFrame: { job: string; picture: v.Picture };
  /** `error` is null where it went well; reason `cancelled` where it was stopped. */
  jobEnded: { job: string; error: { reason: string; message: string } | null };
  /** The user chose a command in the native menu. */
  command: { id: CommandId };
  /** A file was named on the command line or by a second start of the program; ask about unsaved work, then call openFile. */
  openRequest: v.FileToken;
}

export type Empty = Record<string, never>;
export interface Job {
  job: string;
}

export type CallName = keyof HostApi;
export type Args<K extends CallName> = Parameters<HostApi[K]>[0];
export type Result<K extends CallName> = ReturnType<HostApi[K]>;

const empty = z.strictObject({}) as unknown as z.ZodType<Empty>;
const token = z.string().min(1).max(128);
const time_s = z.number().nonnegative().max(1e7);
const frame = z.number().int().nonnegative().max(1e9);
const width_px = z.number().int().min(16).max(8192);
const job = z.object({ job: v.id });
const revision = z.object({ revision: z.number() });
const opened = z.object({ opened: z.literal('session') });
const commandId = z.enum(commands.map((c) => c.id) as [CommandId, ...CommandId[]]);
const commandState = z.strictObject({
  recording: z.boolean(),
  view: z.boolean(),
  segment: z.boolean(),
  results: z.boolean(),
  canUndo: z.boolean(),
  canRedo: z.boolean(),
  busy: z.boolean(),
});
const exportItem = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.enum(['results.csv', 'results.json', 'csvw', 'report', 'session']) }),
  z.strictObject({ kind: z.literal('report.pdf') }),
  z.strictObject({ kind: z.literal('trace'), segment: v.id }),
]);
const LARGEST_DRAWING_BYTES = 64 * 1024 * 1024;
const drawing = v.bytes.refine((b) => b.byteLength <= LARGEST_DRAWING_BYTES, 'at most 64 MiB');
const baseName = z.string().min(1).max(200);
const maybeToken = token.optional();

/** The allow-list: a call that isn't here is refused, arguments that don't parse never reach a handler. */
export const calls = {
  hello: {
    args: z.strictObject({ contract: z.number() }),
    result: z.object({
      contract: z.number(),
      program: z.string(),
      version: z.string(),
      dialogs: z.boolean(),
      uploads: z.boolean(),
      cautions: z.array(z.string()),
    }),
  },
  about: { args: empty, result: v.aboutFacts },
  layout: { args: empty, result: v.layout.nullable() },
  keepLayout: { args: z.strictObject({ layout: v.layout }), result: empty },
  getDocument: { args: empty, result: v.documentState },
  openFile: {
    args: z.strictObject({ token, add: z.boolean().optional() }),
    result: z.object({ opened: z.enum(['session', 'recording']) }),
  },
  openDemo: { args: empty, result: opened },
  recentSessions: { args: empty, result: z.array(v.recentSession) },
  openRecent: { args: z.strictObject({ id: v.id }), result: opened },
  closeDocument: { args: empty, result: empty },
  locateRecording: {
    args: z.strictObject({ recording: v.id, token, evenIfDifferent: z.boolean().optional() }),
    result: z.object({ recognised: z.enum(['same', 'unknown', 'different']) }),
  },
  edit: {
    args: z.strictObject({
      session: sessionSchema,
      base: z.number().int(),
      label: z.string().min(1).max(200),
      merge: z.string().max(200).optional(),
    }),
    result: revision,
  },
  undo: { args: empty, result: revision },
  redo: { args: empty, result: revision },
  save: { args: z.strictObject({ token: maybeToken, asCopy: z.boolean().optional() }), result: v.saved },
  exportItem: { args: z.strictObject({ item: exportItem, token: maybeToken }), result: v.saved },
  exportAll: { args: z.strictObject({ token: maybeToken }), result: z.array(v.saved) },
  saveBytes: { args: z.strictObject({ name: baseName, bytes: drawing, token: maybeToken }), result: v.saved },
  chooseFile: { args: z.strictObject({ purpose: z.enum(['open', 'recording']) }), result: v.fileToken.nullable() },
  choosePlace: { args: z.strictObject({ suggestedName: baseName }), result: v.fileToken.nullable() },
  chooseFolder: { args: empty, result: v.fileToken.nullable() },
  menuState: {
    args: z.strictObject({
      state: commandState,
      undoLabel: z.string().max(200).nullable(),
      redoLabel: z.string().max(200).nullable(),
    }),
    result: empty,
  },
  frameTimes: { args: z.strictObject({ recording: v.id }), result: z.object({ time_s: v.reals }) },
  picture: {
    args: z.strictObject({ recording: v.id, frame, maxWidth_px: width_px, crop: v.region.optional() }),
    result: v.picture,
  },
  filmStrip: {
    args: z.strictObject({
      recording: v.id,
      start_s: time_s,
      end_s: time_s,
      count: z.number().int().min(1).max(200),
      maxWidth_px: width_px,
    }),
    result: job,
  },
  play: {
    args: z.strictObject({ recording: v.id, start_s: time_s, end_s: time_s, maxWidth_px: width_px }),
    result: job,
  },
  playAck: { args: z.strictObject({ job: v.id, index: frame }), result: empty },
  findBar: { args: z.strictObject({ recording: v.id, view: v.looseView, frame }), result: v.barFound },
  follow: { args: z.strictObject({ view: v.id, start_s: time_s.optional(), end_s: time_s.optional() }), result: job },
  jobs: {
    args: empty,
    result: z.array(z.object({ job: v.id, kind: z.enum(['follow', 'filmStrip', 'play']), view: v.id.nullable() })),
  },
  cancel: { args: z.strictObject({ job: v.id }), result: empty },
  overview: { args: z.strictObject({ view: v.id }), result: v.overview.nullable() },
  previewFit: {
    args: z.strictObject({ view: v.id, start_s: time_s, end_s: time_s, lane: v.id }),
    result: v.previewFit,
  },
  results: { args: empty, result: v.resultsState },
  segmentCurves: { args: z.strictObject({ segment: v.id }), result: v.fitCurves.nullable() },
} satisfies { [K in CallName]: { args: z.ZodType<Args<K>>; result: z.ZodType<Result<K>> } };

/** Parsers of what the host pushes. */
export const events = {
  document: v.documentState,
  results: v.resultsState,
  progress: v.jobProgress,
  poses: z.object({ job: v.id, view: v.id, from_s: z.number(), to_s: z.number(), trace: v.traceColumns }),
  filmStripPicture: z.object({ job: v.id, position: z.number(), picture: v.picture }),
  playFrame: z.object({ job: v.id, picture: v.picture }),
  jobEnded: z.object({ job: v.id, error: z.object({ reason: z.string(), message: z.string() }).nullable() }),
  command: z.object({ id: commandId }),
  openRequest: v.fileToken,
} satisfies { [K in keyof HostEvents]: z.ZodType<HostEvents[K]> };
