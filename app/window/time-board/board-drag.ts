import { changeSegment, edgeWithin } from '../session-edits/segment-edits.ts';
import { span } from '../state/board.ts';
import { mark } from '../state/command-table.ts';
import { edit, session } from '../state/document.ts';
import { askPreview } from '../state/results.ts';
import { moveCursor, recording, segment, segments, selectSegment, whole_s } from '../state/selection.ts';
import { markedStretch, targetAt } from './marking.ts';
import { type TimeSpan, toTime } from './time-span.ts';

/** A segment's times while one of its edges is being dragged. */
export interface EdgeDraft {
  readonly segment: string;
  readonly start_s: number;
  readonly end_s: number;
}

/** What a drag shows while it lasts. */
export interface BoardDraft {
  readonly edge: EdgeDraft | null;
  /** A stretch being marked. */
  readonly stretch: TimeSpan | null;
}

export const NO_DRAFT: BoardDraft = { edge: null, stretch: null };

/** A drag on the board that has begun; `x_px` from the left edge of the lanes. */
export interface BoardDrag {
  to(x_px: number): BoardDraft;
  end(x_px: number): void;
}

/** So far the pointer must go before a press becomes a drag, CSS pixels. */
const THRESHOLD_PX = 4;

/** A press on the upper lanes (ruler, film strip) moves the cursor and keeps hold of it. */
export function scrubDrag(width_px: number): BoardDrag {
  const go = (x_px: number) => {
    moveCursor(toTime(x_px, span.value, width_px));
    return NO_DRAFT;
  };
  return { to: go, end: go };
}

/**
 * A press on the lower lanes: takes hold of an edge, selects a segment (the cursor goes where it was pressed), or marks a new
 * segment by dragging over free board.
 */
export function markDrag(from_px: number, width_px: number): BoardDrag {
  const target = targetAt(segments.value, from_px, span.value, width_px, segment.value?.id ?? null);
  if (target.kind === 'edge') return edgeDrag(target.segment, target.edge, width_px);
  const from_s = toTime(from_px, span.value, width_px);
  let far = false;
  return {
    to(x_px) {
      far ||= Math.abs(x_px - from_px) >= THRESHOLD_PX;
      const r = recording.value;
      if (!far || target.kind === 'segment' || !session.value || !r) return NO_DRAFT;
      const to_s = toTime(x_px, span.value, width_px);
      return { edge: null, stretch: markedStretch(session.value, r.id, from_s, to_s, whole_s.value) };
    },
    end(x_px) {
      if (far && target.kind === 'free') return mark(from_s, toTime(x_px, span.value, width_px));
      moveCursor(from_s);
      if (target.kind === 'segment') selectSegment(target.segment);
    },
  };
}

function edgeDrag(id: string, edge: 'start' | 'end', width_px: number): BoardDrag {
  selectSegment(id);
  const times = (x_px: number): EdgeDraft | null => {
    const s = session.value?.segments.find((one) => one.id === id);
    if (!session.value || !s) return null;
    const at_s = edgeWithin(session.value, id, edge, toTime(x_px, span.value, width_px), whole_s.value);
    return { segment: id, start_s: edge === 'start' ? at_s : s.start_s, end_s: edge === 'end' ? at_s : s.end_s };
  };
  return {
    to(x_px) {
      const draft = times(x_px);
      const s = session.value?.segments.find((one) => one.id === id);
      if (draft && s) {
        moveCursor(edge === 'start' ? draft.start_s : draft.end_s);
        void askPreview({ ...draft, view: s.view });
      }
      return { edge: draft, stretch: null };
    },
    end(x_px) {
      const draft = times(x_px);
      if (!draft) return;
      const change = edge === 'start' ? { start_s: draft.start_s } : { end_s: draft.end_s };
      const before = session.value?.segments.find((one) => one.id === id);
      if (before?.[`${edge}_s`] === change[`${edge}_s` as keyof typeof change]) return;
      edit(`Move the ${edge} of ${id}`, (all) => changeSegment(all, id, change));
    },
  };
}
