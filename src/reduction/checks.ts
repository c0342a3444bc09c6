import { chiSquareProbability } from '../numerics/distributions.ts';
import type { Check } from '../oscillation/ring-down.ts';
import type { ModelChoice } from './choose-model.ts';
import { turnOf } from './model-summary.ts';
import type { Observations } from './observations.ts';
import type { ExpectedField, FittedPoint, LeaveOneOut, SweepComparison } from './reduction.ts';
import type { ResultValues } from './results.ts';
import * as say from './sentences.ts';
import type { Source, SourceContext } from './sources.ts';
import { fitSweep, type Part } from './sweep-fit.ts';
import { at } from './sweep-model.ts';
import { distinctCurrents, type PointSelection } from './used-points.ts';

/** All that the checks look at. */
export interface Findings {
  readonly selection: PointSelection;
  readonly data: Observations;
  readonly choice: ModelChoice | null;
  readonly context: SourceContext;
  readonly values: ResultValues;
  readonly sources: readonly Source[];
  readonly points: readonly FittedPoint[];
  readonly leave_one_out: readonly LeaveOneOut[];
  readonly sweeps: SweepComparison | null;
  readonly expected_field: ExpectedField | null;
}

/** Judges a reduction: what could not be had and why, and what should not be trusted yet. */
export function checksOf(findings: Findings): Check[] {
  const { choice, context, values, expected_field } = findings;
  const checks = [...missing(findings)];
  if (choice !== null) {
    checks.push(...agreement(findings, choice), ...separation(findings, choice), ...stability(findings));
  }
  const shift = context.coil?.turningShift ?? 0;
  if (choice !== null && Math.abs(shift) > 1e-3) checks.push(say.unevenField(shift));
  const exact = findings.sources.filter(({ u, value, row }) => u === 0 && value !== null && typed(row));
  if (choice !== null && exact.length > 0)
    checks.push(say.exactInputs([...new Set(exact.map(({ row }) => row.replace(', common to all', '')))]));
  if (expected_field !== null) {
    checks.push(say.modelFieldNote(expected_field.horizontal_T, expected_field.measured_less_expected_share));
  }
  return checks.filter((check) => check.code !== 'ambient_opposed' || values.ambient_T !== null);
}

/** Rows that stand for something a user types, and would know the uncertainty of. */
function typed(row: string): boolean {
  return /radius|spacing|mass|length|diameter|width|inertia|coil constant|stiffness|without field|meter’s scale/.test(
    row,
  );
}

function missing({ selection, choice, context, data }: Findings): Check[] {
  const checks: Check[] = [];
  const currents = distinctCurrents(selection.used);
  if (currents < 2) checks.push(say.tooFewCurrents(currents));
  else if (choice === null) checks.push(say.noFit());
  if (context.coil === null) checks.push(say.noCoil());
  if (context.inertia === null) checks.push(say.noMagnet());
  if (choice !== null && selection.doubtfulUsed) {
    checks.push(say.doubtfulUsed(selection.used.filter(({ status }) => status === 'doubtful').map(({ id }) => id)));
  }
  if (choice !== null && data.bare) checks.push(say.noUncertainties());
  return checks;
}

/** Do the points agree with the model and with each other? */
function agreement({ points, sweeps }: Findings, { chosen, directionsIgnored }: ModelChoice): Check[] {
  const checks: Check[] = [];
  const { fit } = chosen;
  if (fit.dof === 0) checks.push(say.noSpareDof(chosen.proposal.kind));
  if (chosen.scaleFrequencies > 1) checks.push(say.scatterAbove(chosen.scaleFrequencies, fit.parts.frequencies.dof));
  if (isTooQuiet(fit.parts.frequencies)) checks.push(say.scatterBelow());
  if (chosen.scaleDirections > 1) checks.push(say.directionsScatter(chosen.scaleDirections));
  if (directionsIgnored) checks.push(say.directionsIgnored());
  const used = points.filter((point) => point.used);
  const limit = outlierLimit(used.length);
  for (const { id, standardised_residual, standardised_equilibrium_residual } of used) {
    const residual = (standardised_residual ?? 0) / chosen.scaleFrequencies;
    if (Math.abs(residual) > limit) checks.push(say.offTheLine(id, residual));
    const direction = (standardised_equilibrium_residual ?? 0) / chosen.scaleDirections;
    if (Math.abs(direction) > limit) checks.push(say.directionOff(id, direction));
  }
  if (sweeps !== null && sweeps.p_value < 0.01) {
    checks.push(say.sweepsDiffer(sweeps.difference_Hz2, sweeps.u_difference_Hz2, sweeps.difference_T));
  }
  return checks;
}

/** A scatter as small as this comes by chance once in a thousand sweeps; not asked of sweeps that are exact to rounding. */
function isTooQuiet({ chiSquare, dof }: Part): boolean {
  return dof > 2 && chiSquare > 1e-9 && chiSquareProbability(chiSquare, dof) < 1e-3;
}

/** A residual is large where fewer than one sweep in about fifty would have one by chance: 3 for ten points, a little more for many. */
function outlierLimit(points: number): number {
  return Math.max(2.5, Math.sqrt(2 * Math.log(Math.max(points, 2) * 15)));
}

/** What of field, fibre and direction could be told apart. */
function separation({ values, data, context }: Findings, { chosen, candidates }: ModelChoice): Check[] {
  const checks: Check[] = [];
  const { kind } = chosen.proposal;
  if (chosen.reversal_A !== null) checks.push(say.reversalBetween(chosen.reversal_A, turnOf(chosen)));
  if (chosen.fit.parameters[at.along]! < 0) checks.push(say.ambientOpposed());
  if (chosen.fibre === 'assumed') checks.push(say.fibreNotSeparated(values.ambient_T));
  if (kind === 'line' || kind === 'two branches') checks.push(say.misalignmentNotSeen());
  if (kind === 'hyperbola') checks.push(say.acrossFromFrequencies());
  const rivals = candidates.filter((other) => other !== chosen && other.proposal.kind === kind);
  for (const rival of rivals) {
    const difference = rival.criterion - chosen.criterion;
    if (difference > 4) continue;
    const moved = sidesDiffer(data, chosen.reversal_A, rival.reversal_A);
    if (moved.length > 0) checks.push(say.branchAmbiguous(moved, difference));
    else if (turnOf(rival) !== turnOf(chosen)) checks.push(say.turnAmbiguous(turnOf(rival), difference));
  }
  const disagreement = givenAgainstFound(chosen, context);
  return disagreement === null ? checks : [...checks, disagreement];
}

/** Points that two candidates put on different sides of the reversal. */
function sidesDiffer(data: Observations, one: number | null, other: number | null): string[] {
  const side = (reversal: number | null, i: number) => reversal !== null && data.current_A[i]! < reversal;
  return data.ids.filter((_, i) => side(one, i) !== side(other, i));
}

/** Where the data separate the fibre by themselves, what is known beforehand can be held against them. */
function givenAgainstFound(chosen: ModelChoice['chosen'], { fibre }: SourceContext): Check | null {
  if (chosen.fibre !== 'given' || fibre === null || chosen.reversal_A === null) return null;
  const model = {
    ...chosen.fit.model,
    priors: chosen.fit.model.priors.filter(({ parameter }) => parameter !== at.fibre),
  };
  const free = fitSweep(chosen.data, model, chosen.fit.parameters);
  if (free === null) return null;
  const found = free.parameters[at.fibre]!;
  const u = Math.hypot(Math.sqrt(free.covariance[at.fibre * free.parameters.length + at.fibre]!), fibre.u);
  return Math.abs(found - fibre.value) > 3 * u ? say.fibreDisagrees(found, fibre.value, u) : null;
}

/** Does the answer hang on one step? */
function stability({ leave_one_out }: Findings): Check[] {
  const worst = leave_one_out.reduce<LeaveOneOut | null>(
    (most, row) => ((row.largest_change_in_u ?? 0) > (most?.largest_change_in_u ?? 0) ? row : most),
    null,
  );
  const moved = worst?.largest_change_in_u ?? 0;
  return worst !== null && leave_one_out.length > 3 && moved > 2 ? [say.hangsOnOne(worst.id, moved)] : [];
}
