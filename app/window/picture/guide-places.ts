import type { SessionView } from '../../contract.ts';
import type { Point, Rectangle, Size } from './region-shape.ts';

export type SideView = Extract<SessionView, { kind: 'side' }>;
export type ObliqueView = Extract<SessionView, { kind: 'oblique' }>;

/** Elevations that can be set by hand, degrees: below, the bar is seen edge-on; above, the view is a plan. */
export const ELEVATIONS_DEG = [10, 85] as const;

const SIDE_LINE_DROP_PX = 16;

/** How far down the half length is drawn, CSS pixels of the panel: below the region, as long as that is in the picture. */
export function sideLineY_px(region: Rectangle, pictureFoot_px: number): number {
  return Math.min(region.y + region.height + SIDE_LINE_DROP_PX, pictureFoot_px - SIDE_LINE_DROP_PX / 2);
}

/** Half length that is drawn, displayed pixels; where it isn't known a third of the region's width, to be dragged. */
export function drawnHalfLength_px(view: SideView): number {
  return view.half_length_px ?? view.region.width / 3;
}

/** Where the near end stands in the picture while the bar rests, displayed pixels from the left. */
export function restingEnd_px(view: SideView): number {
  return view.axis_x_px + drawnHalfLength_px(view) * Math.sin(((view.facing_deg ?? 0) * Math.PI) / 180);
}

/** The facing with which the near end rests at `x_px`, to a tenth of a degree. */
export function facingWithEndAt(view: SideView, x_px: number): number {
  return toTenths(inDegrees(Math.asin(clamp((x_px - view.axis_x_px) / drawnHalfLength_px(view), -1, 1))));
}

/** A level circle about the region's middle as the camera sees it, displayed pixels. */
export interface Oval {
  readonly middle: Point;
  readonly across_px: number;
  readonly upright_px: number;
}

/** The oval that a level circle is foreshortened to; as wide as the region or as high as the picture allows. */
export function ovalOf({ region, elevation_deg }: ObliqueView, picture: Size): Oval {
  const across_px = Math.min(region.width / 2, picture.height * 0.45);
  return {
    middle: { x: region.x + region.width / 2, y: region.y + region.height / 2 },
    across_px,
    upright_px: across_px * Math.sin((elevation_deg * Math.PI) / 180),
  };
}

/** The elevation at which the oval is so high, to a tenth of a degree. */
export function elevationOf(across_px: number, upright_px: number): number {
  return toTenths(clamp(inDegrees(Math.asin(clamp(upright_px / across_px, 0, 1))), ...ELEVATIONS_DEG));
}

function toTenths(value: number): number {
  return Math.round(value * 10) / 10 || 0;
}

function inDegrees(angle_rad: number): number {
  return (angle_rad * 180) / Math.PI;
}

function clamp(value: number, least: number, most: number): number {
  return Math.min(Math.max(value, least), most);
}
