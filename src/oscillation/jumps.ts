import { dot, subtract } from '../numerics/dot.ts';
import { orthonormalBasis } from './basis.ts';
import { OMEGA } from './model.ts';
import { fitResidualNoise, noiseLevel } from './residual-noise.ts';
import type { TwistFit } from './twist-fit.ts';

/** The place in a segment where a sudden change of amplitude and phase would explain most. */
export interface Jump {
  /** Seconds from the first pose. */
  readonly time_s: number;
  /** By how much chi-square falls (two parameters), against the noise that is left near the twist's frequency. */
  readonly evidence: number;
  /** Change of the oscillation over its size at that time. */
  readonly size: number;
  /** By how much omega would change if the jump were allowed for. */
  readonly omegaShift: number;
  /** Variance per sample of the noise left near the twist's frequency once the jump is allowed for. */
  readonly level: number;
}

/**
 * Looks for a sudden change of amplitude and phase at any time: from there on, any multiple of the twist and of `later`, the twist a quarter cycle on, is added to the
 * model, the fitted parameters free to follow. All times are tried at once by running sums. Both are the
 * fitted motion at the used samples, `margin_s` is kept from both ends. Null where there is no room.
 */
export function findJump(fit: TwistFit, twist: Float64Array, later: Float64Array, margin_s: number): Jump | null {
  const { samples, residual, parameters } = fit;
  const n = residual.length;
  const omega = parameters[OMEGA]!;
  const c0 = twist;
  const c1 = later;
  const { basis } = fit;
  const clean = residual.slice();
  for (const q of basis.q) subtract(clean, q, dot(clean, q));
  const end = samples.time_s[n - 1]!;
  const p = basis.q.length;
  const s = { c00: 0, c01: 0, c11: 0, r0: 0, r1: 0 };
  const q0 = new Float64Array(p);
  const q1 = new Float64Array(p);
  let best: { at: number; gain: number; b0: number; b1: number; q0: Float64Array; q1: Float64Array } | null = null;
  for (let i = n - 1; i > 0; i--) {
    const [a, b] = [c0[i]!, c1[i]!];
    s.c00 += a * a;
    s.c01 += a * b;
    s.c11 += b * b;
    s.r0 += a * clean[i]!;
    s.r1 += b * clean[i]!;
    for (let k = 0; k < p; k++) {
      q0[k] = q0[k]! + a * basis.q[k]![i]!;
      q1[k] = q1[k]! + b * basis.q[k]![i]!;
    }
    const t = samples.time_s[i]!;
    if (t < margin_s || t > end - margin_s) continue;
    const m00 = s.c00 - dot(q0, q0);
    const m01 = s.c01 - dot(q0, q1);
    const m11 = s.c11 - dot(q1, q1);
    const determinant = m00 * m11 - m01 * m01;
    if (!(determinant > 1e-6 * s.c00 * s.c11)) continue;
    const b0 = (m11 * s.r0 - m01 * s.r1) / determinant;
    const b1 = (m00 * s.r1 - m01 * s.r0) / determinant;
    const gain = b0 * s.r0 + b1 * s.r1;
    if (best === null || gain > best.gain) best = { at: i, gain, b0, b1, q0: q0.slice(), q1: q1.slice() };
  }
  if (best === null) return null;
  const { at, gain, b0, b1 } = best;
  const after = clean.slice();
  for (let i = at; i < n; i++) after[i] = after[i]! - b0 * c0[i]! - b1 * c1[i]!;
  for (let k = 0; k < p; k++)
    for (let i = 0; i < n; i++) {
      after[i] = after[i]! + (b0 * best.q0[k]! + b1 * best.q1[k]!) * basis.q[k]![i]!;
    }
  const from = (column: Float64Array) => column.map((value, i) => (i < at ? 0 : value));
  const spanned = orthonormalBasis([from(c0), from(c1)], [0, 1], basis.q).q;
  const noise = fitResidualNoise(samples.time_s, after, spanned, fit.noise.step_s);
  const level = Math.max(noiseLevel(noise, omega / (2 * Math.PI)), 1e-300);
  // What the jump would do to a fit that does not know of it.
  let omegaShift = 0;
  fit.jacobian.forEach((column, k) => {
    let product = 0;
    for (let i = at; i < n; i++) product += column[i]! * (b0 * c0[i]! + b1 * c1[i]!);
    omegaShift += (fit.inverse[OMEGA * parameters.length + k]! * product) / fit.level;
  });
  return {
    time_s: samples.time_s[at]!,
    evidence: gain / level,
    size: Math.hypot(b0, b1),
    level,
    omegaShift,
  };
}
