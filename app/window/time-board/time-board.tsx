import { useSignal } from '@preact/signals';
import { useEffect, useRef } from 'preact/hooks';
import { niceTicks } from '../../../src/report/plots/scale.ts';
import { timeLabel, timeTicks } from '../plots/ticks.ts';
import { showSpan, span } from '../state/board.ts';
import { markStart } from '../state/mark.ts';
import { cursor_s, recording, segment, segments, view, whole_s } from '../state/selection.ts';
import { type BoardDraft, type BoardDrag, markDrag, NO_DRAFT, scrubDrag } from './board-drag.ts';
import { BoardScroll } from './board-scroll.tsx';
import { CurrentLane, currentPlace, currentTicks } from './current-lane.tsx';
import { FilmLane } from './film-lane.tsx';
import { laneCurves, laneRange } from './lane-curves.ts';
import { targetAt } from './marking.ts';
import { SegmentLane } from './segment-lane.tsx';
import { panSpan, toPixel, toTime, zoomSpan } from './time-span.ts';
import { TraceLane } from './trace-lane.tsx';

const RULER_PX = 22;
const SEGMENTS_PX = 26;

/** Heights of the lanes in CSS pixels. */
interface LaneHeights {
  readonly film: number;
  readonly trace: number;
  readonly current: number;
}

/** The angle gets most of the room; film and current give way first where the board is low. */
function laneHeights(height: number): LaneHeights {
  const film = Math.round(Math.min(44, Math.max(24, height * 0.18)));
  const current = Math.round(Math.min(48, Math.max(32, height * 0.19)));
  return { film, current, trace: Math.max(40, height - RULER_PX - SEGMENTS_PX - film - current) };
}

/** All lanes on one time axis: ruler, film strip, angle, current, segments. */
export function TimeBoard() {
  const lanes = useRef<HTMLDivElement>(null);
  const size = useSignal({ width: 0, height: 0 });
  const drag = useRef<BoardDrag | null>(null);
  const draft = useSignal<BoardDraft>(NO_DRAFT);

  useEffect(() => {
    const element = lanes.current;
    if (!element) return;
    const observer = new ResizeObserver(() => {
      size.value = { width: element.clientWidth, height: element.clientHeight };
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);

  const { width, height } = size.value;
  const now = span.value;
  const heights = laneHeights(height);
  const x_of = (event: PointerEvent | WheelEvent) => event.clientX - (lanes.current?.getBoundingClientRect().left ?? 0);

  function press(event: PointerEvent): void {
    if (event.button !== 0 || !recording.value) return;
    const upper = (event.target as Element).closest('[data-lane="upper"]') !== null;
    const here = x_of(event);
    drag.current = upper ? scrubDrag(width) : markDrag(here, width);
    if (upper) drag.current.to(here);
    lanes.current?.setPointerCapture(event.pointerId);
    if (!(event.target as Element).closest('.bracket')) lanes.current?.focus({ preventScroll: true });
  }

  return (
    <section class="board" aria-label="Time board">
      <Gutter heights={heights} />
      {/* biome-ignore lint/a11y/useSemanticElements: a fieldset is a group of fields, these are lanes. */}
      <div
        ref={lanes}
        class="lanes"
        // biome-ignore lint/a11y/noNoninteractiveTabindex: it takes the keys of the time menu.
        tabIndex={0}
        role="group"
        aria-label="Time axis. Arrow keys move the cursor, B and E mark a segment."
        onPointerDown={press}
        onPointerMove={(event) => {
          if (drag.current) draft.value = drag.current.to(x_of(event));
          else hover(event, x_of(event), width);
        }}
        onPointerUp={(event) => {
          const ending = drag.current;
          drag.current = null;
          draft.value = NO_DRAFT;
          ending?.end(x_of(event));
        }}
        onPointerCancel={() => {
          drag.current = null;
          draft.value = NO_DRAFT;
        }}
        onWheel={(event) => {
          event.preventDefault();
          turn(event, x_of(event), width);
        }}
      >
        {width > 0 ? (
          <>
            <div data-lane="upper">
              <Ruler width={width} />
              <FilmLane width={width} height={heights.film} span={now} />
            </div>
            <TraceLane width={width} height={heights.trace} span={now} />
            <CurrentLane width={width} height={heights.current} span={now} />
            <SegmentLane width={width} span={now} draft={draft.value.edge} />
            <Bands width={width} film={heights.film} draft={draft.value} />
            <Marks width={width} film={heights.film} />
            {laneCurves.value.curves.length === 0 && recording.value ? (
              <p class="lane-word" style={{ top: `${RULER_PX + heights.film + heights.trace / 2 - 10}px` }}>
                {view.value
                  ? 'Not followed yet: press F to follow the bar'
                  : 'The angle of the bar appears here once a region is drawn'}
              </p>
            ) : null}
          </>
        ) : null}
      </div>
      <BoardScroll />
    </section>
  );
}

/** Names and scales of the lanes. */
function Gutter({ heights }: { heights: LaneHeights }) {
  const trace_px = heights.trace;
  const current_px = heights.current;
  const lane = laneCurves.value;
  const range = laneRange.value;
  const ticks = niceTicks(range[0], range[1], Math.max(2, trace_px / 28));
  const shown = lane.curves.length > 0;
  return (
    <div class="gutter" aria-hidden="true">
      <div class="gutter-lane" style={{ height: '22px' }}>
        <span>{whole_s.value < 100 ? 'time / s' : 'time / min:s'}</span>
      </div>
      <div class="gutter-lane" style={{ height: `${heights.film}px` }}>
        <span>film</span>
      </div>
      <div class="gutter-lane" style={{ height: `${trace_px}px` }}>
        <span>angle / {lane.unit === 'deg' ? '°' : 'px'}</span>
        {shown
          ? ticks.map(({ value, text }) => (
              <i key={value} style={{ top: `${trace_px - ((value - range[0]) / (range[1] - range[0])) * trace_px}px` }}>
                {text}
              </i>
            ))
          : null}
      </div>
      <div class="gutter-lane" style={{ height: `${current_px}px` }}>
        <span>current / A</span>
        {segments.value.length > 0
          ? currentTicks(current_px).map(({ value, text }) => (
              <i key={value} style={{ top: `${currentPlace(value, current_px)}px` }}>
                {text}
              </i>
            ))
          : null}
      </div>
      <div class="gutter-lane" style={{ height: '26px' }}>
        <span>segments</span>
      </div>
    </div>
  );
}

function Ruler({ width }: { width: number }) {
  const now = span.value;
  const ticks = timeTicks(now.start_s, now.end_s, Math.max(2, width / 72));
  return (
    <svg class="ruler" width={width} height="22" aria-hidden="true">
      {ticks.places.map((t) => {
        const x = toPixel(t, now, width);
        return (
          <g key={t}>
            <line x1={x} x2={x} y1="15" y2="22" />
            {x < width - 12 ? (
              <text x={Math.max(x, 1)} y="12" text-anchor={x < 12 ? 'start' : 'middle'}>
                {timeLabel(t, ticks.decimals, whole_s.value)}
              </text>
            ) : null}
          </g>
        );
      })}
    </svg>
  );
}

/** Segments as bands behind all lanes, and the stretch being marked. */
function Bands({ width, film, draft }: { width: number; film: number; draft: BoardDraft }) {
  const band = (start_s: number, end_s: number) => ({
    left: `${toPixel(start_s, span.value, width)}px`,
    width: `${Math.max(1, toPixel(end_s, span.value, width) - toPixel(start_s, span.value, width))}px`,
    top: `${film}px`,
  });
  return (
    <div class="bands" aria-hidden="true">
      {segments.value.map((s) => {
        const at = draft.edge?.segment === s.id ? draft.edge : s;
        const chosen = segment.value?.id === s.id;
        return (
          <div
            key={s.id}
            class="band"
            data-chosen={chosen || undefined}
            style={chosen ? { ...band(at.start_s, at.end_s), top: '0' } : band(at.start_s, at.end_s)}
          />
        );
      })}
      {draft.stretch ? (
        <div class="band marking" style={band(draft.stretch.start_s, draft.stretch.end_s)}>
          <span>{(draft.stretch.end_s - draft.stretch.start_s).toFixed(2)} s</span>
        </div>
      ) : null}
    </div>
  );
}

/** The cursor, and where a segment begun with B starts. */
function Marks({ width, film }: { width: number; film: number }) {
  const x = toPixel(cursor_s.value, span.value, width);
  const start_s = markStart.value;
  return (
    <div class="marks" aria-hidden="true">
      {start_s === null ? null : (
        <>
          <div class="mark-start" style={{ left: `${toPixel(start_s, span.value, width)}px` }} />
          <div
            class="band marking"
            style={{
              left: `${toPixel(Math.min(start_s, cursor_s.value), span.value, width)}px`,
              width: `${Math.abs(x - toPixel(start_s, span.value, width))}px`,
              top: `${RULER_PX + film}px`,
            }}
          />
        </>
      )}
      {x >= 0 && x <= width ? <div class="cursor" style={{ left: `${x}px` }} /> : null}
    </div>
  );
}

function hover(event: PointerEvent, x_px: number, width_px: number): void {
  const lane = event.currentTarget as HTMLElement;
  if ((event.target as Element).closest('[data-lane="upper"]')) lane.style.cursor = 'default';
  else {
    const target = targetAt(segments.value, x_px, span.value, width_px, segment.value?.id ?? null);
    lane.style.cursor = target.kind === 'edge' ? 'ew-resize' : target.kind === 'segment' ? 'pointer' : 'crosshair';
  }
}

/** The wheel zooms about the pointer; sideways, or with Shift, it moves along. */
function turn(event: WheelEvent, x_px: number, width_px: number): void {
  const sideways = event.shiftKey ? event.deltaY || event.deltaX : event.deltaX;
  const length = span.value.end_s - span.value.start_s;
  if (Math.abs(sideways) > Math.abs(event.shiftKey ? 0 : event.deltaY)) {
    showSpan(panSpan(span.value, (sideways / Math.max(width_px, 1)) * length, whole_s.value));
  } else showSpan(zoomSpan(span.value, toTime(x_px, span.value, width_px), 1.002 ** -event.deltaY, whole_s.value));
}
