import type { Motion } from './motion.ts';

/**
 * Amplitude over time under linear and quadratic drag, a' = -gamma a - q a² with q = 4 drag omega / (3 pi) (loss per cycle averaged): at
 * time t after it was `a0`.
 */
export function amplitudeAt({ gamma, drag, omega }: Motion, a0: number, t: number): number {
  const q = (4 * drag * omega) / (3 * Math.PI);
  // (1 - exp(-gamma t)) / gamma, also where gamma is zero.
  const spell = Math.abs(gamma * t) < 1e-8 ? t : -Math.expm1(-gamma * t) / gamma;
  return (a0 * Math.exp(-gamma * t)) / Math.max(1e-9, 1 + q * a0 * spell);
}

/** Amplitude at time zero of the motion that starts with angle x0 and rate v0, from the energy of both; good to third order in the angle. */
export function startAmplitude({ omega, gamma, share, skew, x0, v0 }: Motion): number {
  const damped2 = omega * omega - gamma * gamma;
  const rate = v0 + gamma * x0;
  // Twice the potential energy over omega², less its small-angle part.
  const potential = (1 - share) * x0 * x0 + 2 * share * (1 - Math.cos(x0)) + 2 * skew * (Math.sin(x0) - x0);
  const square = potential + (rate * rate) / damped2;
  // Potential of an amplitude a: a² - share a⁴ / 12 (the odd term swaps sign between the two turning points).
  return Math.sqrt(square * (1 + (share * square) / 12));
}

/**
 * Frequency at amplitude `a` over that at none: 1 - (share + 5/3 skew²) a²/16 + share (8 - 7 share) a⁴/3072, the first two orders of
 * Lindstedt's expansion for the torque of `Motion` (the second exact for skew = 0; share = 1 gives the pendulum's 1 - a²/16 + a⁴/3072).
 */
export function frequencyRatio({ share, skew }: Motion, a: number): number {
  const a2 = a * a;
  return 1 - ((share + (5 / 3) * skew * skew) * a2) / 16 + (share * (8 - 7 * share) * a2 * a2) / 3072;
}

/** Mean of the squared amplitude from time zero to `duration_s`, by Simpson's rule over 16 intervals. */
export function meanSquareAmplitude(motion: Motion, a0: number, duration_s: number): number {
  let sum = 0;
  for (let k = 0; k <= 16; k++) {
    const weight = k === 0 || k === 16 ? 1 : k % 2 === 1 ? 4 : 2;
    sum += weight * amplitudeAt(motion, a0, (k * duration_s) / 16) ** 2;
  }
  return sum / 48;
}
