import { columns } from './columns.ts';
import { type Cell, csvText, plainCell } from './csv-text.ts';
import type { Results, SegmentResult } from './results.ts';

/** The table of segments as results.csv: one header row with the names of `columns`, one row per segment. */
export function resultsCsv(results: Pick<Results, 'segments'>): string {
  const rows = results.segments.map((segment) => columns.map(({ name }) => cell(segment[name])));
  return csvText(
    columns.map((column) => column.name),
    rows,
  );
}

function cell(value: SegmentResult[keyof SegmentResult]): Cell {
  if (value === null || typeof value === 'number') return value;
  if (typeof value === 'string') return plainCell(value);
  return plainCell(value.map((check) => check.code).join(';'));
}
