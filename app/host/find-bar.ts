import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import { decodeFrames } from '../../src/recording/decode-frames.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import { frameTime_s } from '../../src/recording/frame-clock.ts';
import { InputError } from '../../src/recording/input-error.ts';
import type { TrackerPool } from '../../src/tracking/pool.ts';
import type { Trace, View } from '../../src/tracking/trace.ts';
import type { BarFound } from '../contract.ts';

/** Long enough to see the bar turn, short enough to answer while the user looks; the second look where a slow bar hardly moved. */
const LOOKS_S = [1.8, 7.2] as const;
/** Half width over half length where the tracker doesn't tell the width: slender, as bars are. */
const SLENDER = 0.13;

/** Looks for the bar around one frame. */
export async function findBar(
  opened: OpenRecording,
  view: View,
  frame: number,
  tools: FfmpegTools,
  pool: TrackerPool,
  signal: AbortSignal,
): Promise<BarFound> {
  const { recording, timeScale } = opened;
  const last = recording.ticks.length - 1;
  if (frame > last) throw new InputError(`The recording has no frame ${frame}; its last one is ${last}.`);
  const { x, y, width, height } = view.region;
  if (x < 0 || y < 0 || x + width > recording.width_px || y + height > recording.height_px || width < 8 || height < 8) {
    throw new InputError('The region must lie within the picture and have at least 8 × 8 pixels.');
  }
  const end_s = frameTime_s(recording, last, timeScale);
  const at_s = frameTime_s(recording, frame, timeScale);
  let message = '';
  for (const seconds of LOOKS_S) {
    // In the time of the recording as filmed: a slowed-down one is looked at for as many frames.
    const look_s = seconds * timeScale;
    const start_s = Math.max(0, Math.min(at_s - look_s / 2, end_s - look_s));
    const request = { region: view.region, start_s, end_s: Math.min(end_s, start_s + look_s), timeScale, signal };
    const outcome = await pool.track(decodeFrames(recording, request, tools), view, { signal });
    if (outcome.ok) return shown(outcome.trace, view, frame);
    message = outcome.message;
  }
  return { found: false, message };
}

function shown(trace: Trace, view: View, frame: number): BarFound {
  const row = nearestRow(trace.frame_index, frame);
  const angle = trace.angle[row] ?? 0;
  return {
    found: true,
    frame: trace.frame_index[row] ?? frame,
    outline: barOutline(trace, view, row),
    unit: trace.unit === 'rad' ? 'deg' : 'px',
    angle: trace.unit === 'rad' ? (angle * 180) / Math.PI : angle,
    quality: trace.quality[row] ?? 0,
  };
}

/** Corners of the bar as seen: of a side view, a small diamond at its near end. Displayed pixels, y downwards. */
export function barOutline(trace: Trace, view: View, row: number): [number, number][] {
  const x = trace.x_px[row] ?? 0;
  const y = trace.y_px[row] ?? 0;
  if (view.kind === 'side') {
    return [
      [x - 6, y],
      [x, y - 6],
      [x + 6, y],
      [x, y + 6],
    ];
  }
  const half = trace.halfLength_px ?? Math.min(view.region.width, view.region.height) / 3;
  const squash = view.kind === 'oblique' ? Math.sin((view.elevation_deg * Math.PI) / 180) : 1;
  const angle = trace.angle[row] ?? 0;
  const along = [Math.cos(angle) * half, Math.sin(angle) * half] as const;
  const share = trace.halfWidth_px === undefined ? SLENDER : trace.halfWidth_px / half;
  const across = [-along[1] * share, along[0] * share] as const;
  const corner = (u: number, v: number): [number, number] => [
    x + u * along[0] + v * across[0],
    y - squash * (u * along[1] + v * across[1]),
  ];
  return [corner(-1, -1), corner(1, -1), corner(1, 1), corner(-1, 1)];
}

function nearestRow(frame_index: Int32Array, frame: number): number {
  let best = 0;
  for (const [row, index] of frame_index.entries()) {
    if (Math.abs(index - frame) < Math.abs((frame_index[best] ?? 0) - frame)) best = row;
  }
  return best;
}
