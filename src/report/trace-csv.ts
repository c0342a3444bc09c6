import { createHash } from 'node:crypto';
import { csvText } from './csv-text.ts';

/** Poses of a segment and, where there is one, its fit: aligned columns, one row per pose. */
export interface TraceColumns {
  readonly time_s: ArrayLike<number>;
  /** Radians, or px where `unit` says so. */
  readonly angle: ArrayLike<number>;
  readonly unit: 'rad' | 'px';
  readonly x_px: ArrayLike<number>;
  readonly y_px: ArrayLike<number>;
  readonly quality: ArrayLike<number>;
  readonly frame_index: ArrayLike<number>;
}

/** The fit's columns, aligned with the trace and in its unit. */
export interface FitColumns {
  readonly fitted: ArrayLike<number>;
  readonly residual: ArrayLike<number>;
  /** 1 where the row was used in the fit. */
  readonly usedRows: ArrayLike<number>;
}

/**
 * A trace as CSV: `time_s`, `angle_deg` (`position_px` where the motion is not scaled), `x_px`, `y_px`, `quality`,
 * `frame_index`, `fitted_deg`, `residual_deg` (or `_px`), `used`. Without a fit its three columns are empty.
 */
export function traceCsv(trace: TraceColumns, fit: FitColumns | null): string {
  const scaled = trace.unit === 'rad';
  const scale = scaled ? 180 / Math.PI : 1;
  const unit = scaled ? 'deg' : 'px';
  const rows = Array.from(trace.time_s, (time_s, i) => [
    time_s,
    trace.angle[i]! * scale,
    trace.x_px[i]!,
    trace.y_px[i]!,
    trace.quality[i]!,
    trace.frame_index[i]!,
    fit ? fit.fitted[i]! * scale : null,
    fit ? fit.residual[i]! * scale : null,
    fit ? fit.usedRows[i]! : null,
  ]);
  return csvText(
    [
      'time_s',
      scaled ? 'angle_deg' : 'position_px',
      'x_px',
      'y_px',
      'quality',
      'frame_index',
      `fitted_${unit}`,
      `residual_${unit}`,
      'used',
    ],
    rows,
  );
}

const LONGEST_NAME = 180;

/**
 * Name of a segment's trace file, `trace-<id>.csv`, that every system takes: whatever is not a letter of ASCII, a digit, `.`,
 * `_` or `-` is percent-encoded as UTF-8, and a very long name is cut and ends in a hash. The prefix keeps device names
 * such as CON harmless.
 */
export function traceFileName(id: string): string {
  return fileName(encoded(id, /[A-Za-z0-9._-]/));
}

/**
 * Names of the trace files of all segments. Ids that differ in case only would be one file on some systems: of those the
 * capital letters are percent-encoded too.
 */
export function traceFileNames(ids: readonly string[]): ReadonlyMap<string, string> {
  const alike = new Map<string, number>();
  for (const id of new Set(ids))
    alike.set(traceFileName(id).toLowerCase(), (alike.get(traceFileName(id).toLowerCase()) ?? 0) + 1);
  return new Map(
    ids.map((id) => {
      const name = traceFileName(id);
      const clashes = (alike.get(name.toLowerCase()) ?? 0) > 1;
      return [id, clashes ? fileName(encoded(id, /[a-z0-9._-]/)) : name];
    }),
  );
}

function encoded(id: string, plain: RegExp): string {
  let text = '';
  for (const character of id) {
    text += plain.test(character)
      ? character
      : Buffer.from(character, 'utf8').reduce((t, byte) => t + percent(byte), '');
  }
  return text;
}

function percent(byte: number): string {
  return `%${byte.toString(16).toUpperCase().padStart(2, '0')}`;
}

function fileName(name: string): string {
  if (name.length <= LONGEST_NAME) return `trace-${name}.csv`;
  const hash = createHash('sha256').update(name).digest('hex').slice(0, 16);
  return `trace-${name.slice(0, LONGEST_NAME)}-${hash}.csv`;
}
