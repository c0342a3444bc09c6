import type { SessionView } from '../../contract.ts';
import type { Point } from './region-shape.ts';

/**
 * Two points that show how the bar lies in the picture, displayed pixels: its axis through `middle`, a third of the region's length on
 * either side as far as the region goes; for a side view a short upright stroke at its near end.
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
  const flattened = view.kind === 'oblique' ? Math.sin((view.elevation_deg * Math.PI) / 180) : 1;
  const dx = Math.cos((angle_deg * Math.PI) / 180);
  const dy = -Math.sin((angle_deg * Math.PI) / 180) * flattened;
  const { x, y, width, height } = view.region;
  const room = (at: number, from: number, length: number, step: number) =>
    Math.abs(step) < 1e-9
      ? Number.POSITIVE_INFINITY
      : Math.max(0, Math.min(at - from, from + length - at)) / Math.abs(step);
  const reach = Math.min(Math.max(width, height) / 3, room(middle.x, x, width, dx), room(middle.y, y, height, dy));
  return [
    { x: middle.x - dx * reach, y: middle.y - dy * reach },
    { x: middle.x + dx * reach, y: middle.y + dy * reach },
  ];
}
