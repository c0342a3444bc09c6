import type { Placement } from './register.ts';

/** The point of the bar's own frame about which it turns, pixels, with the standard uncertainty of each coordinate. */
export interface Pivot {
  readonly u_px: number;
  readonly v_px: number;
  readonly sd_px: number;
}

/**
 * The point that stays in place while the bar turns: origin(t) = P - D R(t) q by least squares for P and q. Where the
 * bar hardly turns q isn't determined, and is drawn to the origin by a prior of `prior_px`.
 */
export function pivotOf(places: readonly Placement[], squash: number, prior_px: number): Pivot {
  const n = places.length;
  if (n < 3) return { u_px: 0, v_px: 0, sd_px: prior_px };
  // In the bar's plane (y unsquashed) the problem is linear: z = P - R q, with R = [[c, -s], [s, c]].
  let c = 0;
  let s = 0;
  let x = 0;
  let y = 0;
  for (const p of places) {
    c += Math.cos(p.turn) / n;
    s += Math.sin(p.turn) / n;
    x += p.x_px / n;
    y += p.y_px / squash / n;
  }
  // After taking out the means: dz = -dR q, and dR'dR = (dc^2 + ds^2) times the unit matrix.
  let turning = 0;
  let mu = 0;
  let mv = 0;
  let squares = 0;
  for (const p of places) {
    const dc = Math.cos(p.turn) - c;
    const ds = Math.sin(p.turn) - s;
    const dx = p.x_px - x;
    const dy = p.y_px / squash - y;
    turning += dc * dc + ds * ds;
    mu -= dc * dx + ds * dy;
    mv -= -ds * dx + dc * dy;
    squares += dx * dx + dy * dy;
  }
  const free = turning > 0 ? (squares - (mu * mu + mv * mv) / turning) / (2 * n) : 0;
  const scatter = Math.max(0.0004, free);
  const prior = scatter / prior_px ** 2;
  return {
    u_px: mu / (turning + prior),
    v_px: mv / (turning + prior),
    sd_px: Math.sqrt(scatter / (turning + prior)),
  };
}
