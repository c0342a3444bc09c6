import { chiSquareProbability } from '../numerics/distributions.ts';
import type { Prior } from '../numerics/least-squares.ts';
import { separatedShare, u_fibreShare, u_twist_rad } from './assumptions.ts';
import type { Turn } from './bar-on-fibre.ts';
import { coarse, type Observations, scaled } from './observations.ts';
import type { FibreKnowledge, ModelKind } from './reduction.ts';
import { fitSweep, type Part, residualsAt, type SweepFit } from './sweep-fit.ts';
import { at, type SweepModel } from './sweep-model.ts';

/** What is known of the fibre beforehand, as its part of f0², Hz². */
export interface KnownFibre {
  readonly value: number;
  readonly u: number;
}

/** A model to be tried: without its priors, which follow from what is known of the fibre. */
export interface Proposal {
  readonly kind: ModelKind;
  readonly turn: Turn;
  readonly signs: Int8Array | null;
  readonly start: Float64Array;
}

/** A proposal fitted with the uncertainties as stated. */
export interface Candidate {
  readonly proposal: Proposal;
  readonly fibre: FibreKnowledge;
  readonly fit: SweepFit;
  /** The reversal where points lie on both sides of it, A; null: all on one side. */
  readonly reversal_A: number | null;
}

/** One way the bench may have been, with the fit that goes with it. */
export interface Scenario {
  readonly turn: Turn;
  /** The field across the axis over the coil constant that this fit was made with, A. */
  readonly across_A: number;
  readonly fit: SweepFit;
  /** Its probability given the data; all of a candidate's add up to 1. */
  readonly weight: number;
}

/** A model with its fit, ready to be compared. */
export interface ScaledCandidate extends Candidate {
  /** The observations with the uncertainties that the scatter asks for; those that `fit` was made with. */
  readonly data: Observations;
  readonly scaleFrequencies: number;
  readonly scaleDirections: number;
  /** Chi-square for the uncertainties as stated. */
  readonly statedChiSquare: number;
  /** Akaike's criterion (lower is better), see `criterionOf`. */
  readonly criterion: number;
  /** What else the bench may have been like, with the fit itself among it; empty: nothing else was looked at. */
  readonly scenarios: readonly Scenario[];
}

/**
 * Fits a proposal. The fibre's part is free where the data separate it from the field, else it is held to what is known or
 * assumed of it. Null where no fit ends.
 */
export function fitProposal(data: Observations, rough: Proposal, known: KnownFibre | null): Candidate | null {
  const proposal = { ...rough, start: approach(data, rough) };
  const candidate = (fibre: FibreKnowledge, fit: SweepFit | null): Candidate | null =>
    fit === null
      ? null
      : { proposal, fibre, fit, reversal_A: reversalWithin(data, fit.model.signs, fit.parameters[at.along]!) };
  if (known !== null) {
    const u = Math.max(known.u, 1e-7 * proposal.start[at.slope]! * Math.abs(proposal.start[at.along]!));
    const prior = { parameter: at.fibre, value: known.value, u };
    return candidate('given', fitSweep(data, modelOf(proposal, [prior]), proposal.start));
  }
  // On one side of a straight line field and fibre are one number: nothing to try.
  if (proposal.signs === null || proposal.signs.some((sign) => sign !== proposal.signs![0])) {
    const free = fitSweep(data, modelOf(proposal, []), proposal.start);
    if (free !== null && isSeparated(data, free)) return candidate('separated', free);
  }
  const held = fitAssumed(data, proposal);
  if (held === null) return null;
  if (uncertainty(held, at.fibre) < 0.5 * separatedShare * fieldTorque(held)) {
    const free = fitSweep(data, modelOf(proposal, []), held.parameters);
    if (free !== null && isSeparated(data, free)) return candidate('separated', free);
  }
  return candidate('assumed', held);
}

/** A better start for models with rest directions or a field across: coarse data, first with the fibre held as it is. */
function approach(data: Observations, proposal: Proposal): Float64Array {
  if (proposal.signs !== null) return proposal.start;
  const blurred = coarse(data);
  const model = modelOf(proposal, []);
  const held = { ...model, fixed: { ...model.fixed, fibre: true, twist: true }, priors: [] };
  const first = fitSweep(blurred, held, proposal.start);
  if (first === null) return proposal.start;
  const torque = Math.max(fieldTorque(first), first.parameters[at.fibre]!);
  const prior = { parameter: at.fibre, value: first.parameters[at.fibre]!, u: 0.2 * torque };
  return fitSweep(blurred, modelOf(proposal, [prior]), first.parameters)?.parameters ?? first.parameters;
}

/** Fits with the fibre held to a small unknown share of the whole torque, which the fit itself may put elsewhere than its start. */
function fitAssumed(data: Observations, proposal: Proposal): SweepFit | null {
  let torque = proposal.start[at.slope]! * Math.abs(proposal.start[at.along]!);
  let start = proposal.start;
  for (let turn = 0; ; turn++) {
    const prior: Prior = { parameter: at.fibre, value: 0, u: u_fibreShare * torque };
    const fit = fitSweep(data, modelOf(proposal, [prior]), start);
    if (fit === null) return null;
    const found = fieldTorque(fit) + fit.parameters[at.fibre]!;
    if (turn === 4 || Math.abs(found / torque - 1) < 0.01) return withoutPush(data, proposal, fit);
    torque = found;
    start = fit.parameters;
  }
}

/** The same model with the vector sum of the fields, the one across held at `across_A`; null where no fit ends. */
export function fitHeld(candidate: ScaledCandidate, turn: Turn, across_A: number): SweepFit | null {
  const { data, fit, fibre } = candidate;
  const start = fit.parameters.slice();
  start[at.across] = across_A;
  start[at.twist] = 0;
  const proposal: Proposal = { kind: 'two branches', turn, signs: null, start };
  const priors = fit.model.priors.filter(({ parameter }) => parameter === at.fibre);
  const held = fitSweep(data, modelOf(proposal, priors), start);
  return held !== null && fibre === 'assumed' ? withoutPush(data, proposal, held) : held;
}

/** A fibre can't push: where the fit makes it do so a little, the values are those without fibre, the uncertainties stay. */
function withoutPush(data: Observations, proposal: Proposal, fit: SweepFit): SweepFit {
  if (fit.parameters[at.fibre]! >= 0) return fit;
  const start = fit.parameters.slice();
  start[at.fibre] = 0;
  const model = modelOf(proposal, []);
  const none = fitSweep(data, { ...model, fixed: { ...model.fixed, fibre: true } }, start);
  if (none === null) return fit;
  const { parameters } = none;
  return { ...fit, parameters, ...residualsAt(data, fit.model, parameters) };
}

function modelOf({ kind, turn, signs }: Proposal, priors: readonly Prior[]): SweepModel {
  const twisted = signs === null && turn !== 'free';
  return {
    turn,
    signs,
    directions: kind === 'turning',
    fixed: { across: kind === 'line' || kind === 'two branches', fibre: false, twist: !twisted },
    priors: twisted ? [...priors, { parameter: at.twist, value: 0, u: u_twist_rad }] : priors,
  };
}

/**
 * Whether the fibre's share came out of the data alone, and as something a fibre can have. On one side of the reversal only the
 * directions' slight lag can tell it, which asks for more; frequencies alone never do there, as any bend would pass for a fibre.
 */
function isSeparated(data: Observations, fit: SweepFit): boolean {
  const u = uncertainty(fit, at.fibre);
  const oneSide = reversalWithin(data, fit.model.signs, fit.parameters[at.along]!) === null;
  if (oneSide && !fit.model.directions) return false;
  const limit = oneSide ? 0.5 * separatedShare : separatedShare;
  return u < limit * fieldTorque(fit) && fit.parameters[at.fibre]! > -2 * u;
}

function uncertainty({ covariance, parameters }: SweepFit, parameter: number): number {
  return Math.sqrt(covariance[parameter * parameters.length + parameter]!);
}

/** Torque of the ambient field over 4 π² J, Hz². */
function fieldTorque({ parameters: p }: SweepFit): number {
  return p[at.slope]! * Math.hypot(p[at.along]!, p[at.across]!);
}

function reversalWithin({ current_A }: Observations, signs: Int8Array | null, along_A: number): number | null {
  const above = (i: number) => (signs === null ? current_A[i]! + along_A > 0 : signs[i]! > 0);
  return current_A.some((_, i) => above(i) !== above(0)) ? -along_A : null;
}

/**
 * Raises the uncertainties of frequencies (with currents) and of directions, each by what its own residuals ask for (Birge's
 * ratio, Phys. Rev. 40 (1932) 207, group by group), where chance would give such scatter less than once in twenty.
 */
export function scaleToScatter(data: Observations, candidate: Candidate): ScaledCandidate {
  let { fit } = candidate;
  let scaleFrequencies = 1;
  let scaleDirections = 1;
  let used = data;
  const refit = (start: SweepFit) => {
    const model = { ...start.model };
    const again = fitSweep(used, model, start.parameters);
    return again !== null && candidate.fibre === 'assumed' ? withoutPush(used, candidate.proposal, again) : again;
  };
  for (let round = 0; round < 8; round++) {
    const frequencies = excess(fit.parts.frequencies);
    const directions = excess(fit.parts.directions);
    if (frequencies < 1.01 && directions < 1.01) break;
    scaleFrequencies *= frequencies;
    scaleDirections *= directions;
    used = scaled(data, scaleFrequencies, scaleDirections);
    const again = refit(fit);
    if (again === null) break;
    fit = again;
  }
  return {
    ...candidate,
    fit,
    data: used,
    scaleFrequencies,
    scaleDirections,
    scenarios: [],
    statedChiSquare: candidate.fit.chiSquare,
    criterion: criterionOf(fit, handicapOf(candidate), data.y.length, scaleFrequencies, scaleDirections),
  };
}

/**
 * Akaike's criterion: -2 log likelihood (up to what all models share) + 2 per parameter; with its small-sample term (Hurvich and
 * Tsai, Biometrika 76 (1989) 297) where the scatter had to be estimated as well, since only then does it apply. A model that
 * leaves less than two degrees of freedom hardly shows whether it is right and starts behind (by common sense, not by theory).
 */
function criterionOf(fit: SweepFit, handicap: number, n: number, frequencies: number, directions: number): number {
  const { free, rows, dof, chiSquare } = fit;
  const scales = 2 * (n * Math.log(frequencies) + (rows - n) * Math.log(directions));
  const estimated = frequencies > 1 || directions > 1;
  const smallSample = estimated ? (2 * free * (free + 1)) / Math.max(rows - free - 1, 1) : 0;
  const unchecked = dof === 0 ? 20 : dof === 1 ? 4 : 0;
  return chiSquare + scales + 2 * free + smallSample + unchecked + handicap;
}

/** On one side of the reversal a field across the axis shows in frequencies alone only as a slight bend, which other things make too. */
function handicapOf({ proposal, reversal_A }: Candidate): number {
  return proposal.kind === 'hyperbola' && reversal_A === null ? 4 : 0;
}

/** Factor by which uncertainties fall short of the scatter; 1 where the scatter may be chance. */
function excess({ chiSquare, dof }: Part): number {
  if (dof < 0.5 || chiSquare <= dof) return 1;
  return 1 - chiSquareProbability(chiSquare, dof) < 0.05 ? Math.sqrt(chiSquare / dof) : 1;
}
