import { useRef } from 'preact/hooks';
import { Icon } from '../parts/icons.tsx';
import { showSpan, showWhole, span, zoomBoard } from '../state/board.ts';
import { showSegment } from '../state/command-table.ts';
import { cursor_s, segment, segments, whole_s } from '../state/selection.ts';
import { panSpan } from './time-span.ts';

/** The whole recording in miniature with the stretch on the board as a slider, and the board's zoom. */
export function BoardScroll() {
  const track = useRef<HTMLDivElement>(null);
  const held = useRef<number | null>(null);
  const whole = Math.max(whole_s.value, 0.001);
  const { start_s, end_s } = span.value;
  const share = (t: number) => `${(t / whole) * 100}%`;
  const timeAt = (event: PointerEvent) => {
    const box = track.current?.getBoundingClientRect();
    return box ? ((event.clientX - box.left) / Math.max(box.width, 1)) * whole : 0;
  };
  return (
    <div class="board-scroll">
      <div class="board-zoom">
        <button
          type="button"
          class="small"
          title="Longer stretch (Shift+↓)"
          aria-label="Longer stretch"
          onClick={() => zoomBoard(1 / 1.5)}
        >
          <Icon name="minus" />
        </button>
        <button
          type="button"
          class="small"
          title="Shorter stretch (Shift+↑)"
          aria-label="Shorter stretch"
          onClick={() => zoomBoard(1.5)}
        >
          <Icon name="plus" />
        </button>
      </div>
      <div
        ref={track}
        class="track"
        role="scrollbar"
        aria-label="Stretch of the recording on the board"
        aria-orientation="horizontal"
        aria-controls="board-lanes"
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={Math.round((start_s / whole) * 100)}
        aria-valuetext={`${start_s.toFixed(1)} to ${end_s.toFixed(1)} of ${whole.toFixed(1)} seconds`}
        tabIndex={0}
        onPointerDown={(event) => {
          const at = timeAt(event);
          held.current = at >= start_s && at <= end_s ? at - start_s : (end_s - start_s) / 2;
          if (at < start_s || at > end_s) showSpan(panSpan(span.value, at - (start_s + end_s) / 2, whole));
          event.currentTarget.setPointerCapture(event.pointerId);
        }}
        onPointerMove={(event) => {
          if (held.current !== null)
            showSpan(panSpan(span.value, timeAt(event) - held.current - span.value.start_s, whole));
        }}
        onPointerUp={() => {
          held.current = null;
        }}
        onKeyDown={(event) => {
          const way = event.key === 'ArrowLeft' ? -1 : event.key === 'ArrowRight' ? 1 : 0;
          if (way === 0) return;
          event.preventDefault();
          showSpan(panSpan(span.value, (way * (end_s - start_s)) / 10, whole));
        }}
      >
        {segments.value.map((s) => (
          <i
            key={s.id}
            class="piece"
            data-chosen={s.id === segment.value?.id || undefined}
            style={{ left: share(s.start_s), width: share(s.end_s - s.start_s) }}
          />
        ))}
        <i class="here" style={{ left: share(cursor_s.value) }} />
        <div class="thumb" style={{ left: share(start_s), width: share(end_s - start_s) }} />
      </div>
      <div class="board-zoom">
        <button type="button" class="small with-word" onClick={showWhole} title="Whole recording (Shift+0)">
          Whole
        </button>
        <button
          type="button"
          class="small with-word"
          disabled={!segment.value}
          onClick={showSegment}
          title="The selected segment over the whole board"
        >
          Segment
        </button>
      </div>
    </div>
  );
}
