/**
 * A text from a file as it may stand on a terminal or a page: control characters (escape sequences among them), signs that
 * turn the direction of writing and lone surrogates are replaced, line breaks become spaces.
 */
export function printable(text: string): string {
  return (
    text
      .replace(/[\r\n\t\u2028\u2029]+/g, ' ')
      // biome-ignore lint/suspicious/noControlCharactersInRegex: these are the characters to be kept out.
      .replace(/[\u0000-\u001f\u007f-\u009f\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069\ufeff]/g, '\ufffd')
      .replace(/[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g, '\ufffd')
  );
}
