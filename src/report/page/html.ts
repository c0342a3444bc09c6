import { escapeText } from '../plots/svg.ts';
import { printable } from '../printable.ts';

/** Markup that may go into a page as it is. Only `html`, `symbolMarkup` and `trusted` make it. */
export class Markup {
  readonly text: string;
  constructor(text: string) {
    this.text = text;
  }
}

/** What may stand in a gap of `html`: text and numbers are escaped, markup is taken over, lists are joined, null is nothing. */
export type Piece = string | number | Markup | null | readonly Piece[];

/** Builds markup; everything in a gap that is not markup itself is made harmless. */
export function html(parts: TemplateStringsArray, ...gaps: readonly Piece[]): Markup {
  return new Markup(parts.reduce((text, part, i) => text + (i === 0 ? '' : pieceText(gaps[i - 1] ?? null)) + part, ''));
}

/** Takes text over unchanged: only for what a builder of ours has escaped, such as a plot. */
export function trusted(markup: string): Markup {
  return new Markup(markup);
}

function pieceText(piece: Piece): string {
  if (piece === null) return '';
  if (piece instanceof Markup) return piece.text;
  if (typeof piece === 'string' || typeof piece === 'number') return escapeText(unbroken(printable(String(piece))));
  return piece.map(pieceText).join('');
}

/** A number stays on the line of its sign of per cent or its uncertainty. */
function unbroken(text: string): string {
  return text.replace(/(\d) (?=%|± )/g, '$1\u00a0').replace(/± (?=\d)/g, '±\u00a0');
}

/** A symbol such as `f_0²`: Latin and Greek letters slanted, the sign after `_` lowered. */
export function symbolMarkup(symbol: string): Markup {
  let text = '';
  const characters = [...symbol];
  for (let i = 0; i < characters.length; i++) {
    const character = characters[i] ?? '';
    if (character === '_') text += `<sub>${escapeText(characters[++i] ?? '')}</sub>`;
    else if (/\p{Letter}/u.test(character) && character !== 'd') text += `<i>${escapeText(character)}</i>`;
    else text += escapeText(character);
  }
  return new Markup(text);
}

/** A table with no more rows than this is kept on one page. */
const MOST_ROWS_WHOLE = 26;

/** A table: its heads (null: none), rows of cells, and which columns hold numbers. */
export function table(options: {
  readonly caption?: Piece;
  readonly heads: readonly Piece[];
  readonly rows: readonly (readonly Piece[])[];
  /** Columns set flush right in tabular figures. */
  readonly numbers?: readonly number[];
  /** Class of each row, null: none. */
  readonly classes?: readonly (string | null)[];
}): Markup {
  const numeric = new Set(options.numbers ?? []);
  const kind = (column: number) => (numeric.has(column) ? trusted(' class="n"') : null);
  const heads = options.heads.map((head, i) => html`<th scope="col"${kind(i)}>${head}</th>`);
  const rows = options.rows.map((row, r) => {
    const named = options.classes?.[r] ?? null;
    const cells = row.map((cell, i) => html`<td${kind(i)}>${cell}</td>`);
    return html`<tr${named === null ? null : html` class="${named}"`}>${cells}</tr>
`;
  });
  const caption = options.caption === undefined ? null : html`<caption>${options.caption}</caption>`;
  const whole = options.rows.length <= MOST_ROWS_WHOLE ? trusted(' class="whole"') : null;
  return html`<table${whole}>${caption}<thead><tr>${heads}</tr></thead><tbody>
${rows}</tbody></table>`;
}
