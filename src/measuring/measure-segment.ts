import { fitRingDown } from '../oscillation/fit-ring-down.ts';
import type { Check, RingDown, RingDownOptions } from '../oscillation/ring-down.ts';
import { decodeFrames } from '../recording/decode-frames.ts';
import type { FfmpegTools } from '../recording/find-ffmpeg.ts';
import type { DecodeAccount, Frame } from '../recording/recording.ts';
import type { Apparatus } from '../reduction/apparatus.ts';
import { fibreFindings, fibreSegments } from '../reduction/fibre-sources.ts';
import { inertia } from '../reduction/inertia.ts';
import type { Session, SessionSegment, SessionView } from '../session/session.ts';
import type { TrackerPool } from '../tracking/pool.ts';
import type { TrackOutcome, View } from '../tracking/trace.ts';
import type { MeasuredSegment } from './measured-segment.ts';
import { DEFAULT_U_TIME_SCALE, type OpenRecording, type SessionRecordings } from './open-recordings.ts';
import { segmentResult } from './segment-result.ts';

/** What measuring a segment needs from the outside. */
export interface MeasuringTools {
  readonly tools: FfmpegTools;
  readonly pool: TrackerPool;
  readonly signal?: AbortSignal | undefined;
  /** Told after every frame handed to the tracker: how many so far, and the time reached. */
  readonly onFrames?: (frames: number, upTo_s: number) => void;
}

/** Decodes one segment, follows the bar through it and fits its ring-down. */
export async function measureSegment(
  session: Session,
  segment: SessionSegment,
  recordings: SessionRecordings,
  kit: MeasuringTools,
): Promise<MeasuredSegment> {
  const opened = recordings.get(segment.recording);
  const view = session.views.find((v) => v.id === segment.view);
  if (!opened || !view) throw new RangeError(`segment ${segment.id}: its recording or view is not among those opened`);
  const { outcome, account } = await followSegment(segment, view, opened, kit);
  const fit = fitTrace(outcome, ringDownOptions(view, opened), apparatusOf(session, segment));
  return segmentResult({ segment, view, opened, outcome, account, ...fit });
}

/** The first half of `measureSegment`: decodes one segment and follows the bar through it. */
export async function followSegment(
  segment: SessionSegment,
  view: SessionView,
  opened: OpenRecording,
  kit: MeasuringTools,
): Promise<{ outcome: TrackOutcome; account: DecodeAccount }> {
  const { recording, timeScale } = opened;
  const { start_s, end_s } = segment;
  const request = {
    region: wholePixels(view.region),
    start_s,
    end_s,
    timeScale,
    ...(kit.signal && { signal: kit.signal }),
  };
  const stream = decodeFrames(recording, request, kit.tools);
  const outcome = await kit.pool.track(
    counted(stream, kit.onFrames),
    viewOf(view),
    kit.signal ? { signal: kit.signal } : {},
  );
  return { outcome, account: stream.account() };
}

async function* counted(frames: AsyncIterable<Frame>, tell: MeasuringTools['onFrames']): AsyncGenerator<Frame> {
  let count = 0;
  for await (const frame of frames) {
    count += 1;
    yield frame;
    tell?.(count, frame.time_s);
  }
}

/** Fits a trace; where the fibre's stiffness and the bar's inertia are known, fits again with the fibre's share of the torque. */
export function fitTrace(
  outcome: TrackOutcome,
  options: RingDownOptions,
  apparatus: Apparatus | undefined,
): { ringDown: RingDown | null; checks: readonly Check[] } {
  if (!outcome.ok)
    return { ringDown: null, checks: [{ code: outcome.reason, severity: 'fault', message: outcome.message }] };
  const first = fitRingDown(outcome.trace, options);
  const share = first.ok ? fibreShare(first.ringDown.f0_Hz.value, apparatus) : null;
  const fit = share ? fitRingDown(outcome.trace, { ...options, fibreShare: share }) : first;
  return { ringDown: fit.ok ? fit.ringDown : null, checks: fit.checks };
}

/**
 * The rig as a segment has it: in one that was made to find the fibre's stiffness, with another body or another length of fibre,
 * what the session says of the fibre in the sweep doesn't hold.
 */
export function apparatusOf({ apparatus }: Session, { id }: SessionSegment): Apparatus | undefined {
  if (!fibreSegments(apparatus).has(id)) return apparatus;
  const { fibre: _otherwise, ...rest } = apparatus ?? {};
  return rest;
}

/** kappa / (4 pi² J f0²): the fibre's share of the restoring torque, where the rig's description alone gives kappa and J. */
function fibreShare(f0_Hz: number, apparatus: Apparatus | undefined): { value: number; u: number } | null {
  const J = apparatus?.magnet ? inertia(apparatus.magnet) : null;
  const part = J && fibreFindings(apparatus, [], J).part;
  if (!part) return null;
  // The field may still be pulled off the fibre's rest direction, which a share alone doesn't tell: never quite certain.
  return { value: part.value / f0_Hz ** 2, u: Math.max(0.005, part.u / f0_Hz ** 2) };
}

/** What the fit is told of a view and its recording. */
export function ringDownOptions(
  view: SessionView,
  opened: Pick<OpenRecording, 'u_time_scale'> | null,
): RingDownOptions {
  return {
    u_time_scale: opened?.u_time_scale ?? DEFAULT_U_TIME_SCALE,
    view: view.kind,
    ...(view.kind === 'side' && {
      facing_rad: view.facing_deg === undefined ? null : (view.facing_deg * Math.PI) / 180,
    }),
  };
}

/** The tracker's view of a session's view. */
export function viewOf(view: SessionView): View {
  const region = wholePixels(view.region);
  switch (view.kind) {
    case 'plan':
      return { kind: 'plan', region };
    case 'oblique':
      return { kind: 'oblique', region, elevation_deg: view.elevation_deg };
    case 'side':
      return {
        kind: 'side',
        region,
        axis_x_px: view.axis_x_px,
        half_length_px: view.half_length_px ?? null,
        facing_deg: view.facing_deg ?? null,
      };
    default:
      return view satisfies never;
  }
}

/** A region on whole pixels that lies within the one given. */
function wholePixels(region: SessionView['region']): SessionView['region'] {
  const x = Math.ceil(region.x);
  const y = Math.ceil(region.y);
  return {
    x,
    y,
    width: Math.max(1, Math.floor(region.x + region.width) - x),
    height: Math.max(1, Math.floor(region.y + region.height) - y),
  };
}
