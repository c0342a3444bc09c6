import { pointOf } from './measuring/point.ts';
import type { Apparatus, Place } from './reduction/apparatus.ts';
import { reduce } from './reduction/reduce.ts';
import type { Reduction } from './reduction/reduction.ts';
import type { Results, SegmentResult } from './report/results.ts';

/** Monte Carlo draws beside the budget: enough to tell its uncertainty to 3 %, fewer where each draw has many points to fit. */
const DRAWS = { most: 1000, fewest: 200, points: 12_000 } as const;

/** Reduces the rows of the table with what is known of the rig. */
export function reduceSegments(
  rows: readonly SegmentResult[],
  rig: { readonly apparatus?: Apparatus; readonly place?: Place },
): Reduction {
  const draws = Math.round(DRAWS.points / Math.max(1, rows.length));
  const monteCarloDraws = Math.min(DRAWS.most, Math.max(DRAWS.fewest, draws));
  return reduce({ points: rows.map(pointOf), ...rig, monteCarloDraws });
}

/** The same results with the reduction made anew from their rows. */
export function reduceResults(results: Results): Results {
  const { apparatus, place } = results;
  const rig = { ...(apparatus && { apparatus }), ...(place && { place }) };
  return { ...results, reduction: reduceSegments(results.segments, rig) };
}
