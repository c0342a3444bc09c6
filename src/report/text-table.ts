/** Lines of an aligned plain-text table; cells are padded to the widest of their column. */
export function alignedRows(
  rows: readonly (readonly string[])[],
  alignment: readonly ('left' | 'right')[],
  gap: number,
): string[] {
  const widths = alignment.map((_, column) => Math.max(0, ...rows.map((row) => width(row[column] ?? ''))));
  return rows.map((row) =>
    widths
      .map((w, column) => padded(row[column] ?? '', w, alignment[column] ?? 'left'))
      .join(' '.repeat(gap))
      .trimEnd(),
  );
}

/** Columns of a terminal that a text takes: East Asian wide characters and most pictographs take two, combining marks none. */
export function width(text: string): number {
  let columns = 0;
  for (const character of text) {
    if (/\p{Mark}|\u200d|\ufe0f/u.test(character)) continue;
    columns +=
      /[\u1100-\u115f\u2e80-\ua4cf\uac00-\ud7a3\uf900-\ufaff\ufe30-\ufe6f\uff00-\uff60\uffe0-\uffe6]|\p{Emoji_Presentation}|[\u{20000}-\u{3fffd}]/u.test(
        character,
      )
        ? 2
        : 1;
  }
  return columns;
}

/** A text of at most so many columns; one that is cut ends in an ellipsis. */
export function shortened(text: string, columns: number): string {
  if (width(text) <= columns) return text;
  let cut = '';
  for (const character of text) {
    if (width(cut + character) > columns - 1) break;
    cut += character;
  }
  return `${cut}…`;
}

/** A sentence broken at spaces to lines of at most `columns`, the later ones indented. */
export function wrapped(text: string, columns: number, indent: string): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (width(longer) > columns && line !== '') {
      lines.push(line);
      line = indent + word;
    } else line = longer;
  }
  return [...lines, line];
}

function padded(text: string, columns: number, alignment: 'left' | 'right'): string {
  const room = ' '.repeat(Math.max(0, columns - width(text)));
  return alignment === 'right' ? room + text : text + room;
}
