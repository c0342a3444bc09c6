import { signal } from '@preact/signals';
import type { Overview, TraceColumns } from '../../contract.ts';
import { lowerBound } from '../plots/extremes.ts';
import { host } from './host.ts';

/** Columns that grow at their end while a bar is followed: kept in arrays of twice the length when they are full. */
export interface GrowingTrace {
  readonly unit: 'deg' | 'px';
  readonly length: number;
  readonly time_s: Float64Array;
  readonly angle: Float64Array;
  readonly x_px: Float64Array;
  readonly y_px: Float64Array;
}

/** What has been followed of each view. A new object whenever one grew. */
export const traces = signal<ReadonlyMap<string, GrowingTrace>>(new Map());

const FIELDS = ['time_s', 'angle', 'x_px', 'y_px'] as const;

/**
 * A trace in which new rows stand for whatever was there from `from_s` to `to_s` (both included); the old object stays as it was.
 * Rows that only lengthen it are written behind those that are there, so that a trace can grow without being copied each time.
 */
export function withStretch(
  trace: GrowingTrace | null,
  from_s: number,
  to_s: number,
  more: TraceColumns,
): GrowingTrace {
  const before = trace && trace.unit === more.unit ? trace : null;
  const start = before ? lowerBound(before.time_s, from_s) : 0;
  const rest = before ? upperBound(before.time_s, to_s) : 0;
  const old = before?.length ?? 0;
  const length = start + more.time_s.length + (old - rest);
  const columns = FIELDS.map((field) => {
    const held = before?.[field];
    // Rows beyond `length` of the older object are free to be written: nobody looks at them.
    const room = held && start === old ? held.buffer : null;
    const column =
      room && room.byteLength >= length * 8 ? new Float64Array(room) : new Float64Array(Math.max(1024, length * 2));
    if (held && column.buffer !== room) column.set(held.subarray(0, start));
    column.set(more[field], start);
    if (held && rest < old) column.set(held.subarray(rest, old), start + more.time_s.length);
    return column.subarray(0, length);
  });
  return { unit: more.unit, length, time_s: columns[0]!, angle: columns[1]!, x_px: columns[2]!, y_px: columns[3]! };
}

/** Index of the first element of an ascending column that is above `value`. */
function upperBound(column: Float64Array, value: number): number {
  let i = lowerBound(column, value);
  while (i < column.length && column[i]! <= value) i++;
  return i;
}

/** Takes new rows of a view that is being followed. */
export function takePoses(viewId: string, from_s: number, to_s: number, more: TraceColumns): void {
  const before = traces.value.get(viewId) ?? null;
  traces.value = new Map(traces.value).set(viewId, withStretch(before, from_s, to_s, more));
}

/** Reads what has been followed of a view from the host. */
export async function readOverview(viewId: string): Promise<void> {
  const found: Overview | null = await host()
    .call('overview', { view: viewId })
    .catch(() => null);
  const all = new Map(traces.value);
  if (found) all.set(viewId, withStretch(null, 0, 0, found));
  else all.delete(viewId);
  traces.value = all;
}

/** Forgets all traces: another document is open. */
export function forgetTraces(): void {
  traces.value = new Map();
}
