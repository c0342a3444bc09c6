/**
 * Rows of a long curve that suffice to draw it: of the rows that fall into one of `columns` equal stretches of x, the first,
 * lowest, highest and last. A spike is never lost. Rows where x or y is not finite are left out.
 * @param x ascending.
 * @param keep where given, only rows with a non-zero entry count.
 * @returns ascending indices, at most four per column; all of them where there are few.
 */
export function decimated(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  columns: number,
  keep?: ArrayLike<number>,
): readonly number[] {
  const rows: number[] = [];
  for (let i = 0; i < Math.min(x.length, y.length); i++) {
    if ((!keep || keep[i]) && Number.isFinite(x[i]!) && Number.isFinite(y[i]!)) rows.push(i);
  }
  if (rows.length <= 2 * columns) return rows;
  const start = x[rows[0]!]!;
  const width = (x[rows[rows.length - 1]!]! - start) / columns || 1;
  const kept: number[] = [];
  let from = 0;
  while (from < rows.length) {
    const column = Math.floor((x[rows[from]!]! - start) / width);
    let to = from;
    let lowest = from;
    let highest = from;
    while (to + 1 < rows.length && Math.floor((x[rows[to + 1]!]! - start) / width) === column) {
      to++;
      if (y[rows[to]!]! < y[rows[lowest]!]!) lowest = to;
      if (y[rows[to]!]! > y[rows[highest]!]!) highest = to;
    }
    for (const k of [...new Set([from, Math.min(lowest, highest), Math.max(lowest, highest), to])]) kept.push(rows[k]!);
    from = to + 1;
  }
  return kept;
}
