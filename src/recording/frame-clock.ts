import type { Recording } from './recording.ts';

/**
 * Seconds on the recording's presentation clock from its first displayed frame, after `timeScale`. The only place where ticks become
 * seconds. Throws RangeError for an index outside the recording.
 */
export function frameTime_s(
  recording: Pick<Recording, 'ticks' | 'timebase'>,
  index: number,
  timeScale: number,
): number {
  const { ticks, timebase } = recording;
  const tick = ticks[index];
  if (tick === undefined) {
    throw new RangeError(`index: expected a whole number from 0 to ${ticks.length - 1}, got ${index}`);
  }
  return (((tick - (ticks[0] ?? 0)) * timebase.numerator) / timebase.denominator) * timeScale;
}

/** The frames with start_s <= time <= end_s, as a range of indices: `first` to before `end`. Both are equal where there is none. */
export function framesWithin(
  recording: Pick<Recording, 'ticks' | 'timebase'>,
  start_s: number,
  end_s: number,
  timeScale: number,
): { readonly first: number; readonly end: number } {
  const first = countBefore(recording, (index) => frameTime_s(recording, index, timeScale) < start_s);
  const end = countBefore(recording, (index) => frameTime_s(recording, index, timeScale) <= end_s);
  return { first, end: Math.max(first, end) };
}

/** The displayed frame a player shows at a time: the last one that isn't later, or the first frame before the recording begins. */
export function frameAt(recording: Pick<Recording, 'ticks' | 'timebase'>, time_s: number, timeScale: number): number {
  return Math.max(0, countBefore(recording, (index) => frameTime_s(recording, index, timeScale) <= time_s) - 1);
}

/** How many frames from the start fulfil a condition that holds up to some frame and for none after it. */
function countBefore(recording: Pick<Recording, 'ticks'>, holds: (index: number) => boolean): number {
  let low = 0;
  let high = recording.ticks.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (holds(middle)) low = middle + 1;
    else high = middle;
  }
  return low;
}
