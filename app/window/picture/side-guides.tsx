import type { SessionView } from '../../contract.ts';
import { pictureSize, zoomNow } from '../state/picture-tools.ts';
import { Guide, GuideLine } from './guide.tsx';
import { drawnHalfLength_px, restingEnd_px, sideLineY_px } from './guide-places.ts';
import { rectangleOnPanel, toPanel } from './picture-zoom.ts';

/**
 * Over a `side` view: the line of the fibre, how far the near end would stand from it if the bar were broadside, and where the near end
 * stands at rest.
 */
export function SideGuides({ view }: { view: SessionView | null }) {
  if (view?.kind !== 'side') return null;
  const now = zoomNow();
  const region = rectangleOnPanel(now, view.region);
  const place = (x_px: number) => toPanel(now, { x: x_px, y: 0 }).x;
  const x = place(view.axis_x_px);
  const rest = place(restingEnd_px(view));
  const half = drawnHalfLength_px(view) * now.scale;
  const y = sideLineY_px(region, toPanel(now, { x: 0, y: pictureSize().height }).y);
  const known = view.half_length_px !== undefined;
  return (
    <g class="guides">
      <Guide
        name="Fibre line"
        unit="px"
        value={view.axis_x_px}
        least={0}
        most={pictureSize().width}
        with={(axis_x_px) => ({ ...view, axis_x_px })}
      >
        <GuideLine d={`M${x} ${region.y}V${y + 7}`} />
        <text x={x} y={y + 21} text-anchor="middle">
          fibre
        </text>
      </Guide>
      <Guide
        name="Half length"
        unit="px"
        value={Math.round(drawnHalfLength_px(view) * 10) / 10}
        least={2}
        most={pictureSize().width}
        with={(half_length_px) => ({ ...view, half_length_px })}
      >
        <GuideLine
          d={`M${x - half} ${y}H${x + half}M${x - half} ${y - 7}V${y + 7}M${x + half} ${y - 7}V${y + 7}`}
          dashed={!known}
        />
        <text x={x + half + 6} y={y + 4}>
          {known ? `half length ${view.half_length_px} px` : 'half length: drag an end'}
        </text>
      </Guide>
      <Guide
        name="Facing"
        unit="°"
        value={view.facing_deg ?? 0}
        least={-90}
        most={90}
        with={(facing_deg) => ({ ...view, facing_deg })}
      >
        <path class="handle" d={`M${rest} ${y - 7}l6 7l-6 7l-6 -7Z`} />
        <text x={x + half + 6} y={y + 20}>
          at rest {view.facing_deg === undefined ? 'unknown: drag the diamond' : `${signed(view.facing_deg)}°`}
        </text>
      </Guide>
    </g>
  );
}

function signed(value: number): string {
  return String(value).replace('-', '\u2212');
}
