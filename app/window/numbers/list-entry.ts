import { readDecimal } from './decimal-entry.ts';

/**
 * Reads a list of numbers as people type it: parted by semicolons, spaces or line breaks; commas part them where a space follows,
 * and are decimal commas elsewhere. Null where one of them is no number.
 */
export function readList(typed: string): number[] | null {
  const pieces = typed
    .split(/;|,\s|\s/)
    .map((piece) => piece.trim())
    .filter((piece) => piece !== '');
  const numbers = pieces.map((piece) => readDecimal(piece, { name: 'Number', unit: '' }));
  return numbers.every((entry) => entry.kind === 'number') ? numbers.map((entry) => entry.value) : null;
}
