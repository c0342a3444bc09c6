import { blankRest, type Turn, wrappedLine } from './bar-on-fibre.ts';
import { type BranchSplit, branchSplits, isPlausible } from './branch-splits.ts';
import {
  type Candidate,
  fitProposal,
  type KnownFibre,
  type Proposal,
  type ScaledCandidate,
  scaleToScatter,
} from './candidates.ts';
import { withScenarios } from './misalignment-scenarios.ts';
import type { Observations } from './observations.ts';
import { at, predict, type SweepModel } from './sweep-model.ts';

/** The model that the data can carry, and those it was chosen from. */
export interface ModelChoice {
  readonly chosen: ScaledCandidate;
  readonly candidates: readonly ScaledCandidate[];
  /** Rest directions were there but could not be brought together with any model. */
  readonly directionsIgnored: boolean;
}

/** Rest directions further than this from every model are not those of the bar in the field (the camera was moved, say). */
const wildDirection_rad = (2 * Math.PI) / 180;
/** How a fibre can follow a bar that turns round, the usual way first. */
const twoSidedTurns: readonly Turn[] = ['with the field', 'set back', 'against the field'];

/**
 * Fits every model that the data could carry and chooses. Rest directions are used where they exist, since they alone show which
 * way the field is turned; else a plain line or two, unless frequencies alone clearly show the hyperbola of a field component
 * across the coil axis. Null where not even a line can be fitted.
 */
export function chooseModel(data: Observations, known: KnownFibre | null): ModelChoice | null {
  const splits = branchSplits(data);
  if (splits.length === 0) return null;
  const likely = splits.slice(0, 3);
  const hasDirections = data.frame.some((frame) => frame >= 0);
  const turning = hasDirections ? fitTurning(data, likely, known) : [];
  const turned = lowest(turning);
  const usable = turned !== null && directionMiss(turned) < wildDirection_rad;
  const lines = fitAll(
    data,
    likely.map((split) => lineProposal(data, split)),
    known,
  );
  if (usable) return { chosen: turned, candidates: [...turning, ...lines], directionsIgnored: false };
  // Where one straight line does, no turning round need be looked for: only whether the line is a little bent.
  const simple = lines.some((line) => line.reversal_A === null && isAdequate(line));
  const bent = simple ? likely.filter(({ reversal_A }) => reversal_A === null) : likely.slice(0, 2);
  const twisted = simple ? [] : likely.filter(({ reversal_A }) => reversal_A !== null).slice(0, 1);
  const fromFrequencies = [
    ...lines,
    ...fitAll(
      data,
      twisted.map((split) => twistedProposal(data, split)),
      known,
    ),
    ...fitAll(data, bent.flatMap(hyperbolaProposals), known),
  ];
  const best = lowest(fromFrequencies);
  if (best === null) return null;
  const isBent = isPlainlyBent(best);
  const base = isBent ? best : (lowest(fromFrequencies.filter((other) => isStraight(other, best))) ?? best);
  const chosen = withScenarios(base, isBent);
  const candidates = [...fromFrequencies.map((one) => (one === base ? chosen : one)), ...turning];
  return { chosen, candidates, directionsIgnored: hasDirections };
}

/** A field across the axis that frequencies show beyond doubt: its square is known to half its size at least. */
function isPlainlyBent({ proposal, fit }: ScaledCandidate): boolean {
  const across = fit.parameters[at.across]!;
  const u = Math.sqrt(fit.covariance[at.across * fit.parameters.length + at.across]!);
  return proposal.kind === 'hyperbola' && Math.abs(across) > 4 * u;
}

/** Lines or branches with the points on the same sides of the reversal. */
function isStraight(other: ScaledCandidate, than: ScaledCandidate): boolean {
  return other.proposal.kind !== 'hyperbola' && hasSameSides(other, than);
}

function hasSameSides(one: ScaledCandidate, other: ScaledCandidate): boolean {
  const below = ({ data, reversal_A }: ScaledCandidate) =>
    data.current_A.filter((current) => reversal_A !== null && current < reversal_A).length;
  return below(one) === below(other);
}

/**
 * Rest directions with every way the fibre can follow the bar. One side of the reversal is tried first and is enough where it
 * does; else the starts on both sides are tried until one ends well, and from there the other ways once, so that a rival as
 * good would show.
 */
function fitTurning(data: Observations, splits: readonly BranchSplit[], known: KnownFibre | null): ScaledCandidate[] {
  const proposals = (split: BranchSplit) => turningProposals(data, split);
  const oneSide = splits.filter(({ reversal_A }) => reversal_A === null).flatMap(proposals);
  const simple = fitAll(data, oneSide, known);
  if (simple.some(isAdequate)) return simple;
  const tried: Proposal[] = [];
  for (const proposal of splits.filter(({ reversal_A }) => reversal_A !== null).flatMap(proposals)) {
    tried.push(proposal);
    const found = fitProposal(data, proposal, known);
    if (found === null || found.reversal_A === null || !isAdequate(found) || !hasPlausibleSides(data, found)) continue;
    const others = twoSidedTurns.filter((turn) => turn !== proposal.turn);
    const start = found.fit.parameters;
    return [...simple, ...fitAll(data, [proposal, ...others.map((turn) => ({ ...proposal, turn, start }))], known)];
  }
  return [...simple, ...fitAll(data, tried, known)];
}

/** A chi-square, with the uncertainties as stated, that chance gives now and then. */
function isAdequate(candidate: Candidate | ScaledCandidate): boolean {
  const { dof, chiSquare } = candidate.fit;
  const raised = 'scaleFrequencies' in candidate && candidate.scaleFrequencies * candidate.scaleDirections > 1;
  return dof > 0 && !raised && chiSquare < dof + 3 * Math.sqrt(2 * dof);
}

/**
 * Candidates fitted to the same data as the chosen one: with rest directions, or with frequencies alone. Where misalignments are
 * averaged those with the points on the same sides of the reversal are in the average already.
 */
export function rivals({ chosen, candidates }: ModelChoice): ScaledCandidate[] {
  const { directions } = chosen.fit.model;
  const isWithin = (other: ScaledCandidate) => chosen.scenarios.length > 0 && hasSameSides(other, chosen);
  return candidates.filter(
    (other) => other !== chosen && other.fit.model.directions === directions && !isWithin(other),
  );
}

/** The candidate with the lowest criterion; null for none. */
function lowest(candidates: readonly ScaledCandidate[]): ScaledCandidate | null {
  return candidates.reduce<ScaledCandidate | null>(
    (best, c) => (best === null || c.criterion < best.criterion ? c : best),
    null,
  );
}

function lineProposal(data: Observations, split: BranchSplit): Proposal {
  const both = split.reversal_A !== null;
  return {
    kind: both ? 'two branches' : 'line',
    turn: both ? 'set back' : 'free',
    signs: split.signs,
    start: startVector(data, split),
  };
}

/** Two branches with a fibre that is twisted where the bar has turned round. */
function twistedProposal(data: Observations, split: BranchSplit): Proposal {
  return { kind: 'two branches', turn: 'with the field', signs: null, start: startVector(data, split) };
}

function hyperbolaProposals(split: BranchSplit): Proposal[] {
  const turns: Turn[] = split.reversal_A === null ? ['free'] : ['set back', 'with the field'];
  return turns.flatMap((turn) =>
    [0.1, 0.4].map((share) => {
      const start = new Float64Array(at.zeros);
      start.set([split.slope, split.along_A, share * Math.abs(split.along_A), split.fibre_Hz2, 0]);
      return { kind: 'hyperbola' as const, turn, signs: null, start };
    }),
  );
}

function turningProposals(data: Observations, split: BranchSplit): Proposal[] {
  const overtaken = split.along_A * split.signs[0]! < 0;
  const oneSide = split.reversal_A === null;
  const turns: readonly Turn[] = oneSide ? [overtaken ? 'set back' : 'with the field'] : twoSidedTurns;
  const shares = oneSide ? [0.1] : [-0.4, -0.1, 0.1, 0.4];
  // Not from an untwisted fibre: there the twist has no effect and the fit could leave to the side of a negative stiffness.
  const starts = shares.flatMap((share) => (oneSide ? [-0.2, 0.2] : [0]).map((twist) => ({ share, twist })));
  return turns.flatMap((turn) =>
    starts.map(({ share, twist }) => {
      const start = startVector(data, split);
      start[at.across] = share * Math.abs(split.along_A);
      start[at.twist] = twist;
      if (oneSide) start[at.fibre] = 0.05 * split.slope * Math.abs(split.along_A);
      const model: SweepModel = {
        turn,
        signs: null,
        directions: true,
        fixed: { across: false, fibre: false, twist: false },
        priors: [],
      };
      setZeros(data, model, start);
      return { kind: 'turning' as const, turn, signs: null, start };
    }),
  );
}

function startVector(data: Observations, split: BranchSplit): Float64Array {
  const start = new Float64Array(at.zeros + data.frames.length);
  start.set([split.slope, split.along_A, 0, split.fibre_Hz2, 0]);
  return start;
}

/** Puts each zero of directions where the model's rest directions fit best: mean of the doubled angles, as lines have no ends. */
function setZeros(data: Observations, model: SweepModel, start: Float64Array): void {
  const rest = blankRest();
  for (let frame = 0; frame < data.frames.length; frame++) {
    let cos = 0;
    let sin = 0;
    for (let i = 0; i < data.y.length; i++) {
      if (data.frame[i] !== frame || !predict(model, start, i, data.current_A[i]!, rest)) continue;
      // Weighted by the field: strong fields hold the bar near the axis whatever the guess.
      const away = 2 * (data.angle[i]! - rest.angle);
      cos += data.y[i]! * Math.cos(away);
      sin += data.y[i]! * Math.sin(away);
    }
    start[at.zeros + frame] = wrappedLine(Math.atan2(sin, cos) / 2);
  }
}

function fitAll(data: Observations, proposals: readonly Proposal[], known: KnownFibre | null): ScaledCandidate[] {
  const best = new Map<string, Candidate>();
  for (const proposal of proposals) {
    const fitted = fitProposal(data, proposal, known);
    if (fitted === null || !hasPlausibleSides(data, fitted)) continue;
    // Starts from several sides often end in one place: of each kind and side the best is kept.
    const { reversal_A } = fitted;
    if (proposal.kind === 'two branches' && reversal_A === null) continue;
    const below = data.current_A.filter((current) => reversal_A !== null && current < reversal_A).length;
    const key = `${proposal.kind} ${below === 0 ? '' : `${proposal.turn} ${below}`}`;
    const other = best.get(key);
    if (other === undefined || misfit(fitted) < misfit(other)) best.set(key, fitted);
  }
  return [...best.values()].map((candidate) => scaleToScatter(data, candidate));
}

/** Chi-square, with a fibre that pushes instead of pulling put last: that is a second, mirrored minimum. */
function misfit({ fit }: Candidate): number {
  const u = Math.sqrt(fit.covariance[at.fibre * fit.parameters.length + at.fibre]!);
  return fit.chiSquare + 2 * fit.free + (fit.parameters[at.fibre]! < -0.3 * u ? 1000 : 0);
}

function hasPlausibleSides(data: Observations, { fit }: Candidate): boolean {
  const p = fit.parameters;
  const side = (positive: boolean) =>
    new Set(data.current_A.filter((current) => current + p[at.along]! > 0 === positive)).size;
  const share = p[at.fibre]! / (p[at.slope]! * Math.hypot(p[at.along]!, p[at.across]!));
  return isPlausible(Math.min(side(true), side(false)), share);
}

/** Root mean square of the rest directions' residuals, rad. */
function directionMiss({ fit, data }: ScaledCandidate): number {
  let sum = 0;
  let count = 0;
  for (let i = 0; i < data.y.length; i++) {
    if (data.frame[i]! < 0) continue;
    sum += fit.angleResidual[i]! ** 2;
    count++;
  }
  return count > 0 ? Math.sqrt(sum / count) : 0;
}
