import { niceTicks } from '../../../src/report/plots/scale.ts';
import { colours } from '../state/colours.ts';
import { curves } from '../state/results.ts';
import { segments, view, views } from '../state/selection.ts';
import { traces } from '../state/traces.ts';
import { CanvasLane } from './canvas-lane.tsx';
import { type Curve, curveRange, paintCurve } from './curve-paint.ts';
import type { TimeSpan } from './time-span.ts';

/** The curves of the lane: what was followed of each view; where nothing was, the poses of measured segments. The view shown comes last. */
export function laneCurves(): {
  readonly curves: readonly (Curve & { readonly own: boolean })[];
  readonly unit: 'deg' | 'px';
} {
  const shownView = view.value;
  const own = shownView ? traces.value.get(shownView.id) : undefined;
  const unit = own?.unit ?? curves.value.get(segments.value[0]?.id ?? '')?.unit ?? 'deg';
  const all: (Curve & { own: boolean })[] = [];
  for (const v of views.value) {
    const trace = traces.value.get(v.id);
    if (trace?.length && trace.unit === unit && v.id !== shownView?.id)
      all.push({ x: trace.time_s, y: trace.angle, own: false });
  }
  for (const s of segments.value) {
    const measured = curves.value.get(s.id);
    if (measured && measured.unit === unit && !traces.value.get(s.view)?.length) {
      all.push({ x: measured.time_s, y: measured.angle, own: s.view === shownView?.id });
    }
  }
  if (own?.length) all.push({ x: own.time_s, y: own.angle, own: true });
  return { curves: all, unit };
}

/** The angle of the bar against time. */
export function TraceLane({ width, height, span }: { width: number; height: number; span: TimeSpan }) {
  const lane = laneCurves();
  const range = curveRange(lane.curves, span);
  return (
    <CanvasLane
      width={width}
      height={height}
      label={lane.curves.length > 0 ? 'Angle of the bar against time' : 'Angle of the bar: not followed yet'}
      after={[traces.value, curves.value, segments.value, view.value, span.start_s, span.end_s, colours.value]}
      draw={(context) => {
        const c = colours.value;
        context.strokeStyle = c.line;
        context.lineWidth = 1;
        for (const { value } of niceTicks(range[0], range[1], Math.max(2, height / 28))) {
          const at = Math.round(height - ((value - range[0]) / (range[1] - range[0])) * height) + 0.5;
          context.beginPath();
          context.moveTo(0, at);
          context.lineTo(width, at);
          context.stroke();
        }
        for (const curve of lane.curves) {
          context.strokeStyle = curve.own ? c.data : c.quiet;
          context.fillStyle = context.strokeStyle;
          paintCurve(context, curve, span, range, width, height);
        }
      }}
    />
  );
}
