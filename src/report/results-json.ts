import { columns } from './columns.ts';
import { reductionSchema } from './reduction-schema.ts';
import type { Results } from './results.ts';

const TOP = [
  'format',
  'version',
  'program',
  'session',
  'recordings',
  'ffmpeg',
  'apparatus',
  'place',
  'segments',
  'reduction',
] as const;

/**
 * The text of results.json: keys always in one order, two-space indent, a final line break, numbers with all their digits.
 * A number that is not finite (degrees of freedom without limit) is written as null.
 */
export function resultsText(results: Results): string {
  const segmentKeys = columns.map((column) => column.name);
  const ordered = {
    ...inOrder(results, TOP),
    segments: results.segments.map((segment) => inOrder(segment, segmentKeys)),
    reduction: inOrder(results.reduction, Object.keys(reductionSchema.shape)),
  };
  return `${JSON.stringify(ordered, null, 2)}\n`;
}

/** The same object with `first` keys first; the others follow in the order they have. */
function inOrder(object: object, first: readonly string[]): Record<string, unknown> {
  const entries = new Map<string, unknown>(Object.entries(object));
  const known = first.flatMap((key) => (entries.has(key) ? [[key, entries.get(key)] as const] : []));
  for (const key of first) entries.delete(key);
  return Object.fromEntries([...known, ...entries]);
}
