import { fixedText } from '../numbers/quantity-text.ts';
import { nearestIndex } from '../plots/extremes.ts';
import { bar, viewDraft } from '../state/bar.ts';
import { zoomNow } from '../state/picture-tools.ts';
import { shown } from '../state/pictures.ts';
import { view } from '../state/selection.ts';
import { traces } from '../state/traces.ts';
import { axisEnds } from './axis-ends.ts';
import { rectangleOnPanel, toPanel } from './picture-zoom.ts';

/** How far in time a pose may lie from the frame shown and still be its own, seconds. */
const SAME_FRAME_S = 0.004;

/** The bar as it was found in the frame shown: its outline, else its axis from the trace. */
export function BarOutline() {
  const v = view.value;
  const frame = shown.value;
  if (!v || !frame || viewDraft.value) return null;
  const now = zoomNow();
  const looked = bar.value;
  if (looked && looked.view === v.id && looked.frame === frame.index && looked.found.found) {
    const points = looked.found.outline.map(([x, y]) => toPanel(now, { x, y }));
    const path = points.map((p) => `${p.x.toFixed(1)},${p.y.toFixed(1)}`).join(' ');
    const region = rectangleOnPanel(now, v.region);
    const unit = looked.found.unit === 'deg' ? '°' : ' px';
    return (
      // biome-ignore lint/a11y/noInteractiveElementToNoninteractiveRole: a g has no role of its own.
      <g class="bar-outline" role="img" aria-label={`Bar found at ${fixedText(looked.found.angle, 1)}${unit}`}>
        <polygon class="halo" points={path} />
        <polygon class="edge" points={path} />
        <text x={region.x + 1} y={region.y > 20 ? region.y - 7 : region.y + 16}>
          bar at {fixedText(looked.found.angle, 1)}
          {unit}
        </text>
      </g>
    );
  }
  const trace = traces.value.get(v.id);
  if (!trace?.length) return null;
  const row = nearestIndex(trace.time_s, frame.time_s);
  if (Math.abs(trace.time_s[row]! - frame.time_s) > SAME_FRAME_S) return null;
  const [a, b] = axisEnds(v, { x: trace.x_px[row]!, y: trace.y_px[row]! }, trace.angle[row]!).map((p) =>
    toPanel(now, p),
  );
  if (!a || !b) return null;
  return (
    // biome-ignore lint/a11y/noInteractiveElementToNoninteractiveRole: a g has no role of its own.
    <g class="bar-outline" role="img" aria-label="Axis of the bar as followed">
      <line class="halo" x1={a.x} y1={a.y} x2={b.x} y2={b.y} />
      <line class="edge" x1={a.x} y1={a.y} x2={b.x} y2={b.y} />
    </g>
  );
}
