import type { RingDown } from '../oscillation/ring-down.ts';
import type { SegmentResult } from '../report/results.ts';
import type { Trace } from '../tracking/trace.ts';

/** One segment, from its frames to its row in the table. */
export interface MeasuredSegment {
  readonly trace: Trace | null;
  readonly ringDown: RingDown | null;
  readonly result: SegmentResult;
}
