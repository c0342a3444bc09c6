import type { Region } from '../recording/recording.ts';

/** A region and how the camera looks at the bar in it; the fields are those of the session file. */
export type View = PlanView | ObliqueView | SideView;

/** The camera looks along the fibre: the bar turns in the picture. */
export interface PlanView {
  readonly kind: 'plan';
  readonly region: Region;
}

/** The camera looks down at an angle: the bar turns in the picture, its circle foreshortened by sin(elevation). */
export interface ObliqueView {
  readonly kind: 'oblique';
  readonly region: Region;
  /** Height of the camera above the bench, degrees. */
  readonly elevation_deg: number;
}

/** The camera looks across the fibre from bench level: the bar's near end moves sideways. */
export interface SideView {
  readonly kind: 'side';
  readonly region: Region;
  /** Where the fibre stands, displayed pixels from the left of the full-size frame. */
  readonly axis_x_px: number;
  /** How far from the fibre the near end would stand if the bar were broadside; null: motion can't be scaled to degrees. */
  readonly half_length_px: number | null;
  /** Angle between the line of sight and the bar at rest; null: unknown. */
  readonly facing_deg: number | null;
}

/** Why a frame has no pose. */
export type Refusal = 'hidden' | 'blurred' | 'left_region' | 'no_fit';

/**
 * Poses of one stretch as aligned columns, one row per frame whose pose can be trusted, ascending in time.
 * Angles grow anticlockwise as seen in the picture (y up), continuous, so they may leave (-pi/2, pi/2]; for a side view
 * they grow as the near end moves to the right.
 */
export interface Trace {
  /** Seconds on the recording's presentation clock. */
  readonly time_s: Float64Array;
  /** Angle of the bar in radians, or, where `unit` is 'px', sideways position of its end from the fibre in pixels. */
  readonly angle: Float64Array;
  readonly unit: 'rad' | 'px';
  /** Bar's middle (side: near end), displayed pixels of the full-size frame. */
  readonly x_px: Float64Array;
  readonly y_px: Float64Array;
  /** How good the fix is: 1 as good as the best of the stretch, towards 0 useless. */
  readonly quality: Float64Array;
  /** Index of the frame in the recording. */
  readonly frame_index: Int32Array;
  /** Frames without a pose, each with its reason; trace rows + refused = frames handed in. */
  readonly refused: readonly { readonly frame_index: number; readonly reason: Refusal }[];
  /** Apparent half length of the bar in pixels of its horizontal plane (scales swing to twist); null where it can't be seen. */
  readonly halfLength_px: number | null;
  /** Half of the bar's width in the same pixels, for drawing it; left out where it isn't known. */
  readonly halfWidth_px?: number;
  /**
   * Standard uncertainty common to all angles of the stretch (where the bar's own axis is taken to lie, camera geometry),
   * in the unit of `angle`: goes into the rest direction, not into frequencies.
   */
  readonly u_common: number;
}

/** What following a bar through a stretch ends in. */
export type TrackOutcome =
  | { readonly ok: true; readonly trace: Trace }
  | {
      readonly ok: false;
      readonly reason: 'no_bar' | 'too_few_frames';
      /** One plain sentence for the user: what was looked for and what was found instead. */
      readonly message: string;
      readonly frames: number;
    };
