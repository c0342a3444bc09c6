import type { SessionView } from '../../contract.ts';
import { replaceView, SMALLEST_REGION_PX, viewWithRegion } from '../session-edits/view-edits.ts';
import { edit } from '../state/document.ts';
import { pictureSize, zoomNow } from '../state/picture-tools.ts';
import { rectangleOnPanel } from './picture-zoom.ts';
import { HANDLES, handlePoint, moved, withHandleMoved } from './region-shape.ts';

/** The region with its handles; it takes the keyboard: arrows move it, with Alt they move its lower right corner. */
export function RegionFrame({ view }: { view: SessionView | null }) {
  if (!view) return null;
  const { region } = view;
  const r = rectangleOnPanel(zoomNow(), region);
  const label =
    `Region: ${region.width} by ${region.height} pixels at ${region.x}, ${region.y}. ` +
    'Arrow keys move it, with Alt they resize it, with Shift by ten pixels.';
  return (
    // biome-ignore lint/a11y/useSemanticElements: SVG has no fieldset.
    // biome-ignore lint/a11y/noInteractiveElementToNoninteractiveRole: a g has no role of its own.
    <g
      class="region"
      tabindex={0}
      role="group"
      aria-label={label}
      data-entry="region"
      onKeyDown={(event) => nudge(event, view)}
    >
      <rect class="halo" x={r.x} y={r.y} width={r.width} height={r.height} />
      <rect class="edge" x={r.x} y={r.y} width={r.width} height={r.height} />
      {HANDLES.map((handle) => {
        const at = handlePoint(r, handle);
        return <rect key={handle} class="handle" x={at.x - 3.5} y={at.y - 3.5} width="7" height="7" rx="1" />;
      })}
    </g>
  );
}

function nudge(event: KeyboardEvent, view: SessionView): void {
  const by = event.shiftKey ? 10 : 1;
  const dx = event.key === 'ArrowLeft' ? -by : event.key === 'ArrowRight' ? by : 0;
  const dy = event.key === 'ArrowUp' ? -by : event.key === 'ArrowDown' ? by : 0;
  if (dx === 0 && dy === 0) return;
  event.preventDefault();
  const size = pictureSize();
  const region = event.altKey
    ? withHandleMoved(view.region, 'se', dx, dy, size, SMALLEST_REGION_PX)
    : moved(view.region, dx, dy, size);
  const label = event.altKey ? 'Resize the region' : 'Move the region';
  edit(label, (s) => replaceView(s, viewWithRegion(view, region)), `region ${view.id}`);
}
