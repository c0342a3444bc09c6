import { median } from '../numerics/statistics.ts';
import type { Trace } from '../tracking/trace.ts';

/** Samples of one segment, times in seconds from its first pose, ascending. */
export interface Series {
  readonly time_s: Float64Array;
  readonly value: Float64Array;
}

/** How a segment was sampled. */
export interface Sampling {
  /** From the first to the last sample. */
  readonly duration_s: number;
  readonly medianInterval_s: number;
  readonly longestInterval_s: number;
}

/** The trace's angle as a series. RangeError where columns differ in length, a time does not ascend or a number is not finite. */
export function angleSeries(trace: Trace): Series {
  const n = trace.time_s.length;
  if (trace.angle.length !== n || trace.x_px.length !== n || trace.y_px.length !== n) {
    throw new RangeError(`trace: expected columns of one length, got ${n} times and ${trace.angle.length} angles`);
  }
  const time_s = trace.time_s.map((t) => t - trace.time_s[0]!);
  for (let i = 0; i < n; i++) {
    if (!Number.isFinite(time_s[i]!) || !Number.isFinite(trace.angle[i]!)) {
      throw new RangeError(`trace: expected finite times and angles, row ${i} is not`);
    }
    if (i > 0 && time_s[i]! <= time_s[i - 1]!)
      throw new RangeError(`trace: expected ascending times, row ${i} is not later`);
  }
  return { time_s, value: trace.angle };
}

/** The samples whose row is marked with 1. */
export function pick(series: Series, used: Uint8Array): Series {
  const keep = (_: number, i: number) => used[i] === 1;
  return { time_s: series.time_s.filter(keep), value: series.value.filter(keep) };
}

/** Intervals between samples; at least two samples are needed. */
export function sampling({ time_s }: Series): Sampling {
  const intervals = new Float64Array(time_s.length - 1);
  let longestInterval_s = 0;
  for (let i = 0; i < intervals.length; i++) {
    intervals[i] = time_s[i + 1]! - time_s[i]!;
    longestInterval_s = Math.max(longestInterval_s, intervals[i]!);
  }
  return {
    duration_s: time_s[time_s.length - 1]! - time_s[0]!,
    medianInterval_s: median(intervals),
    longestInterval_s,
  };
}
