import { computed } from '@preact/signals';
import type { SessionSegment } from '../../contract.ts';
import { lowerBound } from '../plots/extremes.ts';
import { span } from '../state/board.ts';
import { curves } from '../state/results.ts';
import { segments, view, views } from '../state/selection.ts';
import { type GrowingTrace, traces } from '../state/traces.ts';
import { type Curve, curveRange } from './curve-paint.ts';

/** A curve of the angle lane; `own`: of the view that is shown. */
export type LaneCurve = Curve & { readonly own: boolean };

/**
 * The curves of the angle lane: what was followed of each view; in segments where nothing was, the poses that were measured there. The view shown
 * comes last, and its unit counts.
 */
export const laneCurves = computed<{ readonly curves: readonly LaneCurve[]; readonly unit: 'deg' | 'px' }>(() => {
  const shown = view.value;
  const own = shown ? traces.value.get(shown.id) : undefined;
  const unit = own?.unit ?? curves.value.get(segments.value[0]?.id ?? '')?.unit ?? 'deg';
  const all: LaneCurve[] = [];
  for (const v of views.value) {
    const trace = traces.value.get(v.id);
    if (trace?.length && trace.unit === unit && v.id !== shown?.id) {
      all.push({ x: trace.time_s, y: trace.angle, own: false });
    }
  }
  for (const s of segments.value) {
    const measured = curves.value.get(s.id);
    if (measured && measured.unit === unit && !isFollowed(traces.value.get(s.view), s, measured.time_s.length)) {
      all.push({ x: measured.time_s, y: measured.angle, own: s.view === shown?.id });
    }
  }
  if (own?.length) all.push({ x: own.time_s, y: own.angle, own: true });
  return { curves: all, unit };
});

/** Whether at least half of the poses measured in a segment were followed as well. */
function isFollowed(trace: GrowingTrace | undefined, s: SessionSegment, measured: number): boolean {
  if (!trace) return false;
  return lowerBound(trace.time_s, s.end_s) - lowerBound(trace.time_s, s.start_s) >= measured / 2;
}

/** What the angle lane reaches from and to, in its unit. */
export const laneRange = computed(() => curveRange(laneCurves.value.curves, span.value));
