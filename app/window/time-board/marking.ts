import type { Session } from '../../../src/session/session.ts';
import { freeStretch, SHORTEST_SEGMENT_S } from '../session-edits/segment-edits.ts';
import { type TimeSpan, toPixel } from './time-span.ts';

/** What lies under the pointer among the segments of a board. */
export type Target =
  | { readonly kind: 'edge'; readonly segment: string; readonly edge: 'start' | 'end' }
  | { readonly kind: 'segment'; readonly segment: string }
  | { readonly kind: 'free' };

/** How near the pointer must come to an edge, CSS pixels. */
export const EDGE_REACH_PX = 6;

interface Stretch {
  readonly id: string;
  readonly start_s: number;
  readonly end_s: number;
}

/**
 * What a press at `x_px` takes hold of: an edge within reach (the nearest; the selected segment's before others), a segment, or
 * free board.
 */
export function targetAt(
  segments: readonly Stretch[],
  x_px: number,
  span: TimeSpan,
  width_px: number,
  selected: string | null,
): Target {
  let best: { target: Target; distance: number } | null = null;
  for (const s of segments) {
    for (const edge of ['start', 'end'] as const) {
      const at = toPixel(edge === 'start' ? s.start_s : s.end_s, span, width_px);
      // The selected segment's edges win where two segments touch; from inside, an edge is only taken near it.
      const distance = Math.abs(at - x_px) - (s.id === selected ? 3 : 0);
      if (Math.abs(at - x_px) <= EDGE_REACH_PX && (best === null || distance < best.distance)) {
        best = { target: { kind: 'edge', segment: s.id, edge }, distance };
      }
    }
  }
  if (best) return best.target;
  const inside = segments.find((s) => {
    const from = toPixel(s.start_s, span, width_px);
    const to = toPixel(s.end_s, span, width_px);
    return x_px >= from && x_px <= to;
  });
  return inside ? { kind: 'segment', segment: inside.id } : { kind: 'free' };
}

/**
 * The stretch that a drag from `from_s` to `to_s` marks: cut at neighbouring segments and at the ends of the recording.
 * Null where it would begin inside a segment or be too short to be meant.
 */
export function markedStretch(
  session: Session,
  recording: string,
  from_s: number,
  to_s: number,
  whole_s: number,
): TimeSpan | null {
  const free = freeStretch(session, recording, from_s, whole_s);
  if (!free) return null;
  const start_s = Math.max(Math.min(from_s, to_s), free.start_s);
  const end_s = Math.min(Math.max(from_s, to_s), free.end_s);
  return end_s - start_s >= SHORTEST_SEGMENT_S ? { start_s, end_s } : null;
}

/** The segment before or after the selected one in the order of time; the first or last where none is selected. */
export function neighbour(segments: readonly Stretch[], selected: string | null, by: 1 | -1): string | null {
  const ordered = [...segments].sort((a, b) => a.start_s - b.start_s);
  if (ordered.length === 0) return null;
  const here = ordered.findIndex((s) => s.id === selected);
  if (here === -1) return (by === 1 ? ordered[0] : ordered.at(-1))?.id ?? null;
  return ordered[Math.min(Math.max(here + by, 0), ordered.length - 1)]?.id ?? null;
}
