import type { Refusal, Trace } from '../../src/tracking/trace.ts';
import { type LeadIn, stepAbove } from './lead-in.ts';

/** What has been followed of one view, as the stretches come in: rows as in `Trace`, and the stretches they cover. */
export interface OverviewTrace {
  readonly unit: 'rad' | 'px';
  readonly time_s: Float64Array;
  readonly angle: Float64Array;
  readonly quality: Float64Array;
  readonly x_px: Float64Array;
  readonly y_px: Float64Array;
  readonly frame_index: Int32Array;
  readonly refused: readonly { readonly frame_index: number; readonly reason: Refusal }[];
  readonly halfLength_px: number | null;
  readonly u_common: number;
  /** Start and end in seconds, ascending, apart from each other. */
  readonly covered: readonly (readonly [number, number])[];
}

/** A stretch that was followed: its poses, or none. */
export interface FollowedStretch {
  readonly from_s: number;
  readonly to_s: number;
  readonly trace: Trace | null;
  /** Poses of frames just before it; left out: none. */
  readonly lead?: LeadIn;
}

/** Nothing followed yet. */
export function emptyOverview(unit: 'rad' | 'px'): OverviewTrace {
  const none = () => new Float64Array();
  return {
    unit,
    time_s: none(),
    angle: none(),
    quality: none(),
    x_px: none(),
    y_px: none(),
    frame_index: new Int32Array(),
    refused: [],
    halfLength_px: null,
    u_common: 0,
    covered: [],
  };
}

const columns = ['time_s', 'angle', 'quality', 'x_px', 'y_px'] as const;

/**
 * The overview with a stretch put in; rows that it had there are replaced. Half turns between stretches are taken out, and so is the step
 * to the stretch before it, whose poses are brought into line where the new one's axis is known better.
 */
export function withStretch(before: OverviewTrace, next: FollowedStretch): OverviewTrace {
  const { overview, stretch } = inLine(before, next);
  return joinedWith(overview, stretch);
}

function inLine(
  overview: OverviewTrace,
  stretch: FollowedStretch,
): { readonly overview: OverviewTrace; readonly stretch: FollowedStretch } {
  const { trace, lead, from_s } = stretch;
  const step = trace && lead && overview.unit === 'rad' ? stepAbove(overview, lead) : null;
  if (step === null || !trace) return { overview, stretch };
  if (trace.u_common >= overview.u_common) {
    const angle = trace.angle.map((a) => a - step);
    return { overview, stretch: { ...stretch, trace: { ...trace, angle, u_common: overview.u_common } } };
  }
  const run = overview.covered.find(([start, end]) => start < from_s && end >= from_s - 1e-9);
  const [first, end] = run ? [firstNotBefore(overview.time_s, run[0]), firstAfter(overview.time_s, run[1])] : [0, 0];
  const angle = overview.angle.map((a, row) => (row >= first && row < end ? a + step : a));
  return { overview: { ...overview, angle, u_common: trace.u_common }, stretch };
}

function joinedWith(overview: OverviewTrace, stretch: FollowedStretch): OverviewTrace {
  const { from_s, to_s, trace } = stretch;
  const before = firstNotBefore(overview.time_s, from_s);
  const after = firstAfter(overview.time_s, to_s);
  const part = <T extends Float64Array | Int32Array>(all: T, middle: T | undefined): T => {
    const length = before + (middle?.length ?? 0) + (all.length - after);
    const joined = new (all.constructor as new (n: number) => T)(length);
    joined.set(all.subarray(0, before));
    if (middle) joined.set(middle, before);
    joined.set(all.subarray(after), before + (middle?.length ?? 0));
    return joined;
  };
  const joined = Object.fromEntries(columns.map((name) => [name, part(overview[name], trace?.[name])])) as Record<
    (typeof columns)[number],
    Float64Array
  >;
  const frame_index = part(overview.frame_index, trace?.frame_index);
  const isNew = new Set([...(trace?.refused ?? []), ...(trace?.frame_index ?? [])].map(frameOf));
  const refused = [...overview.refused.filter((r) => !isNew.has(r.frame_index)), ...(trace?.refused ?? [])].sort(
    (a, b) => a.frame_index - b.frame_index,
  );
  return {
    unit: overview.unit,
    ...joined,
    angle: overview.unit === 'rad' ? continuous(joined.angle) : joined.angle,
    frame_index,
    refused,
    halfLength_px: trace?.halfLength_px ?? overview.halfLength_px,
    u_common: Math.max(overview.u_common, trace?.u_common ?? 0),
    covered: joinedIntervals([...overview.covered, [from_s, to_s]]),
  };
}

/** The rows of a stretch as a trace for the fit; null: no row lies in it. */
export function traceWithin(overview: OverviewTrace, from_s: number, to_s: number): Trace | null {
  const first = firstNotBefore(overview.time_s, from_s);
  const end = firstAfter(overview.time_s, to_s);
  if (end <= first) return null;
  const frame_index = overview.frame_index.slice(first, end);
  const [low, high] = [frame_index[0] ?? 0, frame_index.at(-1) ?? 0];
  return {
    time_s: overview.time_s.slice(first, end),
    angle: overview.angle.slice(first, end),
    unit: overview.unit,
    x_px: overview.x_px.slice(first, end),
    y_px: overview.y_px.slice(first, end),
    quality: overview.quality.slice(first, end),
    frame_index,
    refused: overview.refused.filter((r) => r.frame_index >= low && r.frame_index <= high),
    halfLength_px: overview.halfLength_px,
    u_common: overview.u_common,
  };
}

/** The parts of a stretch that aren't covered yet, ascending. Slivers shorter than `shortest_s` are passed over. */
export function uncovered(
  covered: OverviewTrace['covered'],
  from_s: number,
  to_s: number,
  shortest_s: number,
): [number, number][] {
  const gaps: [number, number][] = [];
  let at = from_s;
  for (const [start, end] of covered) {
    if (end <= at) continue;
    if (start >= to_s) break;
    if (start > at) gaps.push([at, start]);
    at = Math.max(at, end);
  }
  if (at < to_s) gaps.push([at, to_s]);
  return gaps.filter(([start, end]) => end - start > shortest_s);
}

/** Index of the first row at or after a time; the number of rows where there is none. */
export function firstNotBefore(time_s: Float64Array, t_s: number): number {
  let [low, high] = [0, time_s.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((time_s[middle] ?? 0) < t_s) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Index of the first row after a time. */
export function firstAfter(time_s: Float64Array, t_s: number): number {
  let [low, high] = [0, time_s.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((time_s[middle] ?? 0) <= t_s) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** A bar looks the same after half a turn: each angle is brought within a quarter turn of the one before it. */
function continuous(angle: Float64Array): Float64Array {
  const out = angle.slice();
  for (let i = 1; i < out.length; i++) {
    const step = (out[i] ?? 0) - (out[i - 1] ?? 0);
    out[i] = (out[i] ?? 0) - Math.PI * Math.round(step / Math.PI);
  }
  return out;
}

function joinedIntervals(intervals: readonly (readonly [number, number])[]): [number, number][] {
  const joined: [number, number][] = [];
  for (const [start, end] of [...intervals].sort((a, b) => a[0] - b[0])) {
    const last = joined.at(-1);
    if (last && start <= last[1] + 1e-9) last[1] = Math.max(last[1], end);
    else joined.push([start, end]);
  }
  return joined;
}

function frameOf(entry: number | { readonly frame_index: number }): number {
  return typeof entry === 'number' ? entry : entry.frame_index;
}
