import type { Trace } from '../../src/tracking/trace.ts';

/** How many frames before a stretch are followed with it. */
export const LEAD_FRAMES = 16;
/** Fewer frames in common tell nothing. */
const FEWEST = 4;

/** Poses of the frames just before a stretch, followed with it: they tell how its axis lies to that of the stretch before. */
export interface LeadIn {
  readonly frame_index: Int32Array;
  readonly angle: Float64Array;
}

/** Parts a trace that was followed with frames before `first` into the stretch's own and its lead-in. */
export function parted(trace: Trace, first: number): { readonly trace: Trace; readonly lead: LeadIn } {
  const begin = trace.frame_index.findIndex((frame) => frame >= first);
  const at = begin < 0 ? trace.frame_index.length : begin;
  return {
    lead: { frame_index: trace.frame_index.slice(0, at), angle: trace.angle.slice(0, at) },
    trace: {
      ...trace,
      time_s: trace.time_s.slice(at),
      angle: trace.angle.slice(at),
      x_px: trace.x_px.slice(at),
      y_px: trace.y_px.slice(at),
      quality: trace.quality.slice(at),
      frame_index: trace.frame_index.slice(at),
      refused: trace.refused.filter(({ frame_index }) => frame_index >= first),
    },
  };
}

/**
 * By how much the angles of a lead-in lie above those at hand for the same frames, radians within a quarter turn (a bar looks the same
 * after half a turn): the median. Each stretch learns the bar's axis anew, and where a hand was in its first seconds it may be
 * degrees off; the bar itself can't jump. Null where too few frames are in both.
 */
export function stepAbove(known: LeadIn, lead: LeadIn): number | null {
  const at = new Map([...known.frame_index].map((frame, row) => [frame, known.angle[row] ?? 0]));
  const steps: number[] = [];
  for (const [row, frame] of lead.frame_index.entries()) {
    const before = at.get(frame);
    const [first] = steps;
    if (before === undefined) continue;
    const step = (lead.angle[row] ?? 0) - before;
    steps.push(first === undefined ? step : step - Math.PI * Math.round((step - first) / Math.PI));
  }
  if (steps.length < FEWEST) return null;
  const middle = steps.sort((a, b) => a - b)[steps.length >> 1] ?? 0;
  return middle - Math.PI * Math.round(middle / Math.PI);
}
