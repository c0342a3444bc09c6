import type { SessionSegment } from '../../contract.ts';
import { entryText, fixedText } from '../numbers/quantity-text.ts';
import { STANDING_WORDS, StandingMark } from '../parts/standing-mark.tsx';
import { nearestIndex } from '../plots/extremes.ts';
import { changeSegment, edgeWithin } from '../session-edits/segment-edits.ts';
import { edit, session } from '../state/document.ts';
import { askPreview, standingOf } from '../state/results.ts';
import { frameTimes, segment, segments, selectSegment, sheet, whole_s } from '../state/selection.ts';
import type { EdgeDraft } from './board-drag.ts';
import { type TimeSpan, toPixel } from './time-span.ts';

interface SegmentLaneProps {
  readonly width: number;
  readonly span: TimeSpan;
  readonly draft: EdgeDraft | null;
}

/** Segments as brackets under the time axis; each can be reached by the keyboard, and so can the edges of the selected one. */
export function SegmentLane({ width, span, draft }: SegmentLaneProps) {
  return (
    <div class="segment-lane" role="listbox" aria-label="Segments" aria-orientation="horizontal">
      {segments.value.map((s) => {
        const start_s = draft?.segment === s.id ? draft.start_s : s.start_s;
        const end_s = draft?.segment === s.id ? draft.end_s : s.end_s;
        const x0 = toPixel(start_s, span, width);
        const x1 = toPixel(end_s, span, width);
        if (x1 < -20 || x0 > width + 20) return null;
        return <Bracket key={s.id} of={s} x0={x0} x1={x1} />;
      })}
    </div>
  );
}

function Bracket({ of: s, x0, x1 }: { of: SessionSegment; x0: number; x1: number }) {
  const chosen = segment.value?.id === s.id;
  const standing = standingOf(s);
  const current = s.current_A === null ? 'no current yet' : `${entryText(s.current_A)} A`;
  const room = x1 - x0;
  const name = `Segment ${s.id}, ${fixedText(s.start_s, 2)} to ${fixedText(s.end_s, 2)} s, ${current}, ${STANDING_WORDS[standing]}`;
  return (
    <div
      class="bracket"
      data-chosen={chosen || undefined}
      data-segment={s.id}
      style={{ left: `${x0}px`, width: `${Math.max(2, room)}px` }}
    >
      <div
        class="bracket-name"
        role="option"
        aria-selected={chosen}
        aria-label={name}
        title={name}
        tabIndex={chosen || (segment.value === null && segments.value[0]?.id === s.id) ? 0 : -1}
        onFocus={() => selectSegment(s.id)}
        onKeyDown={(event) => {
          if (event.key === 'Enter') {
            sheet.value = 'segment';
            event.preventDefault();
          }
        }}
      >
        {room > 18 ? <StandingMark standing={standing} /> : null}
        {room > 42 ? <span class="bracket-id">{s.id}</span> : null}
        {room > 110 ? <span class="bracket-current">{current}</span> : null}
      </div>
      {chosen ? (
        <>
          <Edge of={s} edge="start" />
          <Edge of={s} edge="end" />
        </>
      ) : null}
    </div>
  );
}

/** One edge of the selected segment as a slider: arrows move it by a frame, with Shift by a second. */
function Edge({ of: s, edge }: { of: SessionSegment; edge: 'start' | 'end' }) {
  const at_s = edge === 'start' ? s.start_s : s.end_s;
  return (
    <div
      class="bracket-edge"
      data-edge={edge}
      role="slider"
      tabIndex={0}
      aria-label={edge === 'start' ? `Start of ${s.id}` : `End of ${s.id}`}
      aria-valuemin={0}
      aria-valuemax={whole_s.value}
      aria-valuenow={at_s}
      aria-valuetext={`${at_s.toFixed(3)} seconds`}
      onKeyDown={(event) => {
        const way = event.key === 'ArrowLeft' ? -1 : event.key === 'ArrowRight' ? 1 : 0;
        if (way === 0) return;
        event.preventDefault();
        event.stopPropagation();
        moveEdge(s, edge, event.shiftKey ? at_s + way : oneFrameFrom(at_s, way));
      }}
    />
  );
}

function oneFrameFrom(time_s: number, way: 1 | -1): number {
  const times = frameTimes.value;
  if (!times?.length) return time_s + way / 30;
  const here = nearestIndex(times, time_s);
  return times[Math.min(Math.max(here + way, 0), times.length - 1)]!;
}

/** Puts an edge to a time as far as neighbours allow; steps in a row become one to undo. */
export function moveEdge(s: SessionSegment, edge: 'start' | 'end', to_s: number): void {
  if (!session.value) return;
  const at_s = edgeWithin(session.value, s.id, edge, to_s, whole_s.value);
  const change = edge === 'start' ? { start_s: at_s } : { end_s: at_s };
  edit(`Move the ${edge} of ${s.id}`, (all) => changeSegment(all, s.id, change), `edge ${s.id} ${edge}`);
  void askPreview({ segment: s.id, view: s.view, start_s: s.start_s, end_s: s.end_s, ...change });
}
