/**
 * Reads RFC 4180 text strictly, by the grammar of its section 2: records end in CRLF, a quoted field holds anything with
 * quotes doubled, an unquoted one neither quotes nor commas nor CR nor LF. Throws at whatever is not so.
 */
export function parseRfc4180(text: string): string[][] {
  const records: string[][] = [];
  let record: string[] = [];
  let at = 0;
  while (at < text.length) {
    let field = '';
    if (text[at] === '"') {
      at++;
      for (;;) {
        const end = text.indexOf('"', at);
        if (end < 0) throw new Error('a quoted field does not end');
        field += text.slice(at, end);
        at = end + 1;
        if (text[at] !== '"') break;
        field += '"';
        at++;
      }
    } else {
      const [plain = ''] = /^[^",\r\n]*/.exec(text.slice(at)) ?? [];
      field = plain;
      at += plain.length;
    }
    record.push(field);
    if (text[at] === ',') {
      at++;
      // A comma before the line end starts one more, empty field.
      if (text.startsWith('\r\n', at)) {
        record.push('');
        at += 2;
        records.push(record);
        record = [];
      }
    } else if (text.startsWith('\r\n', at)) {
      at += 2;
      records.push(record);
      record = [];
    } else throw new Error(`neither a comma nor CRLF after a field, at ${at}`);
  }
  if (record.length > 0) throw new Error('the last record does not end in CRLF');
  return records;
}

/** Records as objects by the header's names. */
export function rowsByName(text: string): Record<string, string>[] {
  const [header = [], ...rows] = parseRfc4180(text);
  return rows.map((row) => {
    if (row.length !== header.length) throw new Error(`a record has ${row.length} fields, the header ${header.length}`);
    return Object.fromEntries(header.map((name, i) => [name, row[i] ?? '']));
  });
}
