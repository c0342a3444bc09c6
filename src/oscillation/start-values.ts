import type { Series } from './series.ts';
import { spectralLines, spectrum } from './spectrum.ts';

/** A first guess at the oscillation: everything but frequency and damping by linear least squares. */
export interface StartValues {
  readonly frequency_Hz: number;
  readonly gamma_per_s: number;
  /** Coefficients of exp(-gamma t) cos and exp(-gamma t) sin at 2 pi frequency t. */
  readonly cosine: number;
  readonly sine: number;
  readonly offset: number;
  /** Drift per second about the middle of the series. */
  readonly drift: number;
  readonly sumOfSquares: number;
}

/**
 * First guesses from the strongest lines of the spectrum, best first (least sum of squares). Empty where there are too few
 * samples for any.
 */
export function startCandidates(series: Series, count = 5): StartValues[] {
  const lines = spectrum(series.time_s, series.value);
  if (lines === null) return [];
  return spectralLines(lines, count)
    .map((line) => startAt(series, line.frequency_Hz))
    .filter((start) => start !== null)
    .sort((a, b) => a.sumOfSquares - b.sumOfSquares);
}

/** Rates of decay tried at a start, in units of one over the duration. */
const DECAYS = [0, 1, 3];

/**
 * The best linear fit with a given frequency over a few dampings; null where the columns can't be told apart. By normal equations: the
 * four columns are near enough orthogonal for a start, and it is done often.
 */
export function startAt(series: Series, frequency_Hz: number): StartValues | null {
  const { time_s, value } = series;
  const n = time_s.length;
  const duration = time_s[n - 1]! - time_s[0]!;
  const first = time_s[0]!;
  const omega = 2 * Math.PI * frequency_Hz;
  const level = value[0]!;
  const normals = DECAYS.map(() => new Float64Array(20));
  let square = 0;
  for (let i = 0; i < n; i++) {
    const t = time_s[i]!;
    const c = Math.cos(omega * t);
    const s = Math.sin(omega * t);
    const relative = (t - first) / duration;
    const slope = relative - 0.5;
    const y = value[i]! - level;
    const fall = Math.exp(-relative);
    square += y * y;
    accumulate(normals[0]!, c, s, slope, y);
    accumulate(normals[1]!, c * fall, s * fall, slope, y);
    const steep = fall * fall * fall;
    accumulate(normals[2]!, c * steep, s * steep, slope, y);
  }
  let best: StartValues | null = null;
  for (const [k, normal] of normals.entries()) {
    const solution = solveFour(normal);
    if (solution === null) continue;
    const [cosine, sine, offset, slope] = solution;
    const explained = cosine * normal[16]! + sine * normal[17]! + offset * normal[18]! + slope * normal[19]!;
    const sumOfSquares = Math.max(0, square - explained);
    if (best !== null && sumOfSquares >= best.sumOfSquares) continue;
    const gamma_per_s = DECAYS[k]! / duration;
    const rise = Math.exp(gamma_per_s * first);
    best = {
      frequency_Hz,
      gamma_per_s,
      cosine: cosine * rise,
      sine: sine * rise,
      offset: offset + level,
      drift: slope / duration,
      sumOfSquares,
    };
  }
  return best;
}

/** Adds a row (c, s, 1, slope | y) to the sums of a 4 x 4 normal matrix (0 to 15, upper half) and its right-hand side (16 to 19). */
function accumulate(sum: Float64Array, c: number, s: number, slope: number, y: number): void {
  sum[0] = sum[0]! + c * c;
  sum[1] = sum[1]! + c * s;
  sum[2] = sum[2]! + c;
  sum[3] = sum[3]! + c * slope;
  sum[5] = sum[5]! + s * s;
  sum[6] = sum[6]! + s;
  sum[7] = sum[7]! + s * slope;
  sum[10] = sum[10]! + 1;
  sum[11] = sum[11]! + slope;
  sum[15] = sum[15]! + slope * slope;
  sum[16] = sum[16]! + c * y;
  sum[17] = sum[17]! + s * y;
  sum[18] = sum[18]! + y;
  sum[19] = sum[19]! + slope * y;
}

/** Solves the 4 x 4 normal equations by Cholesky; null where they are singular to rounding. */
function solveFour(sum: Float64Array): [number, number, number, number] | null {
  const l = new Float64Array(16);
  const x = sum.slice(16, 20);
  for (let j = 0; j < 4; j++) {
    for (let i = j; i < 4; i++) {
      let value = sum[j * 4 + i]!;
      for (let k = 0; k < j; k++) value -= l[i * 4 + k]! * l[j * 4 + k]!;
      if (i === j) {
        if (!(value > 1e-10 * sum[j * 5]!)) return null;
        l[j * 5] = Math.sqrt(value);
      } else l[i * 4 + j] = value / l[j * 5]!;
    }
    for (let k = 0; k < j; k++) x[j] = x[j]! - l[j * 4 + k]! * x[k]!;
    x[j] = x[j]! / l[j * 5]!;
  }
  for (let j = 3; j >= 0; j--) {
    for (let i = j + 1; i < 4; i++) x[j] = x[j]! - l[i * 4 + j]! * x[i]!;
    x[j] = x[j]! / l[j * 5]!;
  }
  return [x[0]!, x[1]!, x[2]!, x[3]!];
}
