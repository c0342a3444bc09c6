/**
 * Quantities the motion about rest depends on, in the order in which derivatives are taken. With x the angle from rest:
 * x'' + 2 gamma x' + drag |x'| x' + omega² [(1 - share) x + share sin x + skew (cos x - 1)] = 0.
 * `share` is the part of the restoring torque that follows sin x (magnetic torque m B cos(delta) over the whole, delta the angle
 * of the rest direction off the field), `skew` is m B sin(delta) over the whole. omega is the undamped angular frequency for
 * small x whatever share and skew are.
 */
export interface Motion {
  readonly omega: number;
  readonly gamma: number;
  readonly drag: number;
  readonly share: number;
  readonly skew: number;
  /** Angle from rest and its rate at time zero. */
  readonly x0: number;
  readonly v0: number;
}

/** Names of the derivatives in the order of the columns `integrate` fills. */
export const MOTION_PARAMETERS = ['omega', 'gamma', 'drag', 'share', 'skew', 'x0', 'v0'] as const;

/** Largest phase step of the integration in radians; halving it moves no frequency by more than 1e-8 up to 25 degrees. */
const LARGEST_STEP_rad = 0.3;

/** A linear map of angle and rate: (x, v) -> (a x + b v, c x + d v). */
interface Propagator {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly d: number;
}

/** Derivatives that are integrated: by gamma, drag, share and skew, and by the state across its own motion, which no force drives. */
const FOLLOWED = 5;

/**
 * Integrates the motion from time zero through all of `time_s` (ascending, none negative): fills `x` and, where `columns` holds seven
 * arrays, the derivatives of x by MOTION_PARAMETERS. The linear part is propagated exactly and the small rest by the classical
 * Runge-Kutta scheme (integrating factor method, Lawson 1967, SIAM J. Numer. Anal. 4, 372), so that a step may span a good part of a cycle.
 * Two derivatives follow from the others: the same motion may begin later, and time may be counted in units of 1 / omega.
 * Returns false where there is no oscillation to follow: omega <= |gamma|, no motion at all, or an angle beyond a half turn.
 */
export function integrate(
  motion: Motion,
  time_s: Float64Array,
  x: Float64Array,
  columns: readonly Float64Array[] | null,
): boolean {
  const { omega, gamma, drag, share, skew, x0, v0 } = motion;
  const damped2 = omega * omega - gamma * gamma;
  if (!(damped2 > 0)) return false;
  const damped = Math.sqrt(damped2);
  const omega2 = omega * omega;
  const followed = columns === null ? 0 : FOLLOWED;
  // What the derivatives need of each stage: stiffness, resistance, and a force for each of the four that have one.
  const stiffness = new Float64Array(4);
  const resistance = new Float64Array(4);
  const force = new Float64Array(4 * FOLLOWED);

  /** Acceleration beyond the linear one at one stage of a step. */
  const stage = (s: number, angle: number, rate: number): number => {
    const sine = Math.sin(angle);
    // Cheaper than another cosine; a motion beyond a half turn is given up anyway.
    const cosine = Math.sqrt(1 - sine * sine) * (Math.abs(angle) < Math.PI / 2 ? 1 : -1);
    const magnetic = omega2 * (angle - sine);
    const asymmetric = omega2 * (1 - cosine);
    const resisted = -Math.abs(rate) * rate;
    if (followed > 0) {
      stiffness[s] = omega2 * (share * (1 - cosine) + skew * sine);
      resistance[s] = -2 * drag * Math.abs(rate);
      force[s * FOLLOWED] = -2 * rate;
      force[s * FOLLOWED + 1] = resisted;
      force[s * FOLLOWED + 2] = magnetic;
      force[s * FOLLOWED + 3] = asymmetric;
    }
    return share * magnetic + skew * asymmetric + drag * resisted;
  };

  // The state (x, x' / omega) moves along this direction as time goes by; only the derivative across it has to be followed.
  const acceleration0 = stage(0, x0, v0) - 2 * gamma * v0 - omega2 * x0;
  const speed = Math.hypot(v0, acceleration0 / omega);
  if (!(speed > 0)) return false;
  const along = [v0 / speed, acceleration0 / (omega * speed)] as const;
  const y = new Float64Array(2 * (followed + 1));
  y[0] = x0;
  y[1] = v0;
  if (followed > 0) {
    y[2 * FOLLOWED] = -along[1];
    y[2 * FOLLOWED + 1] = along[0] * omega;
  }

  let h = Number.NaN;
  let half: Propagator = { a: 1, b: 0, c: 0, d: 1 };
  let full = half;
  const propagator = (dt: number): Propagator => {
    const decay = Math.exp(-gamma * dt);
    const cosine = decay * Math.cos(damped * dt);
    const sine = (decay * Math.sin(damped * dt)) / damped;
    return { a: cosine + gamma * sine, b: sine, c: -omega2 * sine, d: cosine - gamma * sine };
  };

  const step = (): void => {
    const { a: ha, b: hb, c: hc, d: hd } = half;
    const { a: fa, b: fb, c: fc, d: fd } = full;
    for (let pair = 0; pair <= followed; pair++) {
      const p = y[2 * pair]!;
      const q = y[2 * pair + 1]!;
      const own = pair - 1;
      const k1 = pair === 0 ? stage(0, p, q) : stiffness[0]! * p + resistance[0]! * q + force[own]!;
      const pushed = q + (h / 2) * k1;
      const p2 = ha * p + hb * pushed;
      const q2 = hc * p + hd * pushed;
      const k2 = pair === 0 ? stage(1, p2, q2) : stiffness[1]! * p2 + resistance[1]! * q2 + force[FOLLOWED + own]!;
      const p3 = ha * p + hb * q;
      const q3 = hc * p + hd * q + (h / 2) * k2;
      const k3 = pair === 0 ? stage(2, p3, q3) : stiffness[2]! * p3 + resistance[2]! * q3 + force[2 * FOLLOWED + own]!;
      const p4 = fa * p + fb * q + h * hb * k3;
      const q4 = fc * p + fd * q + h * hd * k3;
      const k4 = pair === 0 ? stage(3, p4, q4) : stiffness[3]! * p4 + resistance[3]! * q4 + force[3 * FOLLOWED + own]!;
      const late = q + (h / 6) * k1;
      const middle = (h / 3) * (k2 + k3);
      y[2 * pair] = fa * p + fb * late + hb * middle;
      y[2 * pair + 1] = fc * p + fd * late + hd * middle + (h / 6) * k4;
    }
  };

  for (let i = 0; i < time_s.length; i++) {
    const interval = time_s[i]! - (i === 0 ? 0 : time_s[i - 1]!);
    if (interval > 0) {
      const steps = Math.ceil((omega * interval) / LARGEST_STEP_rad);
      if (!(steps < 1e6)) return false;
      // Times in floating point: even ones differ in their last digits.
      if (!(Math.abs(interval / steps - h) < 1e-12 * h)) {
        h = interval / steps;
        half = propagator(h / 2);
        full = twice(half);
      }
      for (let s = 0; s < steps; s++) step();
      if (!(Math.abs(y[0]!) < Math.PI)) return false;
    }
    x[i] = y[0]!;
    if (columns === null) continue;
    const later = y[1]! / speed;
    const across = y[2 * FOLLOWED]!;
    const byRate = (along[1] * later + along[0] * across) / omega;
    columns[0]![i] = (time_s[i]! * y[1]! - gamma * y[2]! - v0 * byRate) / omega;
    for (let k = 1; k < FOLLOWED; k++) columns[k]![i] = y[2 * k]!;
    columns[5]![i] = along[0] * later - along[1] * across;
    columns[6]![i] = byRate;
  }
  return true;
}

/** The map done twice. */
function twice({ a, b, c, d }: Propagator): Propagator {
  return { a: a * a + b * c, b: (a + d) * b, c: (a + d) * c, d: d * d + b * c };
}
