import type { Placement } from './placement.ts';

/** The point of the bar's own frame about which it turns, pixels, with the standard uncertainty of each coordinate. */
export interface Pivot {
  readonly u_px: number;
  readonly v_px: number;
  readonly sd_px: number;
}

/** What is believed of the pivot beforehand: a place in the bar's frame and how far off it may be, pixels. */
export interface PivotPrior {
  readonly u_px: number;
  readonly v_px: number;
  readonly sdU_px: number;
  readonly sdV_px: number;
}

/**
 * The point that stays in place while the bar turns: origin(t) = P - D R(t) q by least squares for P and q, weighed
 * against a prior; where the bar hardly turns, or swings widely, the prior decides.
 */
export function pivotOf(places: readonly Placement[], squash: number, prior: PivotPrior): Pivot {
  const n = places.length;
  if (n < 3) return { u_px: prior.u_px, v_px: prior.v_px, sd_px: Math.max(prior.sdU_px, prior.sdV_px) };
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
  // A swing's places are correlated from picture to picture: eight of them count as one or two.
  const scatter = 4 * Math.max(0.0004, free);
  const priorU = scatter / prior.sdU_px ** 2;
  const priorV = scatter / prior.sdV_px ** 2;
  return {
    u_px: (mu + priorU * prior.u_px) / (turning + priorU),
    v_px: (mv + priorV * prior.v_px) / (turning + priorV),
    sd_px: Math.sqrt(scatter / (turning + Math.min(priorU, priorV))),
  };
}
