/**
 * The bar in the field of coils and place, in units of the coil current: fields in ampere (field over coil constant), torques
 * over 4 π² J in Hz². Angles in radians anticlockwise from the field of a positive current.
 */
export interface Bar {
  /** m k / (4 π² J), Hz²/A. */
  readonly slope: number;
  /** Ambient field along and across the coil axis over the coil constant, A. */
  readonly along_A: number;
  readonly across_A: number;
  /** Fibre stiffness over 4 π² J, Hz². */
  readonly fibre_Hz2: number;
  /** Direction in which the fibre is untwisted, measured from the ambient field, rad. */
  readonly twist_rad: number;
}

/**
 * What the fibre does when the bar has turned round because the coils' field exceeds the place's: `with the field`: it is twisted
 * by the way the field turned; `against the field`: by the other way round; `set back`: it was untwisted again by half a turn
 * (also the case of a bar that is on that side in all steps); `free`: a fibre that is never twisted, its rest direction that
 * of the field, which leaves the plain f0² = slope |I + B/k| + fibre.
 */
export type Turn = 'with the field' | 'against the field' | 'set back' | 'free';

/** Number of entries in the derivatives: by current, slope, along, across, fibre, twist. */
export const derivativeCount = 6;

/** Rest direction and f0² at one current, with their derivatives. */
export interface Rest {
  /** f0², Hz². */
  y: number;
  /** Rest direction from the coil axis, unwrapped, rad. */
  angle: number;
  /** By current, slope, along, across, fibre, twist. */
  readonly dy: Float64Array;
  readonly dAngle: Float64Array;
}

/** An empty `Rest` to be filled again and again. */
export function blankRest(): Rest {
  return { y: 0, angle: 0, dy: new Float64Array(derivativeCount), dAngle: new Float64Array(derivativeCount) };
}

/**
 * Solves the balance of torques mB sin(θ − θ_B) + κ (θ − θ_f) = 0 for the rest direction next to the field's and takes
 * f0² = (mB cos(θ − θ_B) + κ) / (4 π² J) there; fills `out`. False where there is no stable rest direction, or no field and no
 * fibre. Derivatives follow from the implicit function; the slope of the balance is f0² itself.
 */
export function restAt(current_A: number, bar: Bar, turn: Turn, out: Rest): boolean {
  const { slope, along_A, across_A, fibre_Hz2 } = bar;
  const x = current_A + along_A;
  const size = Math.hypot(x, across_A);
  if (turn === 'free') return freeRest(x, across_A, size, bar, out);
  const home = Math.atan2(across_A, along_A);
  const way = wrapped(Math.atan2(across_A, x) - home);
  const turned = Math.abs(way) > Math.PI / 2;
  const sense = way < 0 ? -1 : 1;
  const field = home + way - (turned && turn === 'against the field' ? sense * 2 * Math.PI : 0);
  const untwisted = home + bar.twist_rad + (turned && turn === 'set back' ? sense * Math.PI : 0);
  const lag = lagBehindField(slope * size, fibre_Hz2, field - untwisted);
  if (lag === null) return false;
  const angle = field + lag;
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  const together = x * cos + across_A * sin;
  const sideways = across_A * cos - x * sin;
  const y = slope * together + fibre_Hz2;
  if (!(y > 0)) return false;
  const square = along_A ** 2 + across_A ** 2;
  const homeByAlong = square > 0 ? -across_A / square : 0;
  const homeByAcross = square > 0 ? along_A / square : 0;
  const { dAngle, dy } = out;
  out.y = y;
  out.angle = angle;
  dAngle[0] = (-slope * sin) / y;
  dAngle[1] = sideways / y;
  dAngle[2] = (-slope * sin + fibre_Hz2 * homeByAlong) / y;
  dAngle[3] = (slope * cos + fibre_Hz2 * homeByAcross) / y;
  dAngle[4] = (untwisted - angle) / y;
  dAngle[5] = fibre_Hz2 / y;
  const byAngle = slope * sideways;
  dy[0] = slope * cos + byAngle * dAngle[0]!;
  dy[1] = together + byAngle * dAngle[1]!;
  dy[2] = slope * cos + byAngle * dAngle[2]!;
  dy[3] = slope * sin + byAngle * dAngle[3]!;
  dy[4] = 1 + byAngle * dAngle[4]!;
  dy[5] = byAngle * dAngle[5]!;
  return true;
}

function freeRest(x: number, across_A: number, size: number, bar: Bar, out: Rest): boolean {
  const y = bar.slope * size + bar.fibre_Hz2;
  if (!(size > 0)) return false;
  const cos = x / size;
  const sin = across_A / size;
  out.y = y;
  out.angle = Math.atan2(across_A, x);
  out.dy.set([bar.slope * cos, size, bar.slope * cos, bar.slope * sin, 1, 0]);
  out.dAngle.set([-sin / size, 0, -sin / size, cos / size, 0, 0]);
  return true;
}

/**
 * Root u of T sin u + κ (u + d) = 0 nearest to 0: how far the bar lags behind the field, given the field's torque, the fibre's
 * stiffness and the direction d of the field from the untwisted one. For d > 0 the left side is convex on [-π, 0] and positive
 * at 0, so that Newton's steps from 0 run down to the root without overshooting; mirrored for d < 0. Null where no root is left
 * (the fibre is wound too far to be held by the field).
 */
function lagBehindField(torque: number, fibre: number, d: number): number | null {
  if (d === 0 || fibre === 0) return torque > 0 || fibre > 0 ? 0 : null;
  let u = 0;
  for (let i = 0; i < 60; i++) {
    const value = torque * Math.sin(u) + fibre * (u + d);
    const rise = torque * Math.cos(u) + fibre;
    if (!(rise > 0)) return null;
    const step = value / rise;
    u -= step;
    if (Math.abs(u) > Math.PI) return null;
    if (Math.abs(step) <= 1e-15 * Math.abs(u)) return u;
  }
  const rest = torque * Math.sin(u) + fibre * (u + d);
  return Math.abs(rest) <= 1e-12 * (torque + Math.abs(fibre * d)) ? u : null;
}

/** The same direction in (-π, π]. */
export function wrapped(angle: number): number {
  const turns = angle - 2 * Math.PI * Math.round(angle / (2 * Math.PI));
  return turns === -Math.PI ? Math.PI : turns;
}

/** The direction of a line without ends in (-π/2, π/2]: a bar looks the same after half a turn. */
export function wrappedLine(angle: number): number {
  const turns = angle - Math.PI * Math.round(angle / Math.PI);
  return turns === -Math.PI / 2 ? Math.PI / 2 : turns;
}
