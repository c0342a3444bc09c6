import type { Estimate } from '../numerics/estimate.ts';
import type { AngleShape } from './angle-shape.ts';
import type { Jump } from './jumps.ts';
import type { RestStep } from './rest-step.ts';
import type { Check, RingDown, RingDownOptions, Severity } from './ring-down.ts';
import { type RingDownCode, SENTENCES } from './sentences.ts';
import type { SwingLine } from './swing.ts';
import type { CrossingResult } from './zero-crossings.ts';

/** What the checks judge: the ring-down and what was seen on the way to it. Angles in the trace's unit. */
export interface Facts {
  readonly ringDown: RingDown;
  readonly options: RingDownOptions;
  readonly refused: number;
  readonly duration_s: number;
  readonly medianInterval_s: number;
  readonly longestInterval_s: number;
  /** Drift of the rest direction per second. */
  readonly drift: Estimate;
  /** Standard uncertainty of f0 without the clock. */
  readonly noiseOnlyU_Hz: number;
  /** Variance per sample of the noise near the twist's frequency. */
  readonly level: number;
  /** Noise near the twist's frequency over the mean square of the residuals: 1 for white noise. */
  readonly levelRatio: number;
  readonly crossings: CrossingResult | null;
  readonly jump: Jump | null;
  readonly restStep: RestStep | null;
  readonly swings: readonly SwingLine[];
  /** Motion of the bar's middle at the twist's own frequency over the twist's motion of the end, in step with it and a quarter cycle off. */
  readonly coherent: { readonly inPhase: number; readonly quadrature: number } | null;
  readonly angleLine: { readonly frequency_Hz: number; readonly amplitude: number } | null;
  /** Another frequency that fits nearly as well, null where there is none. */
  readonly rival_Hz: number | null;
  /** A frequency above half the frame rate that fits the uneven frame times better, null where there is none. */
  readonly folded_Hz: number | null;
  /** The motion is so fast that it may be folded, and the frame times don't rule it out. */
  readonly mayBeFolded: boolean;
  /** Energy of the twist over the noise: its mean square times the number of samples over the noise variance. */
  readonly signal: number;
  readonly converged: boolean;
  /** The frequency follows the amplitude otherwise than was assumed, beyond doubt. */
  readonly amplitudeLawOdd: boolean;
  /** The angle followed is bent far more than usual. */
  readonly bent: boolean;
  readonly shape: AngleShape;
  /** Noise that would move the twist as much as the wander of its amplitude and phase, over the noise near its frequency. */
  readonly pushed: number;
}

function check<C extends RingDownCode>(
  code: C,
  severity: Severity,
  facts: Parameters<(typeof SENTENCES)[C]>[0],
): Check {
  // Each sentence takes its own facts; the table's union can't be called without saying so.
  const sentence = SENTENCES[code] as (f: Parameters<(typeof SENTENCES)[C]>[0]) => string;
  return { code, severity, message: sentence(facts) };
}

const DEG = Math.PI / 180;
/** Fewer cycles than this give no frequency; fewer than the second number one to be doubted. */
const FEWEST_CYCLES = 2.5;
const FEW_CYCLES = 3.5;
/** A frequency less well known than this, relative, is as good as unknown; where a jump is the reason, saying so helps more. */
const LARGEST_u = 0.02;
const LARGEST_JUMPED_u = 0.2;
/** From here on the user is told of it. */
const PUSHED = 9;
/** Below this quality factor the amplitude falls to a third in two to three cycles, and what is left is of the size of the angle's errors. */
const LOWEST_Q = 8;

/** Faults that leave a segment unmeasured. */
export const faults = {
  tooFewPoses: (poses: number, refused: number): Check[] => [check('too_few_poses', 'fault', { poses, refused })],
  noOscillation: (): Check[] => [check('no_oscillation', 'fault', undefined)],
  ofFacts(facts: Facts): Check[] {
    const { ringDown } = facts;
    const u = ringDown.f0_Hz.u / ringDown.f0_Hz.value;
    if (!facts.converged || !Number.isFinite(u)) return [check('fit_failed', 'fault', undefined)];
    const { jump } = facts;
    const jumped = jump !== null && isJump(facts, jump) ? [check('jump', 'fault', sizeAndTime(jump))] : [];
    if (!(facts.signal > 60)) return jumped.length > 0 ? jumped : faults.noOscillation();
    if (ringDown.cycles < FEWEST_CYCLES) return [check('too_few_cycles', 'fault', { cycles: ringDown.cycles })];
    if (jumped.length > 0) return u > LARGEST_JUMPED_u ? jumped : [];
    if (u > LARGEST_u) return [check('not_determined', 'fault', { relative: u })];
    return [];
  },
};

/** Notes and doubts about a segment that has been measured. */
export function findings(facts: Facts): Check[] {
  return [...sampled(facts), ...disturbed(facts), ...moved(facts), ...judged(facts)];
}

/** How it was filmed. */
function sampled(facts: Facts): Check[] {
  const { ringDown, options } = facts;
  const out: Check[] = [];
  const frequency_Hz = ringDown.fd_Hz.value;
  const rate_Hz = 1 / facts.medianInterval_s;
  if (facts.folded_Hz !== null) {
    out.push(check('folded_frequency', 'doubt', { frequency_Hz, other_Hz: facts.folded_Hz }));
  } else if (frequency_Hz > 0.4 * rate_Hz || facts.mayBeFolded) {
    out.push(check('near_half_frame_rate', 'doubt', { frequency_Hz, rate_Hz }));
  } else if (frequency_Hz > 0.2 * rate_Hz) {
    out.push(check('few_frames_per_cycle', 'note', { frequency_Hz, rate_Hz }));
  }
  const gapCycles = facts.longestInterval_s * frequency_Hz;
  if (facts.rival_Hz !== null) {
    out.push(check('ambiguous_frequency', 'doubt', { frequency_Hz, other_Hz: facts.rival_Hz }));
  } else if (gapCycles > 0.75) {
    out.push(check('long_gap', 'note', { gap_s: facts.longestInterval_s, cycles: gapCycles }));
  }
  const facing = options.facing_rad ?? null;
  if (options.view === 'side' && facing !== null && Math.abs(facing) > 65 * DEG) {
    out.push(check('broadside_view', 'doubt', { facing_deg: facing / DEG }));
  }
  if (ringDown.unit === 'px') out.push(check('unscaled_view', 'doubt', undefined));
  const frames = ringDown.usedRows.length + facts.refused;
  if (facts.refused > 0.1 * frames) {
    out.push(check('bad_poses', facts.refused > 0.4 * frames ? 'doubt' : 'note', { refused: facts.refused, frames }));
  }
  const count = ringDown.usedRows.length - ringDown.used;
  if (count > 0.01 * ringDown.usedRows.length) {
    const severity = count > 0.1 * ringDown.usedRows.length ? 'doubt' : 'note';
    out.push(check('outliers', severity, { count, poses: ringDown.usedRows.length }));
  }
  return out;
}

/** What else moved. */
function disturbed(facts: Facts): Check[] {
  const { ringDown, jump } = facts;
  const out: Check[] = [];
  const step = facts.restStep;
  if (jump !== null && isJump(facts, jump)) out.push(check('jump', 'doubt', sizeAndTime(jump)));
  else if (step !== null && isRestStep(facts, step)) {
    out.push(check('rest_jumps', 'doubt', { time_s: step.time_s, size: Math.abs(step.size), unit: ringDown.unit }));
  }
  const twist_Hz = ringDown.fd_Hz.value;
  const swing = ringDown.swing;
  const closest = facts.swings
    .map((line) => line.frequency_Hz)
    .sort((a, b) => Math.abs(a - twist_Hz) - Math.abs(b - twist_Hz))[0];
  const coherent = facts.coherent;
  if (coherent !== null && (coherent.quadrature > 0.1 || coherent.inPhase > 0.35)) {
    out.push(check('swing_with_twist', 'doubt', { twist_Hz }));
  } else if (
    closest !== undefined &&
    swing !== null &&
    swing.share > 0.05 &&
    Math.abs(closest - twist_Hz) * facts.duration_s < 0.8
  ) {
    out.push(check('swing_close', 'doubt', { frequency_Hz: closest, twist_Hz, share: swing.share }));
  } else if (facts.angleLine !== null && facts.angleLine.amplitude > 0.5 * ringDown.amplitudeStart) {
    const share = facts.angleLine.amplitude / ringDown.amplitudeStart;
    out.push(check('second_line', 'doubt', { frequency_Hz: facts.angleLine.frequency_Hz, share }));
  } else if (swing !== null && swing.share > 0.01) {
    out.push(check('swing_seen', 'note', { frequency_Hz: swing.frequency_Hz, share: swing.share }));
  }
  return out;
}

function sizeAndTime({ time_s, size }: Jump): { time_s: number; size: number } {
  return { time_s, size };
}

/** A jump counts where it can't be chance and either is large or would move the frequency by more than its uncertainty. */
function isJump(facts: Facts, jump: Jump): boolean {
  if (!(jump.evidence > 30)) return false;
  const shift_Hz = Math.abs(jump.omegaShift) / (2 * Math.PI);
  // The uncertainty there would be without the jump's own part in the residuals.
  const u_Hz = facts.noiseOnlyU_Hz * Math.sqrt(Math.min(1, jump.level / facts.level));
  return jump.size > 0.05 || (jump.size > 0.005 && shift_Hz > 1.5 * u_Hz);
}

/** A step of the rest direction shifts the motion about it as suddenly; it counts where that would move the frequency beyond its uncertainty. */
function isRestStep({ ringDown, noiseOnlyU_Hz }: Facts, step: RestStep): boolean {
  const smaller = Math.min(ringDown.amplitudeStart, ringDown.amplitudeEnd);
  // A phase that jumps in the middle of a record tilts it by 1.5 times the jump over its length.
  const shift_Hz = ((1.5 * Math.abs(step.size)) / (smaller * 2 * Math.PI * ringDown.cycles)) * ringDown.fd_Hz.value;
  return step.evidence > 45 && shift_Hz > 1.5 * noiseOnlyU_Hz;
}

/** How the bar moved. */
function moved(facts: Facts): Check[] {
  const { ringDown } = facts;
  const { unit, amplitudeStart, amplitudeEnd } = ringDown;
  const out: Check[] = [];
  if (unit === 'rad') {
    if (amplitudeStart > 45 * DEG) out.push(check('amplitude_extreme', 'doubt', { amplitude: amplitudeStart }));
    else if (ringDown.amplitudeShift > 2e-3) {
      out.push(check('amplitude_large', 'note', { amplitude: amplitudeStart, shift: ringDown.amplitudeShift }));
    }
  }
  if (facts.bent || (facts.shape.share > 0.008 && facts.shape.evidence > 40)) {
    out.push(check('angle_distorted', 'doubt', undefined));
  }
  const q = (Math.PI * ringDown.f0_Hz.value) / Math.max(ringDown.gamma_per_s.value, 1e-300);
  if (q < LOWEST_Q) out.push(check('heavily_damped', 'doubt', { q, cycles: q / Math.PI }));
  if (facts.amplitudeLawOdd && unit === 'rad') out.push(check('amplitude_law_odd', 'note', undefined));
  if (ringDown.quadraticDrag > 0) {
    // Loss per second by the drag that grows with speed, averaged over a cycle: 4 drag omega a / (3 pi).
    const quadratic = (8 / 3) * ringDown.quadraticDrag * ringDown.fd_Hz.value * amplitudeStart;
    const share = quadratic / (quadratic + Math.max(ringDown.gamma_per_s.value, 0));
    if (share > 0.05) out.push(check('drag_quadratic', 'note', { share }));
  }
  const growth = Math.log(amplitudeEnd / amplitudeStart);
  if (growth > 0.02 && -ringDown.gamma_per_s.value > 3 * ringDown.gamma_per_s.u) {
    out.push(check('amplitude_grows', 'doubt', { start: amplitudeStart, end: amplitudeEnd, unit }));
  }
  const drift = Math.abs(facts.drift.value) * facts.duration_s;
  const significant = Math.abs(facts.drift.value) > 4 * facts.drift.u;
  if (significant && drift > 0.03 * amplitudeStart) {
    out.push(check('rest_drifts', drift > 0.3 * amplitudeStart ? 'doubt' : 'note', { drift, unit }));
  }
  return out;
}

/** How far the numbers carry. */
function judged(facts: Facts): Check[] {
  const { ringDown, options, crossings } = facts;
  const out: Check[] = [];
  if (ringDown.cycles < FEW_CYCLES) out.push(check('too_few_cycles', 'doubt', { cycles: ringDown.cycles }));
  if (crossings !== null) {
    const difference = Math.abs(crossings.frequency_Hz - crossings.model_Hz);
    if (difference > 5 * Math.hypot(crossings.u_Hz, facts.noiseOnlyU_Hz) && difference > 1e-5 * crossings.model_Hz) {
      const facts = { counted_Hz: crossings.frequency_Hz, fitted_Hz: crossings.model_Hz };
      out.push(check('crossings_disagree', 'doubt', facts));
    }
  }
  const amplitude = Math.sqrt((ringDown.amplitudeStart ** 2 + ringDown.amplitudeEnd ** 2) / 2);
  if (ringDown.residualRms > 0.15 * amplitude) {
    const facts = { rms: ringDown.residualRms, amplitude, unit: ringDown.unit };
    out.push(check('residuals_not_noise', 'doubt', facts));
  } else if (facts.pushed > PUSHED) {
    out.push(check('pushed_about', 'note', { factor: Math.sqrt(facts.pushed) }));
  } else if (facts.levelRatio > 4) {
    out.push(check('residuals_correlated', 'note', { factor: Math.sqrt(facts.levelRatio) }));
  }
  const relative = ringDown.f0_Hz.u / ringDown.f0_Hz.value;
  if (relative > 5e-3) out.push(check('imprecise', 'doubt', { relative }));
  if (options.u_time_scale > Math.SQRT1_2 * relative) {
    out.push(check('clock_unverified', 'note', { relative: options.u_time_scale }));
  }
  return out;
}

/** The contract's status from the checks: any fault leaves a segment unmeasured, any doubt makes it doubtful. */
export function statusOf(checks: readonly Check[]): 'measured' | 'doubtful' | 'unmeasured' {
  if (checks.some((c) => c.severity === 'fault')) return 'unmeasured';
  return checks.some((c) => c.severity === 'doubt') ? 'doubtful' : 'measured';
}
