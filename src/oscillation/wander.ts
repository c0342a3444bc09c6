import { median } from '../numerics/statistics.ts';
import type { Spectrum } from './spectrum.ts';

/** Lines looked at, in cycles in the whole record off: the fit takes away part of the nearest, and all that is nearer. */
const NEAR = [0.75, 3.5] as const;
/** Where the noise is compared with. */
const FAR = [5.5, 12.5] as const;
/** Noise alone puts less than this times its mean power into so few lines. */
const CHANCE = 2.5;
/** What is nearer than one line can't be seen. Wander is stronger there; for the mean of a record it is taken to be this many times as strong. */
const BELOW_OF_MEAN = 5;
/**
 * The slope of a random walk through n samples has the variance that white noise of n D T / 10 a sample would give it (6/5 D / T), while
 * its lines 1 to 3 hold 0.0115 n D T a sample once a straight line is taken off: this many times less.
 */
const BELOW_OF_SLOPE = 9;

/** Standard uncertainty of the mean of a record of `count` samples from its slow wander, beyond noise of variance `level` per sample. */
export function wanderOfMean(residual: Spectrum, count: number, level: number): number {
  const power = mean(powers(residual, count, 0, NEAR));
  return Math.sqrt((BELOW_OF_MEAN * Math.max(0, power - CHANCE * level)) / count);
}

/**
 * Variance per sample of the white noise that would move an oscillation of `frequency_Hz` as much as the wander of its amplitude and phase
 * seen in the residuals does: draughts and tremors push a bar at random, and it carries each push on. Their lines stand close about the
 * frequency; broader noise counts as none. Zero where there is none.
 */
export function wanderOfMotion(residual: Spectrum, count: number, frequency_Hz: number): number {
  const line = frequency_Hz / residual.step_Hz;
  const far = powers(residual, count, line, FAR);
  const near = powers(residual, count, line, NEAR);
  if (far.length < 3 || near.length < 3) return 0;
  // The median of exponential scatter is ln 2 of its mean.
  const noise = median(far) / Math.LN2;
  const excess = mean(near) - CHANCE * noise;
  return excess > 0 ? noise + BELOW_OF_SLOPE * excess : 0;
}

/** Power of the lines so far from `line`, each as the variance of white noise that would have as much. */
function powers({ amplitude }: Spectrum, count: number, line: number, [from, to]: readonly [number, number]): number[] {
  const found: number[] = [];
  for (let k = Math.max(1, Math.ceil(line - to)); k <= line + to && k < amplitude.length; k++) {
    if (Math.abs(k - line) >= from) found.push((amplitude[k]! ** 2 * count) / 4);
  }
  return found;
}

const mean = (values: readonly number[]) => values.reduce((a, b) => a + b, 0) / Math.max(1, values.length);
