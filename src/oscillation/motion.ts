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

/**
 * Integrates the motion from time zero through all of `time_s` (ascending, none negative): fills `x` and, where `columns` holds seven
 * arrays, the derivatives of x by MOTION_PARAMETERS. The linear part is propagated exactly and the small rest by the classical
 * Runge-Kutta scheme (integrating factor method, Lawson 1967, SIAM J. Numer. Anal. 4, 372), so that a step may span a good part of a cycle.
 * Returns false where there is no oscillation to follow: omega <= |gamma|, or an angle beyond a half turn.
 */
export function integrate(
  motion: Motion,
  time_s: Float64Array,
  x: Float64Array,
  columns: readonly Float64Array[] | null,
): boolean {
  const { omega, gamma, drag, share, skew } = motion;
  const damped2 = omega * omega - gamma * gamma;
  if (!(damped2 > 0)) return false;
  const damped = Math.sqrt(damped2);
  const omega2 = omega * omega;
  const pairs = columns === null ? 1 : 8;
  // Pair 0 is (x, x'); pair 1 + k its derivative by parameter k.
  const y = new Float64Array(2 * pairs);
  const trial = new Float64Array(2 * pairs);
  const k1 = new Float64Array(pairs);
  const k2 = new Float64Array(pairs);
  const k3 = new Float64Array(pairs);
  const k4 = new Float64Array(pairs);
  y[0] = motion.x0;
  y[1] = motion.v0;
  if (pairs > 1) {
    y[12] = 1;
    y[15] = 1;
  }

  /** Accelerations beyond the linear ones, for every pair. */
  const rest = (at: Float64Array, out: Float64Array): void => {
    const angle = at[0]!;
    const rate = at[1]!;
    const speed = Math.abs(rate);
    const sine = Math.sin(angle);
    const cosine = Math.cos(angle);
    const excess = share * (sine - angle) + skew * (cosine - 1);
    out[0] = -omega2 * excess - drag * speed * rate;
    if (pairs === 1) return;
    const stiffness = -omega2 * (share * (cosine - 1) - skew * sine);
    const resistance = -2 * drag * speed;
    for (let k = 1; k < 8; k++) out[k] = stiffness * at[2 * k]! + resistance * at[2 * k + 1]!;
    out[1] = out[1]! - 2 * omega * (angle + excess);
    out[2] = out[2]! - 2 * rate;
    out[3] = out[3]! - speed * rate;
    out[4] = out[4]! - omega2 * (sine - angle);
    out[5] = out[5]! - omega2 * (cosine - 1);
  };

  // Propagators over h/2 and h of the linear part: (x, v) -> (a x + b v, c x + d v).
  let h = Number.NaN;
  let half = { a: 1, b: 0, c: 0, d: 1 };
  let full = half;
  const propagator = (dt: number) => {
    const decay = Math.exp(-gamma * dt);
    const cosine = decay * Math.cos(damped * dt);
    const sine = (decay * Math.sin(damped * dt)) / damped;
    return { a: cosine + gamma * sine, b: sine, c: -omega2 * sine, d: cosine - gamma * sine };
  };

  const step = (): void => {
    rest(y, k1);
    for (let k = 0; k < pairs; k++) {
      const position = y[2 * k]!;
      const rate = y[2 * k + 1]! + (h / 2) * k1[k]!;
      trial[2 * k] = half.a * position + half.b * rate;
      trial[2 * k + 1] = half.c * position + half.d * rate;
    }
    rest(trial, k2);
    for (let k = 0; k < pairs; k++) {
      const position = y[2 * k]!;
      const rate = y[2 * k + 1]!;
      trial[2 * k] = half.a * position + half.b * rate;
      trial[2 * k + 1] = half.c * position + half.d * rate + (h / 2) * k2[k]!;
    }
    rest(trial, k3);
    for (let k = 0; k < pairs; k++) {
      const position = y[2 * k]!;
      const rate = y[2 * k + 1]!;
      trial[2 * k] = full.a * position + full.b * rate + h * half.b * k3[k]!;
      trial[2 * k + 1] = full.c * position + full.d * rate + h * half.d * k3[k]!;
    }
    rest(trial, k4);
    for (let k = 0; k < pairs; k++) {
      const position = y[2 * k]!;
      const rate = y[2 * k + 1]! + (h / 6) * k1[k]!;
      const middle = (h / 3) * (k2[k]! + k3[k]!);
      y[2 * k] = full.a * position + full.b * rate + half.b * middle;
      y[2 * k + 1] = full.c * position + full.d * rate + half.d * middle + (h / 6) * k4[k]!;
    }
  };

  for (let i = 0; i < time_s.length; i++) {
    const interval = time_s[i]! - (i === 0 ? 0 : time_s[i - 1]!);
    if (interval > 0) {
      const steps = Math.ceil((omega * interval) / LARGEST_STEP_rad);
      if (!(steps < 1e6)) return false;
      if (interval / steps !== h) {
        h = interval / steps;
        half = propagator(h / 2);
        full = propagator(h);
      }
      for (let s = 0; s < steps; s++) step();
      if (!(Math.abs(y[0]!) < Math.PI)) return false;
    }
    x[i] = y[0]!;
    if (columns !== null) for (let k = 0; k < 7; k++) columns[k]![i] = y[2 * k + 2]!;
  }
  return true;
}
