import { stringify } from 'csv-stringify/sync';

/** One cell: null is written as nothing. */
export type Cell = string | number | null;

/**
 * Rows as RFC 4180 text: CRLF line ends, quotes where needed and doubled inside, `.` as the decimal sign, numbers with all
 * the digits that they hold, null as nothing. Numbers that are not finite are written as nothing too.
 */
export function csvText(header: readonly string[], rows: readonly (readonly Cell[])[]): string {
  const records = [header, ...rows].map((row) => row.map(cellText));
  // The library quotes for the line end it writes; a lone CR or LF inside a field must be quoted as well.
  return stringify(records, { record_delimiter: '\r\n', quoted_match: /[\r\n]/ });
}

function cellText(cell: Cell): string {
  if (cell === null) return '';
  if (typeof cell === 'string') return cell;
  return Number.isFinite(cell) ? String(cell) : '';
}

/**
 * A text from a session as a cell that no spreadsheet takes for a formula: one that begins like a formula and is no plain
 * number gets an apostrophe in front (common practice).
 */
export function plainCell(text: string): string {
  return /^[=+\-@\t\r\uff0b\uff0d\uff1d\uff20]/.test(text) && !/^[+-]?\d+(?:\.\d+)?$/.test(text) ? `'${text}` : text;
}
