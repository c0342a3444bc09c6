import type { Frame } from '../recording/recording.ts';
import { Follower } from './follow.ts';
import type { NoBar } from './learn-bar.ts';
import { learnBar } from './learn-bar.ts';
import type { TrackOutcome, View } from './trace.ts';
import type { PoseColumns } from './trace-builder.ts';
import { TraceBuilder } from './trace-builder.ts';

/** What may be passed to `trackFrames`. */
export interface TrackOptions {
  /** Aborting rejects with the signal's reason, before the next frame is taken. */
  readonly signal?: AbortSignal;
  /** Called now and then with poses found since the last call, in order of time. */
  readonly onPoses?: (poses: PoseColumns) => void;
  /** Called now and then with the number of frames taken so far. */
  readonly onProgress?: (frames: number) => void;
}

/** Bytes of opening frames kept to learn the bar from; memory is bounded by this, however long the stretch. */
const OPENING_BYTES = 64 * 2 ** 20;
/** Fewest frames a bar can be learnt from. */
const FEWEST_FRAMES = 8;
/** Poses between two reports. */
const REPORT_EVERY = 30;

/**
 * Follows the bar through one stretch of frames (ascending in time, all of one size). The opening frames, up to 64 MiB,
 * are kept until the bar has been learnt from them; then they and all later ones are followed one by one.
 * A bar that can't be found is an outcome, not an exception.
 */
export async function trackFrames(
  frames: AsyncIterable<Frame>,
  view: View,
  options: TrackOptions = {},
): Promise<TrackOutcome> {
  const squash = view.kind === 'oblique' ? Math.sin((view.elevation_deg * Math.PI) / 180) : 1;
  const opening: Frame[] = [];
  let bytes = 0;
  let taken = 0;
  let follower: Follower | null = null;
  let builder: TraceBuilder | null = null;
  let failure: NoBar | null = null;

  const follow = (frame: Frame): void => {
    const fix = follower!.next({ width: frame.width_px, height: frame.height_px, data: frame.grey }, frame.time_s);
    builder!.add(frame, fix);
    if (builder!.waiting >= REPORT_EVERY) options.onPoses?.(builder!.takeNew());
  };
  const learn = (): void => {
    const model = learnBar(opening, squash);
    if (typeof model === 'string') {
      failure = model;
    } else {
      follower = new Follower(model);
      builder = new TraceBuilder(view, model.halfLength_px, model.u_axis_rad);
      for (const frame of opening) follow(frame);
    }
    opening.length = 0;
  };

  for await (const frame of frames) {
    options.signal?.throwIfAborted();
    taken++;
    if (taken % REPORT_EVERY === 0) options.onProgress?.(taken);
    if (follower !== null) follow(frame);
    else if (failure === null) {
      opening.push(frame);
      bytes += frame.grey.byteLength;
      if (bytes >= OPENING_BYTES) learn();
    }
  }
  options.signal?.throwIfAborted();
  if (taken < FEWEST_FRAMES) {
    return {
      ok: false,
      reason: 'too_few_frames',
      message: `Only ${taken} frames were decoded; at least ${FEWEST_FRAMES} are needed to follow the bar.`,
      frames: taken,
    };
  }
  if (follower === null && failure === null) learn();
  if (failure !== null || builder === null) {
    return { ok: false, reason: 'no_bar', message: SENTENCES[failure ?? 'no_likeness'], frames: taken };
  }
  const done: TraceBuilder = builder;
  options.onProgress?.(taken);
  if (done.waiting > 0) options.onPoses?.(done.takeNew());
  if (done.rows < FEWEST_FRAMES) {
    return { ok: false, reason: 'no_bar', message: SENTENCES.no_likeness, frames: taken };
  }
  return { ok: true, trace: done.finish() };
}

const SENTENCES: Record<NoBar, string> = {
  still: 'No bar was found: a bar that turns was looked for, and nothing moves in the region.',
  no_likeness:
    'No bar was found: a bar that turns was looked for, and what moves in the region does not turn as one piece.',
  no_outline: 'No bar was found: something moves in the region, but it has no two long edges like a bar.',
};
