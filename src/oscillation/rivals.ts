import { startAmplitude } from './amplitude.ts';
import { motionOf, OMEGA } from './model.ts';
import { type Series, sampling } from './series.ts';
import { startAt } from './start-values.ts';
import type { TwistFit } from './twist-fit.ts';

/** A frequency that a linear fit finds nearly as good as the fitted one must leave less than this times its sum of squares. */
const NEARLY = 1.3;
/** A folded frequency must leave less than this times the sum of squares of the one seen. */
const FAR_BETTER = 0.7;

/**
 * Another frequency, within reach of the count of swings across the longest gap, that explains the samples nearly as well as the fitted one;
 * null where there is none, or no gap of half a cycle or more.
 */
export function gapRival(fit: TwistFit): number | null {
  const { samples } = fit;
  const { longestInterval_s, duration_s } = sampling(samples);
  const frequency = fit.parameters[OMEGA]! / (2 * Math.PI);
  if (longestInterval_s * frequency < 0.5) return null;
  const at = samples.time_s.findIndex((t, i) => i > 0 && t - samples.time_s[i - 1]! === longestInterval_s);
  // The two sides' middles are this far apart; one swing more or less between them moves the frequency by its inverse.
  const before = samples.time_s[at - 1]! / 2;
  const after = (samples.time_s[at]! + duration_s) / 2;
  const spacing = 1 / (after - before);
  const here = startAt(samples, frequency)?.sumOfSquares ?? 0;
  for (const k of [-2, -1, 1, 2]) {
    let best = Number.POSITIVE_INFINITY;
    let where = 0;
    for (let j = -3; j <= 3; j++) {
      const f = frequency + (k + j / 8) * spacing;
      const sum = f > 0 ? (startAt(samples, f)?.sumOfSquares ?? Number.POSITIVE_INFINITY) : Number.POSITIVE_INFINITY;
      if (sum < best) [best, where] = [sum, f];
    }
    if (best < NEARLY * here) return where;
  }
  return null;
}

/**
 * A frequency folded about half the frame rate into the fitted one, where the uneven times tell the two apart and prefer the
 * faster; null where there is none.
 */
export function foldedFrom(fit: TwistFit): number | null {
  const { samples } = fit;
  const rate = 1 / sampling(samples).medianInterval_s;
  const frequency = fit.parameters[OMEGA]! / (2 * Math.PI);
  if (frequency * 8 < rate) {
    // What a slow curve would miss of a folded motion, since the frames don't come evenly: if it misses far less there is none, and where
    // that is next to nothing the two can't be told apart.
    const missed = (unevenness(samples) * samples.time_s.length * startAmplitude(motionOf(fit.parameters)) ** 2) / 4;
    if (fit.sumOfSquares < 0.1 * missed || missed < 0.2 * fit.sumOfSquares) return null;
  }
  const here = search(samples, frequency);
  if (here === null) return null;
  for (const f of [rate - frequency, rate + frequency]) {
    const there = search(samples, f);
    if (there !== null && there.sum < FAR_BETTER * here.sum) return there.frequency;
  }
  return null;
}

/** Mean square by which the phase of a motion at the frame rate jumps from frame to frame, halved; at most 1. */
function unevenness(series: Series): number {
  const { medianInterval_s } = sampling(series);
  let sum = 0;
  for (let i = 1; i < series.time_s.length; i++) {
    const frames = (series.time_s[i]! - series.time_s[i - 1]!) / medianInterval_s;
    sum += (2 * Math.PI * (frames - Math.round(frames))) ** 2;
  }
  return Math.min(1, sum / (2 * (series.time_s.length - 1)));
}

/** From this share of the frame rate on a motion folded about half of it is as likely as one that isn't (common practice). */
const FAST = 0.25;
/** A folded frequency is ruled out where it leaves more than this times the sum of squares of the one seen. */
const FAR_WORSE = 1.5;

/** Whether a fast motion may as well be a faster one folded about half the frame rate: the frame times are too even to rule it out. */
export function mayBeFolded(fit: TwistFit): boolean {
  const { samples } = fit;
  const rate = 1 / sampling(samples).medianInterval_s;
  const frequency = fit.parameters[OMEGA]! / (2 * Math.PI);
  if (frequency < FAST * rate) return false;
  const here = search(samples, frequency);
  const there = search(samples, rate - frequency);
  return here === null || there === null || there.sum < FAR_WORSE * here.sum;
}

/** The best plain damped sine within three lines of the spectrum about `centre`. */
function search(series: Series, centre: number): { frequency: number; sum: number } | null {
  const duration = series.time_s[series.time_s.length - 1]!;
  let best: { frequency: number; sum: number } | null = null;
  for (let j = -8; j <= 8; j++) {
    const frequency = centre + (j * 0.35) / duration;
    const sum = startAt(series, frequency)?.sumOfSquares;
    if (sum !== undefined && (best === null || sum < best.sum)) best = { frequency, sum };
  }
  return best;
}
