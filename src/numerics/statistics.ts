/** Arithmetic mean. RangeError for no values. */
export function mean(values: ArrayLike<number>): number {
  demand(values, 1, 'mean');
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]!;
  return sum / values.length;
}

/** Standard deviation with n - 1 in the denominator. RangeError for fewer than two values. */
export function standardDeviation(values: ArrayLike<number>): number {
  demand(values, 2, 'standardDeviation');
  const middle = mean(values);
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += (values[i]! - middle) ** 2;
  return Math.sqrt(sum / (values.length - 1));
}

/** Root of the mean square. RangeError for no values. */
export function rootMeanSquare(values: ArrayLike<number>): number {
  demand(values, 1, 'rootMeanSquare');
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]! ** 2;
  return Math.sqrt(sum / values.length);
}

/** Quantile `q` in [0, 1], linear between order statistics (definition 7 of Hyndman and Fan 1996). RangeError for no values. */
export function quantile(values: ArrayLike<number>, q: number): number {
  demand(values, 1, 'quantile');
  const work = Float64Array.from(values);
  const at = q * (work.length - 1);
  const low = Math.floor(at);
  const below = select(work, low);
  if (low === at) return below;
  let above = work[low + 1]!;
  for (let i = low + 2; i < work.length; i++) above = Math.min(above, work[i]!);
  return below + (at - low) * (above - below);
}

/** Puts the value of rank `rank` (from 0) in its place, none larger before and none smaller behind it (Hoare 1961, Algorithm 65: Find), and returns it. */
function select(work: Float64Array, rank: number): number {
  let from = 0;
  let to = work.length - 1;
  while (from < to) {
    const pivot = work[rank]!;
    let i = from;
    let j = to;
    while (i <= j) {
      while (work[i]! < pivot) i++;
      while (pivot < work[j]!) j--;
      if (i > j) break;
      const swap = work[i]!;
      work[i++] = work[j]!;
      work[j--] = swap;
    }
    if (j < rank) from = i;
    if (rank < i) to = j;
  }
  return work[rank]!;
}

/** Median. RangeError for no values. */
export function median(values: ArrayLike<number>): number {
  return quantile(values, 0.5);
}

/**
 * Median of the absolute deviations from the median, times 1.4826: estimates the standard deviation of normal values and
 * is not moved by a minority of outliers. RangeError for no values.
 */
export function robustDeviation(values: ArrayLike<number>): number {
  const middle = median(values);
  return 1.482602218505602 * median(Float64Array.from(values, (value) => Math.abs(value - middle)));
}

function demand(values: ArrayLike<number>, count: number, name: string): void {
  if (values.length < count) throw new RangeError(`${name}: expected at least ${count} values, got ${values.length}`);
}
