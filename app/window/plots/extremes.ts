/** For each pixel column the smallest and largest value that falls into it; NaN in both where none does. */
export interface Extremes {
  readonly low: Float64Array;
  readonly high: Float64Array;
  /** First and last value of each column, so that neighbouring columns join without a gap. */
  readonly first: Float64Array;
  readonly last: Float64Array;
}

/** Index of the first element of an ascending column that is not below `value` (its length where all are below). */
export function lowerBound(column: ArrayLike<number>, value: number, from = 0, to = column.length): number {
  let low = from;
  let high = to;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (column[middle]! < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Index of the element of an ascending, non-empty column that lies nearest to `value`. */
export function nearestIndex(column: ArrayLike<number>, value: number): number {
  const i = lowerBound(column, value);
  if (i === 0) return 0;
  if (i === column.length) return column.length - 1;
  return value - column[i - 1]! <= column[i]! - value ? i - 1 : i;
}

/**
 * Reduces a curve to what a raster of `columns` pixel columns between `from` and `to` can show: at most two points per
 * column, however long the data. `x` ascends; `y` is aligned with it.
 */
export function columnExtremes(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  from: number,
  to: number,
  columns: number,
): Extremes {
  const low = new Float64Array(columns).fill(Number.NaN);
  const high = new Float64Array(columns).fill(Number.NaN);
  const first = new Float64Array(columns).fill(Number.NaN);
  const last = new Float64Array(columns).fill(Number.NaN);
  const scale = columns / (to - from);
  const end = lowerBound(x, to);
  for (let i = lowerBound(x, from); i < end; i++) {
    const column = Math.min(columns - 1, Math.floor((x[i]! - from) * scale));
    const value = y[i]!;
    if (Number.isNaN(low[column]!)) {
      low[column] = value;
      high[column] = value;
      first[column] = value;
    } else if (value < low[column]!) low[column] = value;
    else if (value > high[column]!) high[column] = value;
    last[column] = value;
  }
  return { low, high, first, last };
}

/** Smallest and largest value of a stretch [from, to] of a curve; null where the stretch holds no point. */
export function rangeWithin(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  from: number,
  to: number,
): readonly [number, number] | null {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  const end = lowerBound(x, to);
  for (let i = lowerBound(x, from); i < end; i++) {
    const value = y[i]!;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return low <= high ? [low, high] : null;
}
