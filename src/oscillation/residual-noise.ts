import { dot } from '../numerics/dot.ts';

/**
 * Residuals as an autoregressive process on the grid of frames: e[k] = sum of coefficient j times e[k - j] + innovation.
 * White noise has order 0.
 */
export interface ResidualNoise {
  readonly coefficients: Float64Array;
  /** Variance of the innovation, corrected for what the fit has absorbed. */
  readonly innovation: number;
  /** Place of every row on the grid of frames, counted from 0 in steps of the median interval. */
  readonly slot: Int32Array;
  readonly step_s: number;
}

/** Order never beyond this: a line that needs more is a motion of its own, not noise. */
const HIGHEST_ORDER = 24;
/** Missing frames beyond this many in a row are cut short on the grid: noise remembers no longer. */
const LONGEST_GAP = 100;

/**
 * Fits an autoregressive process to residuals at ascending times (uneven ones fall on the nearest slot of a grid of steps of
 * `step_s`, the median interval; a missing frame is an empty slot). Yule-Walker on the autocovariances of the pairs that exist, order
 * by Akaike's criterion with the correction for small samples (Hurvich and Tsai 1989, Biometrika 76, 297).
 *
 * `absorbed` are orthonormal directions along which the fit has taken the noise away, all near the twist's frequency and near none. The
 * autocovariance they would have had under the noise found is added back (twice, from white noise on), or the
 * spectrum would have a hole just where it is needed.
 */
export function fitResidualNoise(
  time_s: Float64Array,
  residual: Float64Array,
  absorbed: readonly Float64Array[],
  step_s: number,
): ResidualNoise {
  const n = residual.length;
  const slot = slots(time_s, step_s);
  const highest = Math.max(0, Math.min(HIGHEST_ORDER, Math.floor(n / 12)));
  const pairs = countPairs(slot, highest);
  const seen = autocovariance(residual, slot, highest, pairs);
  const missing = absorbed.map((q) => autocovariance(q, slot, highest, pairs));
  let variances = absorbed.map(() => dot(residual, residual) / Math.max(1, n - absorbed.length));
  let noise: ResidualNoise = { coefficients: new Float64Array(0), innovation: 0, slot, step_s };
  for (let round = 0; round < 3; round++) {
    const covariance = seen.map((value, lag) => missing.reduce((sum, m, k) => sum + variances[k]! * m[lag]!, value));
    noise = { ...autoregression(covariance, n), slot, step_s };
    if (noise.coefficients.length === 0 || round === 2) break;
    const lambda = combinationCovariance(noise, absorbed);
    variances = absorbed.map((_, k) => lambda[k * absorbed.length + k]!);
  }
  return noise;
}

/** Levinson-Durbin recursion with the order chosen by AICc for `n` samples. */
function autoregression(covariance: Float64Array, n: number): { coefficients: Float64Array; innovation: number } {
  let variance = covariance[0]!;
  let current = new Float64Array(0);
  let best = { coefficients: current, innovation: variance };
  let bestScore = n * Math.log(variance);
  for (let p = 1; p < covariance.length && variance > 0; p++) {
    let sum = covariance[p]!;
    for (let j = 0; j < p - 1; j++) sum -= current[j]! * covariance[p - 1 - j]!;
    const reflection = sum / variance;
    if (!(Math.abs(reflection) < 1)) break;
    const next = new Float64Array(p);
    for (let j = 0; j < p - 1; j++) next[j] = current[j]! - reflection * current[p - 2 - j]!;
    next[p - 1] = reflection;
    variance *= 1 - reflection * reflection;
    current = next;
    const score = n * Math.log(variance) + (2 * p * n) / Math.max(1, n - p - 2);
    if (score < bestScore - 1e-9) {
      bestScore = score;
      best = { coefficients: current, innovation: variance };
    }
  }
  return best;
}

/** Variance a sample would have if the noise were white and as strong everywhere as it is at `frequency_Hz`. */
export function noiseLevel({ coefficients, innovation, step_s }: ResidualNoise, frequency_Hz: number): number {
  const phase = 2 * Math.PI * frequency_Hz * step_s;
  let re = 1;
  let im = 0;
  coefficients.forEach((c, j) => {
    re -= c * Math.cos((j + 1) * phase);
    im += c * Math.sin((j + 1) * phase);
  });
  return innovation / (re * re + im * im);
}

/**
 * Covariance of linear combinations of the residuals: column k of `weights` (one entry a row) gives combination k. With the noise
 * as innovations passed through 1/A, the covariance is W' R W = innovation |A^-T W|²; the transposed filter runs backwards.
 */
export function combinationCovariance(noise: ResidualNoise, weights: readonly Float64Array[]): Float64Array {
  const { coefficients, innovation, slot } = noise;
  const size = (slot[slot.length - 1] ?? -1) + 1;
  const order = coefficients.length;
  const filtered = weights.map((column) => {
    if (order === 0) return column;
    const out = onGrid(column, slot, size);
    for (let k = size - 1; k >= 0; k--) {
      let sum = out[k]!;
      for (let j = 1; j <= order && k + j < size; j++) sum += coefficients[j - 1]! * out[k + j]!;
      out[k] = sum;
    }
    return out;
  });
  const n = weights.length;
  const covariance = new Float64Array(n * n);
  for (let a = 0; a < n; a++) {
    for (let b = a; b < n; b++) {
      const sum = dot(filtered[a]!, filtered[b]!);
      covariance[a * n + b] = innovation * sum;
      covariance[b * n + a] = innovation * sum;
    }
  }
  return covariance;
}

/** Values on the grid of frames, zero where a frame is missing. */
function onGrid(value: Float64Array, slot: Int32Array, size: number): Float64Array {
  const grid = new Float64Array(size);
  for (let i = 0; i < slot.length; i++) grid[slot[i]!] = value[i]!;
  return grid;
}

function slots(time_s: Float64Array, step_s: number): Int32Array {
  const slot = new Int32Array(time_s.length);
  for (let i = 1; i < time_s.length; i++) {
    const steps = Math.max(1, Math.round((time_s[i]! - time_s[i - 1]!) / step_s));
    slot[i] = slot[i - 1]! + Math.min(steps, LONGEST_GAP);
  }
  return slot;
}

/** How many pairs of rows lie 0, 1, ... `highest` slots apart. */
function countPairs(slot: Int32Array, highest: number): Float64Array {
  const pairs = new Float64Array(highest + 1);
  for (let i = 0; i < slot.length; i++) {
    for (let j = i; j < slot.length && slot[j]! - slot[i]! <= highest; j++) {
      pairs[slot[j]! - slot[i]!] = pairs[slot[j]! - slot[i]!]! + 1;
    }
  }
  return pairs;
}

/** Mean products over the existing pairs, tapered like the biased estimate, which keeps the sequence positive definite where no frame is missing. */
function autocovariance(value: Float64Array, slot: Int32Array, highest: number, pairs: Float64Array): Float64Array {
  const size = slot[slot.length - 1]! + 1;
  const grid = size === value.length ? value : onGrid(value, slot, size);
  const covariance = new Float64Array(highest + 1);
  for (let lag = 0; lag <= highest; lag++) {
    let sum = 0;
    for (let k = lag; k < size; k++) sum += grid[k]! * grid[k - lag]!;
    covariance[lag] = pairs[lag]! > 0 ? (sum / pairs[lag]!) * (1 - lag / size) : 0;
  }
  return covariance;
}
