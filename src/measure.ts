import { availableParallelism } from 'node:os';
import { type MeasuringTools, measureSegment } from './measuring/measure-segment.ts';
import type { MeasuredSegment } from './measuring/measured-segment.ts';
import { openRecordings, type SessionRecordings } from './measuring/open-recordings.ts';
import { type FfmpegTools, findFfmpeg } from './recording/find-ffmpeg.ts';
import { reduceSegments } from './reduce-results.ts';
import { programName } from './report/program.ts';
import type { Results } from './report/results.ts';
import type { SessionFile } from './session/read-session.ts';
import type { Session } from './session/session.ts';
import { TrackerPool } from './tracking/pool.ts';

/** How far the job is: seconds of recording followed of those that the segments hold. */
export interface Progress {
  readonly done_s: number;
  readonly total_s: number;
  /** Frames followed so far. */
  readonly frames: number;
  readonly segmentsDone: number;
  readonly segments: number;
}

/** What may be passed to `measureSession`. */
export interface MeasureOptions {
  /** The ffmpeg to use; found by `findFfmpeg` when left out. */
  readonly tools?: FfmpegTools;
  /** How many segments are measured at once; the number of cores when left out. */
  readonly cores?: number;
  readonly signal?: AbortSignal;
  readonly onProgress?: (progress: Progress) => void;
}

/** What the job yields: the results file's object, and what was measured of each segment, by id, for curves and traces. */
export interface Measurement {
  readonly results: Results;
  readonly segments: ReadonlyMap<string, MeasuredSegment>;
}

/**
 * The main job: opens the recordings of a session, follows the bar through every segment, fits each ring-down, reduces
 * frequencies and currents to field, moment and stiffness.
 * @throws InputError where the session or a recording can't be used; the signal's reason when aborted.
 */
export async function measureSession(file: SessionFile, options: MeasureOptions = {}): Promise<Measurement> {
  const cores = options.cores ?? availableParallelism();
  // A thread follows two segments at once; more threads than that would only take time from the decoders.
  await using pool = new TrackerPool(Math.ceil(Math.min(cores, Math.max(1, file.session.segments.length)) / 2));
  pool.prepare();
  const tools = options.tools ?? (await findFfmpeg(process.env));
  const recordings = await openRecordings(file, tools, options.signal);
  const segments = await measureSegments(file.session, recordings, { tools, pool, cores, ...options });
  return { results: assembleResults(file, recordings, segments, tools), segments };
}

async function measureSegments(
  session: Session,
  recordings: SessionRecordings,
  kit: MeasureOptions & { readonly tools: FfmpegTools; readonly pool: TrackerPool; readonly cores: number },
): Promise<Map<string, MeasuredSegment>> {
  const meter = progressMeter(session, kit.onProgress);
  const measured = new Map<string, MeasuredSegment>();
  const waiting = [...session.segments];
  const work = async () => {
    for (let segment = waiting.shift(); segment; segment = waiting.shift()) {
      const { id } = segment;
      const { tools, pool, signal } = kit;
      const onFrames: MeasuringTools['onFrames'] = (frames, upTo_s) => meter.at(id, frames, upTo_s);
      measured.set(id, await measureSegment(session, segment, recordings, { tools, pool, signal, onFrames }));
      meter.finished(id);
    }
  };
  const workers = Array.from({ length: Math.min(kit.cores, waiting.length) }, work);
  // All of them are waited for even when one fails: no decoder may outlive the call.
  const failed = (await Promise.allSettled(workers)).find((outcome) => outcome.status === 'rejected');
  if (failed) throw failed.reason;
  return measured;
}

/** Puts the results file together from what was measured; repeats the reduction. */
export function assembleResults(
  file: SessionFile,
  recordings: SessionRecordings,
  segments: ReadonlyMap<string, MeasuredSegment>,
  tools: FfmpegTools,
): Results {
  const { session } = file;
  const inOrder = session.segments.flatMap((s) => segments.get(s.id) ?? []);
  const rows = inOrder.map((m) => m.result);
  const rig = {
    ...(session.apparatus && { apparatus: session.apparatus }),
    ...(session.place && { place: session.place }),
  };
  return {
    format: 'needlebeat/results',
    version: 1,
    program: programName,
    session: { title: session.title ?? '', sha256: file.sha256 },
    recordings: session.recordings.flatMap((r) => recordings.get(r.id)?.facts ?? []),
    ffmpeg: tools.version.text,
    ...rig,
    segments: rows,
    reduction: reduceSegments(rows, rig),
  };
}

function progressMeter(session: Session, report: MeasureOptions['onProgress']) {
  const lengths = new Map(session.segments.map((s) => [s.id, s.end_s - s.start_s]));
  const starts = new Map(session.segments.map((s) => [s.id, s.start_s]));
  const total_s = [...lengths.values()].reduce((sum, length) => sum + length, 0);
  const done = new Map<string, number>();
  const frames = new Map<string, number>();
  let segmentsDone = 0;
  const sum = (values: Iterable<number>) => [...values].reduce((a, b) => a + b, 0);
  const tell = () =>
    report?.({
      done_s: sum(done.values()),
      total_s,
      frames: sum(frames.values()),
      segmentsDone,
      segments: session.segments.length,
    });
  return {
    at(id: string, count: number, upTo_s: number) {
      frames.set(id, count);
      done.set(id, Math.min(lengths.get(id) ?? 0, Math.max(0, upTo_s - (starts.get(id) ?? 0))));
      tell();
    },
    finished(id: string) {
      segmentsDone += 1;
      done.set(id, lengths.get(id) ?? 0);
      tell();
    },
  };
}
