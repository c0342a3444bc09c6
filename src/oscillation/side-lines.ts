import { median } from '../numerics/statistics.ts';
import type { Trace } from '../tracking/trace.ts';
import { startAmplitude } from './amplitude.ts';
import { type SideLine, withLine } from './assumptions.ts';
import { motionOf, OMEGA } from './model.ts';
import { integrate } from './motion.ts';
import type { Series } from './series.ts';
import { spectralLines, spectrum } from './spectrum.ts';
import { type PositionMotion, positionMotion, type SwingLine } from './swing.ts';
import { fitTwist, type TwistFit } from './twist-fit.ts';

/** The twist with whatever swings beside it. */
export interface FitWithLines {
  readonly fit: TwistFit;
  /** Lines seen in the position of the bar's middle. */
  readonly swings: readonly SwingLine[];
  /** How far the bar's middle moves at the twist's frequency, over how far the twist moves its end; null where that can't be seen. */
  readonly coherent: { readonly inPhase: number; readonly quadrature: number } | null;
  /** A line found in the angle alone: frequency, and amplitude at time zero in the unit of the angle. */
  readonly angleLine: { readonly frequency_Hz: number; readonly amplitude: number } | null;
}

/** A swing's leak into the angle, as a share of the angle its amplitude would make at the bar's end: tilt of camera and fibre. */
const LEAK_u = 0.05;
/** A swing of less than this share of the twist is none worth mention. */
const FAINT = 0.005;
/** A line of the residuals counts from here on: its height over the median of its surroundings, and the fall of chi-square it brings. */
const HEIGHT = 5;
const EVIDENCE = 30;

/** Adds to a fit the lines that the bar's position shows, then those that the residuals still show (at most two), where they help. */
export function addLines(series: Series, trace: Trace, fit: TwistFit, side: boolean): FitWithLines {
  const motion = side ? null : positionOf(trace, fit);
  const half = trace.halfLength_px;
  const twist = startAmplitude(motionOf(fit.parameters));
  const swings = (motion?.lines ?? []).filter((line) => half === null || line.amplitude_px > FAINT * half * twist);
  let best = fit;
  for (const swing of swings) {
    const u = half !== null && half > 0 ? Math.max(LEAK_u * (swing.amplitude_px / half), 1e-5) : null;
    const line = { frequency_Hz: swing.frequency_Hz, decay_per_s: swing.decay_per_s, held: true, u, u_decay_per_s: 1 };
    best = refit(series, best, line) ?? best;
  }
  let angleLine: FitWithLines['angleLine'] = null;
  for (let round = 0; round < 2; round++) {
    const duration = series.time_s[series.time_s.length - 1]!;
    const frequency = residualLine(best, duration);
    if (frequency === null) break;
    const decay = 0.5 / duration;
    const line = { frequency_Hz: frequency, decay_per_s: decay, held: false, u: null, u_decay_per_s: 2 * decay };
    const next = refit(series, best, line);
    if (next === null || !next.converged || (best.sumOfSquares - next.sumOfSquares) / next.level < EVIDENCE) break;
    const at = next.parameters.length - 4;
    const amplitude = Math.hypot(next.parameters[at]!, next.parameters[at + 1]!);
    const seen = next.parameters[at + 2]! / (2 * Math.PI);
    // A line that has run away to the twist itself or to no frequency at all explains nothing.
    if (!(Math.abs(seen - frequency) * duration < 1)) break;
    best = next;
    if (angleLine === null || amplitude > angleLine.amplitude) angleLine = { frequency_Hz: seen, amplitude };
  }
  const coherent =
    motion === null || half === null || !(half > 0)
      ? null
      : { inPhase: motion.inPhase_px / half, quadrature: motion.quadrature_px / half };
  return { fit: best, swings, coherent, angleLine };
}

function refit(series: Series, fit: TwistFit, line: SideLine): TwistFit | null {
  const { model, start } = withLine({ model: fit.model, start: fit.parameters }, line);
  return fitTwist(series, model, start, fit);
}

function positionOf(trace: Trace, fit: TwistFit): PositionMotion | null {
  const { samples, used } = fit;
  const { twist, later } = motionAt(fit, samples.time_s);
  const keep = (_: number, i: number) => used[i] === 1;
  return positionMotion(samples.time_s, trace.x_px.filter(keep), trace.y_px.filter(keep), twist, later, 2);
}

/** Twist from rest at given times, and a quarter of a cycle later (which is its rate over omega, but for the damping). */
export function motionAt(fit: TwistFit, time_s: Float64Array): { twist: Float64Array; later: Float64Array } {
  const motion = motionOf(fit.parameters);
  const quarter = Math.PI / (2 * motion.omega);
  const twist = new Float64Array(time_s.length);
  const later = new Float64Array(time_s.length);
  integrate(motion, time_s, twist, null);
  integrate(
    motion,
    time_s.map((t) => t + quarter),
    later,
    null,
  );
  return { twist, later };
}

/** Frequency of the strongest line of the residuals that stands out and is neither near the twist, nor a harmonic of it, nor slow wander. */
function residualLine(fit: TwistFit, duration: number): number | null {
  const lines = spectrum(fit.samples.time_s, fit.residual);
  if (lines === null) return null;
  const twist = fit.parameters[OMEGA]! / (2 * Math.PI);
  for (const line of spectralLines(lines, 4)) {
    const f = line.frequency_Hz;
    const near = [1, 2, 3].some((k) => Math.abs(f - k * twist) * duration < 1.5);
    if (near || f * duration < 2.5) continue;
    const bin = Math.round(f / lines.step_Hz);
    const around = lines.amplitude.filter((_, k) => k !== 0 && Math.abs(k - bin) > 1 && Math.abs(k - bin) <= 12);
    if (around.length > 4 && line.amplitude > HEIGHT * median(around)) return f;
  }
  return null;
}
