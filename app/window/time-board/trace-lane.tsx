import { niceTicks } from '../../../src/report/plots/scale.ts';
import { colours } from '../state/colours.ts';
import { CanvasLane } from './canvas-lane.tsx';
import { paintCurve } from './curve-paint.ts';
import { laneCurves, laneRange } from './lane-curves.ts';
import type { TimeSpan } from './time-span.ts';

/** The angle of the bar against time. */
export function TraceLane({ width, height, span }: { width: number; height: number; span: TimeSpan }) {
  const lane = laneCurves.value;
  const range = laneRange.value;
  return (
    <CanvasLane
      width={width}
      height={height}
      label={lane.curves.length > 0 ? 'Angle of the bar against time' : 'Angle of the bar: not followed yet'}
      after={[lane, span.start_s, span.end_s, colours.value]}
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
