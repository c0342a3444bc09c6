import { niceTicks, type Tick } from '../../../src/report/plots/scale.ts';
import { segment, segments } from '../state/selection.ts';
import { type TimeSpan, toPixel } from './time-span.ts';

const MARGIN_PX = 6;

/** Range of the currents typed, with room; around zero where none is known. */
export function currentRange(): readonly [number, number] {
  const known = segments.value.flatMap((s) => (s.current_A === null ? [] : [s.current_A]));
  if (known.length === 0) return [0, 1];
  const low = Math.min(0, ...known);
  const high = Math.max(0, ...known);
  return high > low ? [low, high] : [low, low + 1];
}

/** Marks of the lane's scale in ampere. */
export function currentTicks(height: number): readonly Tick[] {
  const [low, high] = currentRange();
  return niceTicks(low, high, Math.max(1, height / 24));
}

/** Where a current stands in the lane, pixels from its top. */
export function currentPlace(current_A: number, height: number): number {
  const [low, high] = currentRange();
  return height - MARGIN_PX - ((current_A - low) / (high - low)) * (height - 2 * MARGIN_PX);
}

/** The currents as a staircase; a segment without one shows where it is missing. */
export function CurrentLane({ width, height, span }: { width: number; height: number; span: TimeSpan }) {
  const ordered = segments.value;
  const risers = ordered.flatMap((s, i) => {
    const next = ordered[i + 1];
    if (!next || s.current_A === null || next.current_A === null) return [];
    const x0 = toPixel(s.end_s, span, width);
    const x1 = toPixel(next.start_s, span, width);
    return [
      `M${x0} ${currentPlace(s.current_A, height)}H${(x0 + x1) / 2}V${currentPlace(next.current_A, height)}H${x1}`,
    ];
  });
  return (
    <svg class="current-lane" width={width} height={height} role="img" aria-label="Current against time">
      {currentTicks(height).map(({ value }) => (
        <line
          key={value}
          class="grid"
          x1="0"
          x2={width}
          y1={currentPlace(value, height)}
          y2={currentPlace(value, height)}
        />
      ))}
      <path class="risers" d={risers.join('')} />
      {ordered.map((s) => {
        const x0 = toPixel(s.start_s, span, width);
        const x1 = toPixel(s.end_s, span, width);
        if (x1 < 0 || x0 > width) return null;
        if (s.current_A === null) {
          return (
            <text key={s.id} class="missing" x={(x0 + x1) / 2} y={height / 2 + 4} text-anchor="middle">
              {x1 - x0 > 12 ? '?' : ''}
            </text>
          );
        }
        const y = currentPlace(s.current_A, height);
        return (
          <line
            key={s.id}
            class="tread"
            data-chosen={s.id === segment.value?.id || undefined}
            x1={x0}
            x2={x1}
            y1={y}
            y2={y}
          />
        );
      })}
    </svg>
  );
}
