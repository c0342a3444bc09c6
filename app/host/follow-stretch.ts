import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import { decodeFrames } from '../../src/recording/decode-frames.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import type { TrackerPool } from '../../src/tracking/pool.ts';
import type { View } from '../../src/tracking/trace.ts';
import type { TraceColumns } from '../contract.ts';
import { betweenFrames, type Chunk, chunksOf } from './chunks.ts';
import { LEAD_FRAMES, parted } from './lead-in.ts';
import { type FollowedStretch, firstNotBefore } from './overview-trace.ts';

/** What following a stretch needs. */
export interface FollowRequest {
  readonly opened: OpenRecording;
  readonly view: View;
  /** Stretches to follow, ascending. */
  readonly stretches: readonly (readonly [number, number])[];
  readonly time_s: Float64Array;
  readonly tools: FfmpegTools;
  readonly pool: TrackerPool;
  /** Chunks followed at once. */
  readonly cores: number;
  readonly signal: AbortSignal;
}

/** Who listens while a recording is followed. Chunks come in order of time; poses only of the earliest that isn't finished. */
export interface FollowListener {
  /** Poses as they come, preliminary. */
  readonly poses: (poses: LivePoses) => void;
  /** A chunk is finished. */
  readonly chunk: (stretch: FollowedStretch) => void;
  /** Seconds of recording and frames followed so far. */
  readonly progress: (done_s: number, frames: number) => void;
}

/** Rows as the tracker reports them while it goes. */
export interface LivePoses {
  readonly time_s: Float64Array;
  readonly angle: Float64Array;
  readonly x_px: Float64Array;
  readonly y_px: Float64Array;
}

/** Follows the bar chunk by chunk, so that memory is bounded and every core has work. Rejects with the signal's reason when aborted. */
export async function followStretches(request: FollowRequest, listener: FollowListener): Promise<void> {
  const chunks = request.stretches.flatMap(([from_s, to_s]) => chunksOf(from_s, to_s, request.time_s));
  const done = new Array<FollowedStretch | undefined>(chunks.length);
  const early = chunks.map((): LivePoses[] => []);
  const meters = chunks.map(() => ({ frames: 0, upTo_s: 0 }));
  let head = 0;
  let next = 0;

  const tell = () => {
    const done_s = chunks.reduce((sum, c, i) => {
      const reached = done[i] ? c.to_s : (meters[i]?.upTo_s ?? 0);
      return sum + Math.min(c.to_s - c.from_s, Math.max(0, reached - c.from_s));
    }, 0);
    listener.progress(
      done_s,
      meters.reduce((sum, m) => sum + m.frames, 0),
    );
  };
  const finished = (i: number, stretch: FollowedStretch) => {
    done[i] = stretch;
    for (let ready = done[head]; ready; ready = done[head]) {
      listener.chunk(ready);
      head += 1;
      for (const poses of early[head]?.splice(0) ?? []) listener.poses(poses);
    }
    tell();
  };
  const work = async () => {
    for (let i = next++; i < chunks.length; i = next++) {
      const chunk = chunks[i] as Chunk;
      const followed = await followChunk(request, chunk, {
        poses: (poses) => (i === head ? listener.poses(poses) : early[i]?.push(poses)),
        frames: (frames, upTo_s) => {
          meters[i] = { frames, upTo_s };
          tell();
        },
      });
      finished(i, { ...chunk, ...followed });
    }
  };
  const workers = Array.from({ length: Math.min(request.cores, chunks.length) }, work);
  // All of them are waited for even when one fails: no decoder may outlive the call.
  const failed = (await Promise.allSettled(workers)).find((outcome) => outcome.status === 'rejected');
  if (failed) throw failed.reason;
}

interface ChunkListener {
  readonly poses: (poses: LivePoses) => void;
  readonly frames: (frames: number, upTo_s: number) => void;
}

/** Follows one chunk and a few frames before it; no trace where no bar was found in it, as where a hand hides it all the time. */
async function followChunk(
  request: FollowRequest,
  chunk: Chunk,
  listener: ChunkListener,
): Promise<Pick<FollowedStretch, 'trace' | 'lead'>> {
  const { opened, view, time_s, tools, pool, signal } = request;
  const { from_s, to_s: end_s } = chunk;
  const { region } = view;
  const first = firstNotBefore(time_s, from_s);
  const lead = Math.max(0, first - LEAD_FRAMES);
  const start_s = lead === first ? from_s : betweenFrames(time_s, time_s[lead] ?? from_s);
  const stream = decodeFrames(opened.recording, { region, start_s, end_s, timeScale: opened.timeScale, signal }, tools);
  const counted = async function* () {
    let frames = 0;
    for await (const frame of stream) {
      frames += 1;
      yield frame;
      if (frames % 8 === 0) listener.frames(frames, frame.time_s);
    }
  };
  const onPoses = (poses: LivePoses) => listener.poses(from(poses, from_s));
  const outcome = await pool.track(counted(), view, { signal, onPoses });
  return outcome.ok ? parted(outcome.trace, first) : { trace: null };
}

/** The rows from a time on. */
function from(poses: LivePoses, from_s: number): LivePoses {
  const at = firstNotBefore(poses.time_s, from_s);
  const { time_s, angle, x_px, y_px } = poses;
  if (at === 0) return poses;
  return { time_s: time_s.slice(at), angle: angle.slice(at), x_px: x_px.slice(at), y_px: y_px.slice(at) };
}

/** Columns in the unit of the window's border. */
export function shownColumns(poses: LivePoses & { readonly quality?: Float64Array }, unit: 'rad' | 'px'): TraceColumns {
  const toUnit = unit === 'rad' ? 180 / Math.PI : 1;
  return {
    unit: unit === 'rad' ? 'deg' : 'px',
    time_s: poses.time_s,
    angle: poses.angle.map((a) => a * toUnit),
    quality: poses.quality ?? new Float64Array(poses.time_s.length).fill(1),
    x_px: poses.x_px,
    y_px: poses.y_px,
  };
}

/** The unit that a view's angles come in. */
export function unitOf(view: View): 'rad' | 'px' {
  return view.kind === 'side' && view.half_length_px === null ? 'px' : 'rad';
}
