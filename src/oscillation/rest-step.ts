import { dot, subtract } from '../numerics/dot.ts';
import { orthonormalBasis } from './basis.ts';
import { fitResidualNoise, noiseLevel } from './residual-noise.ts';
import type { TwistFit } from './twist-fit.ts';

/** A step that brings less than this many times the noise near the twist's frequency is none. */
const PLAIN = 10;

/** The place in a segment where a sudden change of the rest direction would explain most. */
export interface RestStep {
  /** Seconds from the first pose. */
  readonly time_s: number;
  /** By how much chi-square falls (one parameter), against the noise at the slowest line. */
  readonly evidence: number;
  /** Size of the change, in the unit of the fit. */
  readonly size: number;
}

/**
 * Looks for a sudden change of the rest direction at any time, the fitted parameters free to follow; all times are tried at once by running
 * sums, `margin_s` is kept from both ends. Null where there is no room, or next to nothing to be found.
 */
export function findRestStep(fit: TwistFit, margin_s: number): RestStep | null {
  const { samples, residual, basis } = fit;
  const clean = residual.slice();
  for (const q of basis.q) subtract(clean, q, dot(clean, q));
  const n = clean.length;
  const end = samples.time_s[n - 1]!;
  const sums = new Float64Array(basis.q.length);
  let sum = 0;
  let best: { at: number; gain: number; size: number } | null = null;
  for (let i = n - 1; i > 0; i--) {
    sum += clean[i]!;
    for (let k = 0; k < sums.length; k++) sums[k] = sums[k]! + basis.q[k]![i]!;
    const t = samples.time_s[i]!;
    if (t < margin_s || t > end - margin_s) continue;
    const left = n - i - dot(sums, sums);
    if (!(left > 1e-3 * (n - i))) continue;
    const gain = (sum * sum) / left;
    if (best === null || gain > best.gain) best = { at: i, gain, size: sum / left };
  }
  if (best === null || !(best.gain > PLAIN * fit.level)) return null;
  // Against the noise there would be without it.
  const step = Float64Array.from(clean, (_, i) => (i < best.at ? 0 : 1));
  const spanned = orthonormalBasis([step], [0], basis.q).q;
  const added = spanned[basis.q.length];
  if (added !== undefined) subtract(clean, added, dot(clean, added));
  const noise = fitResidualNoise(samples.time_s, clean, spanned, fit.noise.step_s);
  const level = Math.max(noiseLevel(noise, 1 / end), 1e-300);
  return { time_s: samples.time_s[best.at]!, evidence: best.gain / level, size: best.size };
}
