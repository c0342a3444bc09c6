import type { SessionView } from '../../contract.ts';
import { zoomNow } from '../state/picture-tools.ts';
import { rectangleOnPanel, toPanel } from './picture-zoom.ts';

/** Over a `side` view: the line of the fibre, and how far the near end would stand from it if the bar were broadside. */
export function SideGuides({ view }: { view: SessionView | null }) {
  if (view?.kind !== 'side') return null;
  const now = zoomNow();
  const region = rectangleOnPanel(now, view.region);
  const x = toPanel(now, { x: view.axis_x_px, y: 0 }).x;
  const known = view.half_length_px !== undefined;
  const half = (view.half_length_px ?? view.region.width / 3) * now.scale;
  const y = region.y + region.height - 14;
  return (
    <g class="side-guides" aria-hidden="true">
      {['halo', 'edge'].map((kind) => (
        <g key={kind} class={kind}>
          <line x1={x} y1={region.y} x2={x} y2={region.y + region.height} />
          <g stroke-dasharray={known ? undefined : '4 3'}>
            <line x1={x - half} y1={y} x2={x + half} y2={y} />
            <line x1={x - half} y1={y - 7} x2={x - half} y2={y + 7} />
            <line x1={x + half} y1={y - 7} x2={x + half} y2={y + 7} />
          </g>
        </g>
      ))}
      <text x={x} y={region.y + region.height + 16} text-anchor="middle">
        fibre
      </text>
      <text x={x + half + 6} y={y + 4}>
        {known ? `half length ${view.half_length_px} px` : 'half length: drag an end'}
      </text>
    </g>
  );
}
