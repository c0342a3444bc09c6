import type { SideView } from './trace.ts';

/** What the end's edges do to its apparent place. */
export interface EndEdges {
  /** Half the end's width times the lean of its edges' weight to the right, pixels. */
  readonly edgeLean_px: number;
  /** Where the end stands on average, displayed pixels of the full-size frame. */
  readonly restX_px: number;
}

/**
 * Angle of a bar seen from the side, radians, from where its near end seems to stand: distance from the fibre =
 * half_length_px sin(angle). The end's own face turns with the bar: its edges draw together as cos(angle), so where one
 * edge tells more than the other the place seen lies off the face's middle by edgeLean_px (cos(angle) - cos(rest)).
 * Null where the end stands farther out than the half length allows, or the half length isn't known.
 */
export function sideAngle(view: SideView, edges: EndEdges, x_px: number): number | null {
  if (view.half_length_px === null) return null;
  const angleOf = (x: number): number => Math.asin((x - view.axis_x_px) / view.half_length_px!);
  const rest = Math.cos(angleOf(edges.restX_px));
  let angle = angleOf(x_px);
  for (let round = 0; round < 3; round++) angle = angleOf(x_px - edges.edgeLean_px * (Math.cos(angle) - rest));
  return Number.isNaN(angle) ? null : angle;
}
