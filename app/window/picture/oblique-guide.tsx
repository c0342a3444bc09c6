import type { SessionView } from '../../contract.ts';
import { pictureSize, zoomNow } from '../state/picture-tools.ts';
import { Guide, GuideLine } from './guide.tsx';
import { ELEVATIONS_DEG, ovalOf } from './guide-places.ts';
import { toPanel } from './picture-zoom.ts';

/** Over an `oblique` view: a level circle as the camera sees it; it fits round things on the bench when the elevation is right. */
export function ObliqueGuide({ view }: { view: SessionView | null }) {
  if (view?.kind !== 'oblique') return null;
  const now = zoomNow();
  const oval = ovalOf(view, pictureSize());
  const { x, y } = toPanel(now, oval.middle);
  const rx = oval.across_px * now.scale;
  const ry = oval.upright_px * now.scale;
  const [least, most] = ELEVATIONS_DEG;
  return (
    <g class="guides">
      <Guide
        name="Elevation"
        unit="°"
        value={view.elevation_deg}
        least={least}
        most={most}
        with={(elevation_deg) => ({ ...view, elevation_deg })}
      >
        <GuideLine d={`M${x - rx} ${y}A${rx} ${ry} 0 0 0 ${x + rx} ${y}A${rx} ${ry} 0 0 0 ${x - rx} ${y}`} />
        {[-1, 1].map((way) => (
          <path key={way} class="handle" d={`M${x - 6} ${y + way * ry}l6 -6l6 6l-6 6Z`} />
        ))}
        <text x={x + 10} y={y + ry + 16}>
          elevation {view.elevation_deg}°: a level circle
        </text>
      </Guide>
    </g>
  );
}
