import { columnExtremes, lowerBound, rangeWithin } from '../plots/extremes.ts';
import type { TimeSpan } from './time-span.ts';

/** A curve as aligned columns, x ascending. */
export interface Curve {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/** Above so many points per pixel column only the extremes of each column are drawn. */
const DENSE = 2;
/** A gap in time of more than this many usual steps is left open. */
const GAP = 4;

/** Common range of curves within a stretch, with a margin; something sensible where nothing is in it. */
export function curveRange(curves: readonly Curve[], span: TimeSpan): readonly [number, number] {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const { x, y } of curves) {
    const range = rangeWithin(x, y, span.start_s, span.end_s);
    if (range) {
      low = Math.min(low, range[0]);
      high = Math.max(high, range[1]);
    }
  }
  if (low > high) return [-1, 1];
  const margin = Math.max((high - low) * 0.08, 0.05);
  return [low - margin, high + margin];
}

/** Paints a curve with the colours set: joined points where there is room, else the extremes of every pixel column. */
export function paintCurve(
  context: CanvasRenderingContext2D,
  { x, y }: Curve,
  span: TimeSpan,
  range: readonly [number, number],
  width: number,
  height: number,
): void {
  const from = Math.max(0, lowerBound(x, span.start_s) - 1);
  const to = Math.min(x.length, lowerBound(x, span.end_s) + 1);
  if (to - from < 1) return;
  const sx = width / (span.end_s - span.start_s);
  const sy = height / (range[1] - range[0]);
  const py = (value: number) => height - (value - range[0]) * sy;
  context.lineWidth = 1.25;
  context.lineJoin = 'round';
  context.beginPath();
  if (to - from <= DENSE * width) {
    const step = (x[to - 1]! - x[from]!) / Math.max(1, to - from - 1);
    for (let i = from; i < to; i++) {
      const px = (x[i]! - span.start_s) * sx;
      if (i === from || x[i]! - x[i - 1]! > GAP * step) context.moveTo(px, py(y[i]!));
      else context.lineTo(px, py(y[i]!));
    }
  } else {
    const columns = columnExtremes(x, y, span.start_s, span.end_s, Math.floor(width));
    let open = false;
    for (let i = 0; i < columns.low.length; i++) {
      if (Number.isNaN(columns.low[i]!)) {
        open = false;
        continue;
      }
      if (open) context.lineTo(i + 0.5, py(columns.first[i]!));
      else context.moveTo(i + 0.5, py(columns.first[i]!));
      context.lineTo(i + 0.5, py(columns.low[i]!));
      context.lineTo(i + 0.5, py(columns.high[i]!));
      context.lineTo(i + 0.5, py(columns.last[i]!));
      open = true;
    }
  }
  context.stroke();
}
