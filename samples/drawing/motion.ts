import type { Apparatus } from './bench.ts';
import { coilConstant_T_per_A, inertia_kg_m2 } from './magnet.ts';
import type { Contact, Schedule } from './schedule.ts';

/** Motion of the bar on an even grid of times: twist (radians from the coil axis) and swing (metres), each with its rate. */
export interface Motion {
  readonly step_s: number;
  readonly angle_rad: Float64Array;
  readonly rate_rad_per_s: Float64Array;
  readonly along_m: Float64Array;
  readonly alongRate_m_per_s: Float64Array;
  readonly across_m: Float64Array;
  readonly acrossRate_m_per_s: Float64Array;
}

/** Where the bar is at one moment. */
export interface Place {
  readonly angle_rad: number;
  readonly along_m: number;
  readonly across_m: number;
}

// The hand: a critically damped spring towards where it wants the bar, stiffer than what pulls the bar home.
const HAND_rad_per_s = 40;
const HAND_OVER_BAR = 3;

const smooth = (share: number): number => share * share * (3 - 2 * share);

/**
 * Integrates the equation of motion of the suspended bar through a schedule,
 * J t'' + 2 J gamma t' + J s |t'| t' + kappa (t - t_f) + m (B_along sin t - B_across cos t) = hand,
 * with two damped pendulum motions beside it, by the classical fourth-order Runge-Kutta rule.
 * @param steps_per_s Integration steps a second; a whole multiple of 1000, so that the hand takes and lets go on a grid time.
 * @param start_rad Angle at time 0, at rest.
 */
export function integrateMotion(
  apparatus: Apparatus,
  schedule: Schedule,
  start_rad: number,
  steps_per_s = 1000,
): Motion {
  const h = 1 / steps_per_s;
  const count = Math.ceil(schedule.length_s * steps_per_s) + 2;
  const column = (): Float64Array => new Float64Array(count);
  const motion: Motion = {
    step_s: h,
    angle_rad: column(),
    rate_rad_per_s: column(),
    along_m: column(),
    alongRate_m_per_s: column(),
    across_m: column(),
    acrossRate_m_per_s: column(),
  };
  const inertia = inertia_kg_m2(apparatus);
  const turn = (apparatus.misalignment_deg * Math.PI) / 180;
  const perTesla = apparatus.moment_A_m2 / inertia;
  const ambientAlong = perTesla * apparatus.ambient_T * Math.cos(turn);
  const across = perTesla * apparatus.ambient_T * Math.sin(turn);
  const perAmpere = perTesla * coilConstant_T_per_A(apparatus);
  const fibre = apparatus.fibreStiffness_N_m_per_rad / inertia;
  const fibreRest = (apparatus.fibreRest_deg * Math.PI) / 180;
  const swing2 = apparatus.swing_Hz.map((f) => (2 * Math.PI * f) ** 2);
  const contacts: readonly Contact[] = schedule.steps.flatMap((step) => step.contacts);

  let along = ambientAlong;
  let currentIndex = 0;
  let contactIndex = 0;
  let contact: Contact | null = null;
  let taken = 0;

  const rates = (time: number, y: Float64Array, out: Float64Array): void => {
    const [angle, rate, x, vx, z, vz] = y as unknown as [number, number, number, number, number, number];
    out[0] = rate;
    out[1] =
      -2 * apparatus.gamma_per_s * rate -
      apparatus.squareDrag_per_rad * Math.abs(rate) * rate -
      fibre * (angle - fibreRest) -
      along * Math.sin(angle) +
      across * Math.cos(angle);
    out[2] = vx;
    out[3] = -swing2[0]! * x - 2 * apparatus.swingDecay_per_s * vx;
    out[4] = vz;
    out[5] = -swing2[1]! * z - 2 * apparatus.swingDecay_per_s * vz;
    if (contact !== null) {
      const length = 0.7 * (contact.end_s - contact.start_s);
      const share = Math.min(1, (time - contact.start_s) / length);
      const target = taken + (contact.release_rad - taken) * smooth(share);
      const targetRate = share < 1 ? ((contact.release_rad - taken) * 6 * share * (1 - share)) / length : 0;
      const hand = Math.max(HAND_rad_per_s, HAND_OVER_BAR * Math.sqrt(Math.hypot(along, across)));
      const spring = hand * hand;
      out[1] -= spring * (angle - target) + 2 * hand * (rate - targetRate);
      out[3] -= spring * (x - contact.swing_m[0]) + 2 * hand * vx;
      out[5] -= spring * (z - contact.swing_m[1]) + 2 * hand * vz;
    }
  };

  const y = new Float64Array(6);
  y[0] = start_rad;
  const k = [0, 1, 2, 3].map(() => new Float64Array(6));
  const trial = new Float64Array(6);
  for (let i = 0; i < count; i++) {
    motion.angle_rad[i] = y[0]!;
    motion.rate_rad_per_s[i] = y[1]!;
    motion.along_m[i] = y[2]!;
    motion.alongRate_m_per_s[i] = y[3]!;
    motion.across_m[i] = y[4]!;
    motion.acrossRate_m_per_s[i] = y[5]!;
    const time = i * h;
    const due = time + h / 4;
    while (currentIndex < schedule.currents.length && schedule.currents[currentIndex]!.time_s <= due) {
      along = ambientAlong + perAmpere * schedule.currents[currentIndex]!.current_A;
      currentIndex++;
    }
    if (contact !== null && contact.end_s <= due) contact = null;
    const next = contacts[contactIndex];
    if (next !== undefined && next.start_s <= due) {
      contact = next;
      taken = y[0]!;
      contactIndex++;
    }
    rates(time, y, k[0]!);
    for (let stage = 1; stage < 4; stage++) {
      const part = stage === 3 ? h : h / 2;
      for (let j = 0; j < 6; j++) trial[j] = y[j]! + part * k[stage - 1]![j]!;
      rates(time + part, trial, k[stage]!);
    }
    for (let j = 0; j < 6; j++) y[j]! += (h / 6) * (k[0]![j]! + 2 * k[1]![j]! + 2 * k[2]![j]! + k[3]![j]!);
  }
  return motion;
}

/** Cubic Hermite value between grid points; times beyond the grid give its ends. */
function between(values: Float64Array, rates: Float64Array, step_s: number, time_s: number): number {
  const position = Math.min(Math.max(time_s / step_s, 0), values.length - 1.000001);
  const i = Math.floor(position);
  const s = position - i;
  const a = values[i]!;
  const b = values[i + 1]!;
  const da = rates[i]! * step_s;
  const db = rates[i + 1]! * step_s;
  return a + s * (da + s * (3 * (b - a) - 2 * da - db + s * (2 * (a - b) + da + db)));
}

/** Where the bar is at any moment of a motion. */
export function placeAt(motion: Motion, time_s: number): Place {
  return {
    angle_rad: between(motion.angle_rad, motion.rate_rad_per_s, motion.step_s, time_s),
    along_m: between(motion.along_m, motion.alongRate_m_per_s, motion.step_s, time_s),
    across_m: between(motion.across_m, motion.acrossRate_m_per_s, motion.step_s, time_s),
  };
}
