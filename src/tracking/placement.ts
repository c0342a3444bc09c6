/**
 * Where the bar lies in a picture and how bright the picture is. A point (u, v) of the bar's own frame is seen at
 * x = x_px + cos(turn) u - sin(turn) v, y = y_px + squash (sin(turn) u + cos(turn) v); grey = gain * model + offset.
 */
export interface Placement {
  /** Radians, clockwise as seen, since the picture's y runs down. */
  turn: number;
  x_px: number;
  y_px: number;
  gain: number;
  offset: number;
}

/** How well the bar's points agree with a picture at the place found. */
export interface Agreement {
  /** Weighted mean of the squared residuals in units of the expected ones, outliers held down: about 1 for a clean frame. */
  misfit: number;
  /** Share of the points' knowledge of the angle that agreed with the picture, 0 to 1. */
  share: number;
  /** Share of the points within the picture whose grey doesn't fit, whatever they tell, 0 to 1. */
  odd: number;
  /** The same share of knowledge that lay outside the picture. */
  outside: number;
  /** Standard deviation of the angle (of a body that only shifts: of its place along u) if residuals are as expected, radians (pixels). */
  sd: number;
  /** Size of the last step, pixels at the bar's ends. */
  lastStep_px: number;
}
