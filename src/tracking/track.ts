import type { Frame } from '../recording/recording.ts';
import { Follower } from './follow.ts';
import { type BarModel, learnBar, type NoBar } from './learn-bar.ts';
import { type Expected, learnEnd } from './learn-end.ts';
import type { SideView, TrackOutcome, View } from './trace.ts';
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
  const begin = (): void => {
    const model = learn(opening, view);
    if (typeof model === 'string') {
      failure = model;
    } else {
      follower = new Follower(model);
      builder = new TraceBuilder(view, halfLengthOf(view, model), commonUncertainty(view, model), {
        edgeLean_px: model.edgeLean_px,
        restX_px: model.restX_px + view.region.x,
      });
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
      if (bytes >= OPENING_BYTES) begin();
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
  if (follower === null && failure === null) begin();
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

function learn(opening: readonly Frame[], view: View): BarModel | NoBar {
  switch (view.kind) {
    case 'plan':
      return learnBar(opening, 1);
    case 'oblique':
      return learnBar(opening, Math.sin((view.elevation_deg * Math.PI) / 180));
    case 'side':
      return learnEnd(opening, expectedEnd(view));
    default:
      return view satisfies never;
  }
}

/** Where the near end is to be looked for, from how the view faces the bar. */
function expectedEnd(view: SideView): Expected | null {
  if (view.half_length_px === null || view.facing_deg === null) return null;
  const rest_rad = (view.facing_deg * Math.PI) / 180;
  const x_px = view.axis_x_px + view.half_length_px * Math.sin(rest_rad) - view.region.x;
  return { x_px, spread_px: 6 + 0.1 * view.half_length_px };
}

function halfLengthOf(view: View, model: BarModel): number | null {
  return view.kind === 'side' ? view.half_length_px : model.halfLength_px;
}

/** How well the line of sight is taken to be known, radians: along the fibre to 2 degrees, a stated elevation to half a degree. */
const U_TILT_RAD = (2 * Math.PI) / 180;
const U_ELEVATION_RAD = (0.5 * Math.PI) / 180;
/** An axis found from edges may be off by more than their scatter says, since shading is not the same all along. */
const AXIS_COVER = 1.5;

/** What all angles of a stretch have in common by way of error, in the unit of the angle. */
function commonUncertainty(view: View, model: BarModel): number {
  const angle = -(model.start.turn + model.axis_rad);
  switch (view.kind) {
    case 'plan':
      // A circle seen at a slant is squeezed by cos(tilt): directions at 45 degrees to it turn by tilt squared / 4.
      return Math.hypot(AXIS_COVER * model.u_axis_rad, U_TILT_RAD ** 2 / 4);
    case 'oblique': {
      const squeeze = Math.abs(Math.sin(2 * angle)) / 2 / Math.tan((view.elevation_deg * Math.PI) / 180);
      return Math.hypot(AXIS_COVER * model.u_axis_rad, squeeze * U_ELEVATION_RAD);
    }
    case 'side':
      return view.half_length_px === null ? model.u_axis_rad : model.u_axis_rad / view.half_length_px;
    default:
      return view satisfies never;
  }
}

const SENTENCES: Record<NoBar, string> = {
  still: 'No bar was found: a bar that turns was looked for, and nothing moves in the region.',
  no_likeness:
    'No bar was found: a bar that turns was looked for, and what moves in the region does not turn as one piece.',
  no_outline: 'No bar was found: something moves in the region, but it has no two long edges like a bar.',
};
