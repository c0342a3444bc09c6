import { columns } from '../../../src/report/columns.ts';
import type { SegmentResult } from '../../contract.ts';

/**
 * The results as text for a spreadsheet: a header row with the names of results.csv, one row per segment, tabulators between
 * cells, nothing where a number could not be had. A text that a spreadsheet would take for a formula gets an apostrophe in front.
 */
export function tableText(rows: readonly SegmentResult[]): string {
  const lines = rows.map((row) => columns.map(({ name }) => cell(row[name])).join('\t'));
  return [columns.map(({ name }) => name).join('\t'), ...lines].join('\n');
}

function cell(value: SegmentResult[keyof SegmentResult]): string {
  if (value === null) return '';
  if (typeof value === 'number') return String(value);
  if (typeof value !== 'string') return value.map((check) => check.code).join(';');
  const flat = value.replace(/[\t\r\n]+/g, ' ');
  return /^[=+\-@]/.test(flat) ? `'${flat}` : flat;
}
