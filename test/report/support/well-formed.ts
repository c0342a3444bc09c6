const VOID = new Set(['meta', 'br', 'hr', 'img', 'link', 'input']);

/**
 * Walks markup and complains of tags that don't match, attributes without quotes, stray angle brackets and unknown
 * entities. Returns the elements met, each with its attributes.
 */
export function elementsOf(markup: string): { name: string; attributes: Record<string, string> }[] {
  const found: { name: string; attributes: Record<string, string> }[] = [];
  const open: string[] = [];
  const tag = /<!DOCTYPE html>|<(\/?)([a-zA-Z][\w-]*)((?:\s+[\w:-]+(?:="[^"<>]*")?)*)\s*(\/?)>/g;
  let at = 0;
  for (let match = tag.exec(markup); match; match = tag.exec(markup)) {
    checkText(markup.slice(at, match.index), open.at(-1));
    at = tag.lastIndex;
    const [, closing, name = '', rest = '', selfClosing] = match;
    if (name === '') continue;
    if (closing) {
      const expected = open.pop();
      if (expected !== name) throw new Error(`</${name}> closes <${expected}>`);
      continue;
    }
    const attributes = Object.fromEntries(
      [...rest.matchAll(/([\w:-]+)="([^"]*)"/g)].map(([, key, value]) => [key ?? '', value ?? '']),
    );
    for (const value of Object.values(attributes)) checkText(value, 'attribute');
    found.push({ name, attributes });
    if (!selfClosing && !VOID.has(name)) open.push(name);
  }
  checkText(markup.slice(at), open.at(-1));
  if (open.length > 0) throw new Error(`<${open.at(-1)}> is not closed`);
  return found;
}

function checkText(text: string, parent: string | undefined): void {
  if (parent === 'style') return;
  if (/[<>]/.test(text)) throw new Error(`stray angle bracket in "${text.slice(0, 80)}"`);
  if (/&(?!(amp|lt|gt|quot|#39);)/.test(text)) throw new Error(`stray ampersand in "${text.slice(0, 80)}"`);
}
