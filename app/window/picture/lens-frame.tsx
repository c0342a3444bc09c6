import { lensNow, lensShown, pictureSize, placeLens, zoomNow } from '../state/picture-tools.ts';
import { rectangleOnPanel } from './picture-zoom.ts';
import { moved, withHandleMoved } from './region-shape.ts';

/** The frame of what the lens looks at; arrow keys move it, with Alt they resize it. */
export function LensFrame() {
  if (!lensShown()) return null;
  const place = lensNow();
  const r = rectangleOnPanel(zoomNow(), place);
  return (
    // biome-ignore lint/a11y/useSemanticElements: SVG has no fieldset.
    // biome-ignore lint/a11y/noInteractiveElementToNoninteractiveRole: a g has no role of its own.
    <g
      class="lens-frame"
      tabindex={0}
      role="group"
      aria-label="Lens: arrow keys move it, with Alt they resize it, with Shift by ten pixels."
      onKeyDown={nudge}
    >
      <rect class="halo" x={r.x} y={r.y} width={r.width} height={r.height} rx="3" />
      <rect class="edge" x={r.x} y={r.y} width={r.width} height={r.height} rx="3" />
      <path
        class="edge"
        d={`M${r.x + r.width - 10} ${r.y + r.height - 3}l7 -7M${r.x + r.width - 6} ${r.y + r.height - 3}l3 -3`}
      />
      <text x={r.x + 5} y={r.y - 5}>
        lens
      </text>
    </g>
  );

  function nudge(event: KeyboardEvent): void {
    const by = event.shiftKey ? 10 : 1;
    const dx = event.key === 'ArrowLeft' ? -by : event.key === 'ArrowRight' ? by : 0;
    const dy = event.key === 'ArrowUp' ? -by : event.key === 'ArrowDown' ? by : 0;
    if (dx === 0 && dy === 0) return;
    event.preventDefault();
    placeLens(
      event.altKey ? withHandleMoved(place, 'se', dx, dy, pictureSize(), 24) : moved(place, dx, dy, pictureSize()),
    );
  }
}
