import type { Frame } from '../recording/recording.ts';
import { Follower } from './follow.ts';
import { type BarModel, learnBar, type NoBar } from './learn-bar.ts';
import { type Expected, learnEnd } from './learn-end.ts';
import type { SideView, Trace, TrackOutcome, View } from './trace.ts';
import type { PoseColumns } from './trace-builder.ts';
import { type BarSize, TraceBuilder } from './trace-builder.ts';

/** What may be passed to `trackFrames`. */
export interface TrackOptions {
  /** Aborting rejects with the signal's reason, before the next frame is taken. */
  readonly signal?: AbortSignal;
  /** Called now and then with poses found since the last call, in order of time. */
  readonly onPoses?: (poses: PoseColumns) => void;
  /** Called now and then with the number of frames taken so far. */
  readonly onProgress?: (frames: number) => void;
  /** Called once for every frame whose grey values are no longer needed. */
  readonly onDone?: (frame: Frame) => void;
}

/** Bytes of opening frames kept to learn the bar from; memory is bounded by this, however long the stretch. */
const OPENING_BYTES = 64 * 2 ** 20;
/** The bar is first learnt from so many frames and seconds; where that fails, again from twice as many, and so on. */
const OPENING_FRAMES = 240;
const OPENING_S = 8;
/** A bar that explains less of what moves is rather learnt from more frames: of drawn recordings none that was right had less. */
const WELL_EXPLAINED = 0.72;
/** Fewest frames a bar can be learnt from. */
const FEWEST_FRAMES = 8;
/** Poses between two reports. */
const REPORT_EVERY = 30;

/**
 * Follows the bar through one stretch of frames (ascending in time, all of one size). The opening frames, some seconds and
 * at most 64 MiB, are kept until the bar has been learnt from them; then they and all later ones are followed one by one.
 * A bar that can't be found is an outcome, not an exception.
 *
 * How: the opening gives a model of two layers, a static background and the bar's own picture, and every frame is
 * registered against it in angle, place and brightness. Two other ways were measured on drawn recordings (720p, bars of
 * 200 to 300 px): straight lines through the long edges frame by frame have 1.6 to 3.2 times the scatter (0.022 against
 * 0.007 degrees) and on squared paper follow the paper by several per cent; weighted moments of the difference from the
 * background have 7 times the scatter, and are off by up to a quarter of the swing where shadows fall or halves differ.
 */
export async function trackFrames(
  frames: AsyncIterable<Frame>,
  view: View,
  options: TrackOptions = {},
): Promise<TrackOutcome> {
  const opening: Frame[] = [];
  let bytes = 0;
  let taken = 0;
  let enough = OPENING_FRAMES;
  let following: Following | null = null;
  let failure: NoBar | null = null;

  const begin = (last: boolean): void => {
    const model = learnBest(opening, view, last);
    const later = !last && bytes < OPENING_BYTES;
    if (typeof model === 'string' || (later && model.explained < WELL_EXPLAINED)) {
      if (typeof model === 'string') failure = model;
      enough *= 2;
      if (!later) for (const frame of opening.splice(0)) options.onDone?.(frame);
      return;
    }
    following = new Following(view, model, options);
    for (const frame of opening.splice(0)) following.take(frame);
  };

  for await (const frame of frames) {
    options.signal?.throwIfAborted();
    taken++;
    if (taken % REPORT_EVERY === 0) options.onProgress?.(taken);
    if (following !== null) (following as Following).take(frame);
    else if (bytes < OPENING_BYTES) {
      opening.push(frame);
      bytes += frame.grey.byteLength;
      const seen_s = frame.time_s - opening[0]!.time_s;
      if (bytes >= OPENING_BYTES || (opening.length >= enough && seen_s >= OPENING_S)) begin(false);
    } else options.onDone?.(frame);
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
  if (following === null && opening.length > 0) begin(true);
  options.onProgress?.(taken);
  const trace = (following as Following | null)?.finish() ?? null;
  return trace === null
    ? { ok: false, reason: 'no_bar', message: SENTENCES[failure ?? 'no_likeness'], frames: taken }
    : { ok: true, trace };
}

/** A stretch whose bar is known: frames in, trace out, poses reported on the way. */
class Following {
  readonly #follower: Follower;
  readonly #builder: TraceBuilder;
  readonly #options: TrackOptions;

  constructor(view: View, model: BarModel, options: TrackOptions) {
    this.#follower = new Follower(model);
    this.#builder = new TraceBuilder(view, sizeOf(view, model), commonUncertainty(view, model), {
      edgeLean_px: model.edgeLean_px,
      restX_px: model.restX_px + view.region.x,
    });
    this.#options = options;
  }

  take(frame: Frame): void {
    const picture = { width: frame.width_px, height: frame.height_px, data: frame.grey };
    this.#builder.add(frame, this.#follower.next(picture, frame.time_s));
    this.#options.onDone?.(frame);
    if (this.#builder.waiting >= REPORT_EVERY) this.#options.onPoses?.(this.#builder.takeNew());
  }

  /** The trace; null where hardly a frame could be trusted. */
  finish(): Trace | null {
    if (this.#builder.waiting > 0) this.#options.onPoses?.(this.#builder.takeNew());
    return this.#builder.rows < FEWEST_FRAMES ? null : this.#builder.finish();
  }
}

/** The bar as learnt from the opening frames or, where that isn't convincing and `halves` or many frames allow it, from their later half alone. */
function learnBest(opening: readonly Frame[], view: View, halves: boolean): BarModel | NoBar {
  const model = learn(opening, view);
  const enough = halves ? OPENING_FRAMES / 2 : 2 * OPENING_FRAMES;
  if (opening.length < enough || explainedBy(model) >= WELL_EXPLAINED) return model;
  // The first seconds may show something else: a hand that lets go, a bar that turns all the way round.
  const other = learn(opening.slice(opening.length >> 1), view);
  return explainedBy(other) > explainedBy(model) ? other : model;
}

function explainedBy(model: BarModel | NoBar): number {
  return typeof model === 'string' ? -1 : model.explained;
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

function sizeOf(view: View, model: BarModel): BarSize {
  if (view.kind === 'side') return { halfLength_px: view.half_length_px, halfWidth_px: null };
  return {
    halfLength_px: model.halfLength_px,
    halfWidth_px: (model.outline.bottom - model.outline.top) / 2,
  };
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
