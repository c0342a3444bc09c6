import type { CameraPlan } from './bench.ts';

/** A point or direction of the bench: x along the coil axis, y across it, z up; metres. */
export type Vector = readonly [number, number, number];

/** A pinhole camera: a point p is seen at centre + focal (p - place) . (right, down) / (p - place) . forward. */
export interface Camera {
  readonly place_m: Vector;
  readonly right: Vector;
  readonly down: Vector;
  readonly forward: Vector;
  readonly focal_px: number;
  readonly centreX_px: number;
  readonly centreY_px: number;
}

/** How the whole picture is magnified about a point and shifted in one frame. */
export interface Warp {
  readonly scale: number;
  readonly dx_px: number;
  readonly dy_px: number;
}

/** Scalar product. */
export function dot(a: Vector, b: Vector): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/** World direction of the picture's +x axis for a plan, radians from the coil axis. */
export function pictureTurn_rad(plan: CameraPlan): number {
  return ((plan.view === 'side' ? 90 - plan.coilAxis_deg : -plan.coilAxis_deg) * Math.PI) / 180;
}

/** The camera of a plan, aimed at a point `height_m` above the board where the bar hangs, which it shows at `axis_px`. */
export function cameraOf(plan: CameraPlan, barLength_m: number, height_m: number): Camera {
  const turn = pictureTurn_rad(plan);
  const rise = (plan.elevation_deg * Math.PI) / 180;
  const right: Vector = [Math.cos(turn), Math.sin(turn), 0];
  const ahead: Vector = [-Math.sin(turn), Math.cos(turn), 0];
  const forward: Vector = [Math.cos(rise) * ahead[0], Math.cos(rise) * ahead[1], -Math.sin(rise)];
  const down: Vector = [-Math.sin(rise) * ahead[0], -Math.sin(rise) * ahead[1], -Math.cos(rise)];
  return {
    place_m: [-plan.distance_m * forward[0], -plan.distance_m * forward[1], height_m - plan.distance_m * forward[2]],
    right,
    down,
    forward,
    focal_px: (plan.barLength_px / barLength_m) * plan.distance_m,
    centreX_px: plan.axis_px[0],
    centreY_px: plan.axis_px[1],
  };
}

/** The same camera with its picture magnified about the middle of the frame and shifted. */
export function warped(camera: Camera, warp: Warp, width_px: number, height_px: number): Camera {
  const cx = (width_px - 1) / 2;
  const cy = (height_px - 1) / 2;
  return {
    ...camera,
    focal_px: camera.focal_px * warp.scale,
    centreX_px: cx + warp.scale * (camera.centreX_px - cx) + warp.dx_px,
    centreY_px: cy + warp.scale * (camera.centreY_px - cy) + warp.dy_px,
  };
}

/** How the picture of a plan is warped at one moment; null where the camera stands still. */
export function warpAt(plan: CameraPlan, time_s: number): Warp | null {
  const { sag_px_per_s: sag, breathing, shake } = plan;
  if (sag === undefined && breathing === undefined && shake === undefined) return null;
  const phase = shake === undefined ? 0 : 2 * Math.PI * shake.rate_Hz * time_s;
  return {
    scale: 1 + (breathing === undefined ? 0 : breathing.share * Math.sin((2 * Math.PI * time_s) / breathing.period_s)),
    dx_px: (sag?.[0] ?? 0) * time_s + (shake?.x_px ?? 0) * Math.sin(phase),
    dy_px: (sag?.[1] ?? 0) * time_s + (shake?.y_px ?? 0) * Math.sin(1.31 * phase + 0.7),
  };
}

/** Picture position of a point, pixels. */
export function project(camera: Camera, point: Vector): readonly [number, number] {
  const away: Vector = [point[0] - camera.place_m[0], point[1] - camera.place_m[1], point[2] - camera.place_m[2]];
  const scale = camera.focal_px / dot(away, camera.forward);
  return [camera.centreX_px + scale * dot(away, camera.right), camera.centreY_px + scale * dot(away, camera.down)];
}

/** Direction (not normalised, unit depth along `forward`) of the ray through a picture position, written into `out`. */
export function rayThrough(camera: Camera, x_px: number, y_px: number, out: Float64Array): void {
  const a = (x_px - camera.centreX_px) / camera.focal_px;
  const b = (y_px - camera.centreY_px) / camera.focal_px;
  for (let i = 0; i < 3; i++) out[i] = camera.forward[i]! + a * camera.right[i]! + b * camera.down[i]!;
}
