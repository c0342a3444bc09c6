/**
 * Text that is safe inside an XML or HTML element or a quoted attribute; what XML can't hold and what turns the direction of
 * writing becomes U+FFFD.
 */
export function escapeText(text: string): string {
  return (
    text
      // biome-ignore lint/suspicious/noControlCharactersInRegex: these are what XML 1.0 can't hold (production 2, Char).
      .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff\u202a-\u202e\u2066-\u2069]/g, '\ufffd')
      .replace(/[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g, '\ufffd')
      .replace(/&/g, '&amp;')
      .replace(/</g, '&lt;')
      .replace(/>/g, '&gt;')
      .replace(/"/g, '&quot;')
      .replace(/'/g, '&#39;')
  );
}

/** Attribute values of an element; null and undefined leave the attribute out, numbers are rounded to hundredths. */
export type Attributes = Readonly<Record<string, string | number | null | undefined>>;

/** One SVG element as text. `content` is markup: text must have gone through `escapeText`. */
export function element(name: string, attributes: Attributes, content = ''): string {
  let text = `<${name}`;
  for (const [key, value] of Object.entries(attributes)) {
    if (value === null || value === undefined) continue;
    text += ` ${key}="${typeof value === 'number' ? coordinate(value) : escapeText(value)}"`;
  }
  return content === '' ? `${text}/>` : `${text}>${content}</${name}>`;
}

/** A number of drawing units, to hundredths. RangeError where it is not finite. */
export function coordinate(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`coordinate: expected a finite number, got ${value}`);
  const text = value.toFixed(2).replace(/\.?0+$/, '');
  return text === '-0' ? '0' : text;
}

/** A piece of a label: plain text, a quantity's symbol (italic), or a lowered or raised sign. */
export type LabelPiece = string | { readonly symbol: string } | { readonly sub: string } | { readonly sup: string };
/** A label as its pieces in order. */
export type Label = readonly LabelPiece[];

/** A label as the inside of a `<text>` element of the given font size. */
export function labelMarkup(label: Label, fontSize: number): string {
  let shifted = 0;
  let markup = '';
  for (const piece of label) {
    const target =
      typeof piece === 'string' || 'symbol' in piece ? 0 : 'sub' in piece ? 0.22 * fontSize : -0.36 * fontSize;
    const dy = target - shifted || null;
    shifted = target;
    if (typeof piece === 'string')
      markup += dy === null ? escapeText(piece) : element('tspan', { dy }, escapeText(piece));
    else if ('symbol' in piece) markup += element('tspan', { dy, 'font-style': 'italic' }, escapeText(piece.symbol));
    else {
      const text = 'sub' in piece ? piece.sub : piece.sup;
      markup += element('tspan', { dy, 'font-size': fontSize * 0.72 }, escapeText(text));
    }
  }
  return markup;
}

/** A label as plain text, for titles that are read aloud. */
export function labelText(label: Label): string {
  return label
    .map((p) =>
      typeof p === 'string' ? p : 'symbol' in p ? p.symbol : 'sub' in p ? p.sub : p.sup === '2' ? '²' : p.sup,
    )
    .join('');
}

/** A whole SVG document fragment: usable inside an HTML page and, since it names its namespace, as a file of its own. */
export function svgDocument(
  size: { readonly width: number; readonly height: number },
  facts: { readonly title: string; readonly background: string },
  content: string,
): string {
  const { width, height } = size;
  return element(
    'svg',
    {
      xmlns: 'http://www.w3.org/2000/svg',
      viewBox: `0 0 ${coordinate(width)} ${coordinate(height)}`,
      width,
      height,
      role: 'img',
      'aria-label': facts.title,
      'font-family': "'Helvetica Neue', Arial, 'Liberation Sans', sans-serif",
      'font-size': 12,
    },
    element('title', {}, escapeText(facts.title) || ' ') +
      element('rect', { width, height, fill: facts.background }) +
      content,
  );
}
