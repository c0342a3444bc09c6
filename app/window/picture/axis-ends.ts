import type { SessionView } from '../../contract.ts';
import type { Point } from './region-shape.ts';

/**
 * Two points that show how the bar lies in the picture, displayed pixels: its axis through `middle`, a third of the region long on
 * either side; for a side view a short upright stroke at its near end.
 * @param angle_deg as in a trace: anticlockwise as seen, in the horizontal plane (an oblique view is foreshortened here).
 */
export function axisEnds(view: SessionView, middle: Point, angle_deg: number): readonly [Point, Point] {
  if (view.kind === 'side') {
    const reach = view.region.height / 6;
    return [
      { x: middle.x, y: middle.y - reach },
      { x: middle.x, y: middle.y + reach },
    ];
  }
  const reach = Math.min(view.region.width, view.region.height) / 3;
  const flattened = view.kind === 'oblique' ? Math.sin((view.elevation_deg * Math.PI) / 180) : 1;
  const dx = reach * Math.cos((angle_deg * Math.PI) / 180);
  const dy = -reach * Math.sin((angle_deg * Math.PI) / 180) * flattened;
  return [
    { x: middle.x - dx, y: middle.y - dy },
    { x: middle.x + dx, y: middle.y + dy },
  ];
}
