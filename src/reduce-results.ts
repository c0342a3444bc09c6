import { pointOf } from './measuring/point.ts';
import type { Apparatus, Place } from './reduction/apparatus.ts';
import { reduce } from './reduction/reduce.ts';
import type { Reduction } from './reduction/reduction.ts';
import type { Results, SegmentResult } from './report/results.ts';

/** Reduces the rows of the table with what is known of the rig. */
export function reduceSegments(
  rows: readonly SegmentResult[],
  rig: { readonly apparatus?: Apparatus; readonly place?: Place },
): Reduction {
  return reduce({ points: rows.map(pointOf), ...rig });
}

/** The same results with the reduction made anew from their rows. */
export function reduceResults(results: Results): Results {
  const { apparatus, place } = results;
  const rig = { ...(apparatus && { apparatus }), ...(place && { place }) };
  return { ...results, reduction: reduceSegments(results.segments, rig) };
}
