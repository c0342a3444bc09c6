import { mean, rootMeanSquare } from '../numerics/statistics.ts';
import type { Trace } from '../tracking/trace.ts';
import { amplitudeAt, frequencyRatio, meanSquareAmplitude, startAmplitude } from './amplitude.ts';
import { angleShape } from './angle-shape.ts';
import { setUp } from './assumptions.ts';
import { type Facts, faults, findings } from './checks.ts';
import { chooseStart } from './choose-start.ts';
import { derived, withRelative } from './derived.ts';
import { findJump } from './jumps.ts';
import { BEND, DRAG, DRIFT, evaluateModel, GAMMA, motionOf, OFFSET, OMEGA, SHARE, SKEW } from './model.ts';
import { uncertaintyOf, withoutPrior } from './parameter-covariance.ts';
import { findRestStep } from './rest-step.ts';
import type { RingDown, RingDownOptions, RingDownOutcome } from './ring-down.ts';
import { foldedFrom, gapRival, mayBeFolded } from './rivals.ts';
import { angleSeries, type Series, sampling } from './series.ts';
import { addLines, type FitWithLines, motionAt } from './side-lines.ts';
import { spectrum } from './spectrum.ts';
import { fitTwist, type TwistFit } from './twist-fit.ts';
import { wanderOfMean, wanderOfMotion } from './wander.ts';
import { compareCrossings, crossings } from './zero-crossings.ts';

/** Fewer poses than this give no ring-down. */
const FEWEST_POSES = 24;
/** An unscaled side view is fitted as if its largest excursion were this angle; the prior on the share says how little that is known. */
const NOMINAL_AMPLITUDE_rad = 0.14;
/** Fall of chi-square by one more parameter that Akaike's criterion asks for, beside the correction for few samples. */
const AIC_PENALTY = 2;
/**
 * A prior further than this many standard uncertainties from what the data say is doubted rather than the data; the share's only where the
 * data know it to within `SHARE_KNOWN_u` and it is off by more than `SHARE_APART`: the rest comes from disturbances, which a prior is there to
 * withstand.
 */
const TENSION = 4;
const SHARE_APART = 0.3;
const SHARE_KNOWN_u = 0.15;
/** An angle that is bent is stretched as well, by its bend times about this angle (as seen under hard shadows in drawn recordings). */
const SCALE_OF_BEND_rad = 0.4;
/**
 * The scale of the angle is not the same at large and small amplitudes: gamma is known to no better than this (as seen in drawn
 * recordings), nor than this many times the share of the third harmonic that the same causes.
 */
const UNEVEN_SCALE = 0.01;
const UNEVEN_BY_CUBIC = 5;

/**
 * Fits the decaying twist of one segment: frequency in the limit of small amplitude, damping, rest direction, each with a standard uncertainty
 * from noise with its correlation, what the fit had to assume, and (for rates) the clock; and says in checks what keeps the numbers
 * from being trusted. Throws RangeError for a trace whose columns don't fit together or whose times don't ascend.
 */
export function fitRingDown(trace: Trace, options: RingDownOptions): RingDownOutcome {
  const raw = angleSeries(trace);
  const poses = raw.time_s.length;
  const refused = trace.refused.length;
  if (poses < FEWEST_POSES) return { ok: false, checks: faults.tooFewPoses(poses, refused) };
  // Pixels are fitted as nominal radians and given back as pixels.
  const scale = trace.unit === 'rad' ? 1 : nominalScale(raw.value);
  const series: Series = { time_s: raw.time_s, value: raw.value.map((v) => scale * v) };
  const { duration_s } = sampling(series);
  const start = chooseStart(series, trace, options.view === 'side');
  if (start === null) return { ok: false, checks: faults.noOscillation() };

  const first = setUp(start, duration_s, options, trace.unit);
  const plain = fitTwist(series, first.model, first.start);
  if (plain === null) return { ok: false, checks: faults.noOscillation() };
  const lined = addLines(series, trace, plain, options.view === 'side');
  const { fit, widened } = withWiderPriors(series, lined.fit);
  const facts = factsOf({ ...lined, fit }, widened, trace, options, 1 / scale);
  const fault = faults.ofFacts(facts);
  if (fault.length > 0) return { ok: false, checks: fault };
  return { ok: true, ringDown: facts.ringDown, checks: findings(facts) };
}

/** What turns pixels into nominal radians: their rms about the mean is that of an oscillation of the nominal amplitude. */
function nominalScale(value: Float64Array): number {
  const middle = mean(value);
  const amplitude = Math.SQRT2 * rootMeanSquare(value.map((v) => v - middle));
  return amplitude > 0 ? NOMINAL_AMPLITUDE_rad / amplitude : 1;
}

/** Whether Akaike's criterion (AICc) prefers a quadratic drag, left to the data alone, to none. Negative drag would drive the bar: no physics. */
function asksForDrag(fit: TwistFit): boolean {
  const prior = fit.model.priors.find((p) => p.parameter === DRAG);
  const free = prior === undefined ? null : withoutPrior(fit, prior);
  const n = fit.residual.length;
  const k = fit.model.fixed.filter((held) => !held).length;
  const correction = (2 * (2 * k + 1)) / Math.max(1, n - k - 2);
  return free !== null && free.value > 0 && (free.value / free.u) ** 2 > AIC_PENALTY + correction;
}

/** Widens priors to what the data say where the two can't both be right, and says which: `SHARE` and `BEND` are told to the user. */
function withWiderPriors(series: Series, fit: TwistFit): { fit: TwistFit; widened: readonly number[] } {
  const widened: number[] = [];
  let bend = 0;
  const wider = fit.model.priors.map((prior) => {
    if (prior.parameter !== SHARE && prior.parameter !== DRAG && prior.parameter !== BEND) return prior;
    const free = withoutPrior(fit, prior);
    const apart = free === null ? 0 : Math.abs(free.value - prior.value);
    if (free === null || apart < TENSION * Math.hypot(free.u, prior.u)) return prior;
    if (prior.parameter === SHARE && (apart < SHARE_APART || free.u > SHARE_KNOWN_u)) return prior;
    if (prior.parameter === BEND) bend = apart;
    widened.push(prior.parameter);
    return { ...prior, u: apart };
  });
  // The effect of the amplitude goes as its square.
  const scale = 2 * SCALE_OF_BEND_rad * bend;
  const priors = wider.map((p) => (p.parameter === SHARE ? { ...p, u: Math.hypot(p.u, scale) } : p));
  const again = widened.length > 0 ? fitTwist(series, { ...fit.model, priors }, fit.parameters, fit) : null;
  return { fit: again ?? fit, widened: again === null ? [] : widened };
}

function factsOf(
  { fit, swings, coherent, angleLine }: FitWithLines,
  widened: readonly number[],
  trace: Trace,
  options: RingDownOptions,
  unitScale: number,
): Facts {
  const { parameters, samples } = fit;
  const motion = motionOf(parameters);
  const raw = angleSeries(trace);
  const rate = sampling(raw);
  const end = raw.time_s[raw.time_s.length - 1]!;
  const dof = Math.max(
    1,
    (fit.residual.length - fit.model.fixed.filter((held) => !held).length) / (1 + fit.noise.coefficients.length),
  );
  const { twist, later } = motionAt(fit, samples.time_s);
  const a0 = startAmplitude(motion);
  const meanSquare = meanSquareAmplitude(motion, a0, end);
  const shape = angleShape(fit, twist);
  const unevenScale = Math.hypot(UNEVEN_SCALE, UNEVEN_BY_CUBIC * shape.cubic);
  const damped = (motion.gamma / motion.omega) ** 2 * unevenScale;
  // The frequency falls with the square of the skew, which derivatives at about no skew miss.
  const skewed = Math.SQRT2 * (5 / 48) * uncertaintyOf(fit, SKEW) ** 2 * meanSquare;
  const seenAt = (p: Float64Array) => {
    const m = motionOf(p);
    return frequencyRatio(m, Math.sqrt(meanSquareAmplitude(m, startAmplitude(m), end)));
  };
  const left = spectrum(samples.time_s, fit.residual);
  const count = fit.residual.length;
  const pushed = left === null ? 0 : wanderOfMotion(left, count, motion.omega / (2 * Math.PI)) / fit.level;
  // What the wander of the motion adds to the uncertainty that noise and priors give.
  const carried = (k: number) =>
    Math.sqrt(Math.max(0, pushed - 1) * fit.inverse[k * (parameters.length + 1)]!) / Math.abs(parameters[k]!);
  // An angle that is off by some share is stretched by about twice as much, which the effect of the amplitude has squared.
  const stretched = 4 * shape.share * (1 / seenAt(parameters) - 1);
  const clocked = (f: (p: Float64Array) => number, ...others: number[]) =>
    withRelative(derived(fit, dof, f), options.u_time_scale, ...others);
  const f0 = clocked((p) => p[OMEGA]! / (2 * Math.PI), damped, skewed, stretched, carried(OMEGA));
  const fd = clocked((p) => (Math.sqrt(Math.max(0, p[OMEGA]! ** 2 - p[GAMMA]! ** 2)) / (2 * Math.PI)) * seenAt(p));
  const gamma = clocked((p) => p[GAMMA]!, unevenScale, carried(GAMMA));
  const rest = derived(fit, dof, (p) => p[OFFSET]! * unitScale);
  const wander = left === null ? 0 : wanderOfMean(left, count, fit.level);
  const period_s = 1 / fd.value;

  const fitted = new Float64Array(raw.time_s.length);
  evaluateModel(fit.model, parameters, raw.time_s, fitted, null);
  for (let i = 0; i < fitted.length; i++) fitted[i] = fitted[i]! * unitScale;
  const swung = samples.value.map((_, i) => twist[i]! * fit.model.blur + fit.residual[i]!);
  const size = (t: number) => amplitudeAt(motion, a0, t);
  const counted = compareCrossings(
    crossings({ time_s: samples.time_s, value: swung }, period_s, size),
    crossings({ time_s: samples.time_s, value: twist }, period_s, size),
    period_s,
  );
  const step = findRestStep(fit, Math.max(period_s, 0.05 * end));
  const half = trace.halfLength_px;
  const swing = swings[0];
  const shareOf = (amplitude: number) => amplitude / a0;
  const ringDown: RingDown = {
    unit: trace.unit,
    f0_Hz: f0,
    fd_Hz: fd,
    gamma_per_s: gamma,
    q:
      gamma.value > 2 * gamma.u
        ? withRelative(
            derived(fit, dof, (p) => p[OMEGA]! / (2 * p[GAMMA]!)),
            unevenScale,
          )
        : null,
    equilibrium: { ...rest, u: Math.hypot(rest.u, wander * unitScale, trace.u_common) },
    amplitudeStart: a0 * unitScale,
    amplitudeEnd: size(end) * unitScale,
    cycles: fd.value * end,
    used: fit.residual.length,
    residualRms: rootMeanSquare(fit.residual) * unitScale,
    crossings_Hz: counted === null ? null : { value: counted.frequency_Hz, u: counted.u_Hz, dof: counted.dof },
    swing:
      swing !== undefined && half !== null
        ? { frequency_Hz: swing.frequency_Hz, share: shareOf(swing.amplitude_px / half) }
        : angleLine !== null && shareOf(angleLine.amplitude) > 0.005
          ? { frequency_Hz: angleLine.frequency_Hz, share: shareOf(angleLine.amplitude) }
          : null,
    amplitudeShift: 1 / seenAt(parameters) - 1,
    quadraticDrag: trace.unit === 'rad' && asksForDrag(fit) ? parameters[DRAG]! : 0,
    fitted,
    residual: fitted.map((value, i) => trace.angle[i]! - value),
    usedRows: fit.used,
  };
  return {
    ringDown,
    options,
    refused: trace.refused.length,
    duration_s: end,
    medianInterval_s: rate.medianInterval_s,
    longestInterval_s: rate.longestInterval_s,
    drift: derived(fit, dof, (p) => p[DRIFT]! * unitScale),
    noiseOnlyU_Hz: derived(fit, dof, (p) => p[OMEGA]! / (2 * Math.PI)).u,
    level: fit.level,
    levelRatio: fit.level / Math.max(rootMeanSquare(fit.residual) ** 2, 1e-300),
    crossings: counted,
    jump: findJump(fit, twist, later, Math.max(period_s, 0.05 * end)),
    restStep: step === null ? null : { ...step, size: step.size * unitScale },
    swings,
    coherent,
    angleLine: angleLine === null ? null : { ...angleLine, amplitude: angleLine.amplitude * unitScale },
    rival_Hz: gapRival(fit),
    folded_Hz: foldedFrom(fit),
    mayBeFolded: mayBeFolded(fit),
    signal: (fit.residual.length * rootMeanSquare(twist) ** 2) / fit.level,
    converged: fit.converged,
    amplitudeLawOdd: widened.includes(SHARE),
    bent: widened.includes(BEND),
    shape,
    pushed,
  };
}
