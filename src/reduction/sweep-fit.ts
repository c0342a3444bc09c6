import { leastSquares, type Prior } from '../numerics/least-squares.ts';
import { blankRest, wrappedLine } from './bar-on-fibre.ts';
import { fitCoordinates } from './fit-coordinates.ts';
import type { Observations } from './observations.ts';
import { at, predict, type SweepModel } from './sweep-model.ts';
import { WhitenedSweep } from './whitened-sweep.ts';

/** A fitted model. Parameters in the order of `at`. */
export interface SweepFit extends Residuals {
  readonly model: SweepModel;
  readonly parameters: Float64Array;
  /** Of the parameters for the uncertainties as stated, row by row. */
  readonly covariance: Float64Array;
  readonly chiSquare: number;
  readonly dof: number;
  /** Free parameters without knowledge from elsewhere. */
  readonly free: number;
  /** Observations fitted, priors not counted. */
  readonly rows: number;
  /** Squared standardised residuals of frequencies and of directions apart, and the degrees of freedom each has. */
  readonly parts: { readonly frequencies: Part; readonly directions: Part };
  readonly gain: Gains;
}

/** Measured less fitted at the measured currents (Hz², rad; 0 where there is no direction), plain and over their u. */
export interface Residuals {
  readonly residual: Float64Array;
  readonly standardised: Float64Array;
  readonly angleResidual: Float64Array;
  readonly standardisedAngle: Float64Array;
}

/** Chi-square of some of the observations, and the degrees of freedom that are theirs (not a whole number). */
export interface Part {
  readonly chiSquare: number;
  readonly dof: number;
}

/** Change of each parameter (one column each) per change of each observation, and of each prior in the model's order. */
export interface Gains {
  readonly y: readonly Float64Array[];
  readonly current: readonly Float64Array[];
  readonly angle: readonly Float64Array[];
  readonly prior: readonly Float64Array[];
}

/**
 * Fits a model to f0² and (where the model has them) rest directions, with uncertainties in both and in the current. Null where
 * the fit doesn't end or the data don't determine the parameters.
 */
export function fitSweep(data: Observations, model: SweepModel, start: Float64Array): SweepFit | null {
  const sweep = new WhitenedSweep(data, model);
  const coordinates = fitCoordinates(model.fixed.across);
  const seen = new Set(sweep.directed.map((i) => at.zeros + data.frame[i]!));
  const fixed = Array.from(start, (_, k) => {
    if (k >= at.zeros) return !seen.has(k);
    return k === at.across
      ? model.fixed.across
      : k === at.fibre
        ? model.fixed.fibre
        : k === at.twist && model.fixed.twist;
  });
  const priors = model.priors.filter((prior) => !fixed[prior.parameter]);
  if (sweep.rows + priors.length < fixed.filter((held) => !held).length) return null;
  const fit = leastSquares(
    {
      rows: sweep.rows,
      evaluate(v, residual, jacobian) {
        const p = coordinates.toPhysical(v);
        if (!sweep.evaluate(p, residual, jacobian)) return false;
        coordinates.turnColumns(p, jacobian);
        return true;
      },
    },
    coordinates.fromPhysical(start),
    { fixed, priors, maxEvaluations: 100 },
  );
  if (fit.covariance === null || (fit.status !== 'converged' && fit.status !== 'stalled')) return null;
  const parameters = coordinates.toPhysical(fit.parameters);
  for (let k = at.zeros; k < parameters.length; k++) parameters[k] = wrappedLine(parameters[k]!);
  const covariance = coordinates.physicalCovariance(parameters, fit.covariance);
  if (!covariance.every(Number.isFinite)) return null;
  // Once more at the end, in the physical parameters: the last evaluation of the fit may have been a rejected trial.
  const residual = new Float64Array(sweep.rows);
  const jacobian = Array.from(start, () => new Float64Array(sweep.rows));
  if (!sweep.evaluate(parameters, residual, jacobian)) return null;
  return {
    model: { ...model, priors },
    parameters,
    covariance,
    chiSquare: fit.sumOfSquares,
    dof: fit.dof,
    free: sweep.rows - fit.dof,
    rows: sweep.rows,
    parts: partition(sweep, residual, jacobian, covariance),
    gain: gains(sweep, jacobian, covariance, priors),
    ...residualsAt(data, model, parameters),
  };
}

/** Shares chi-square and degrees of freedom out: each observation has one, less its own pull on its fitted value. */
function partition(
  sweep: WhitenedSweep,
  residual: Float64Array,
  jacobian: readonly Float64Array[],
  covariance: Float64Array,
): SweepFit['parts'] {
  const part = (from: number, to: number): Part => {
    let chiSquare = 0;
    let dof = to - from;
    for (let row = from; row < to; row++) {
      chiSquare += residual[row]! ** 2;
      dof -= leverage(jacobian, covariance, row);
    }
    return { chiSquare, dof };
  };
  const n = sweep.points.length;
  return { frequencies: part(0, n), directions: part(n, sweep.rows) };
}

/** Diagonal of J (J'J)^-1 J'. */
function leverage(jacobian: readonly Float64Array[], covariance: Float64Array, row: number): number {
  const size = jacobian.length;
  let sum = 0;
  for (let k = 0; k < size; k++) {
    for (let l = 0; l < size; l++) sum += jacobian[k]![row]! * covariance[k * size + l]! * jacobian[l]![row]!;
  }
  return sum;
}

function gains(
  sweep: WhitenedSweep,
  jacobian: readonly Float64Array[],
  covariance: Float64Array,
  priors: readonly Prior[],
): Gains {
  const n = sweep.points.length;
  const size = jacobian.length;
  const columns = (length: number) => Array.from({ length: size }, () => new Float64Array(length));
  const gain = { y: columns(n), current: columns(n), angle: columns(n), prior: columns(priors.length) };
  const byRow = (k: number, row: number) => {
    let sum = 0;
    for (let l = 0; l < size; l++) sum -= covariance[k * size + l]! * jacobian[l]![row]!;
    return sum;
  };
  let next = n;
  for (let i = 0; i < n; i++) {
    const second = sweep.directed[next - n] === i;
    const { rest, white } = sweep.points[i]!;
    for (let k = 0; k < size; k++) {
      const angle = second ? byRow(k, next) * white.second : 0;
      const y = byRow(k, i) * white.first - angle * white.mix;
      gain.y[k]![i] = y;
      gain.angle[k]![i] = angle;
      gain.current[k]![i] = -(y * rest.dy[0]! + angle * rest.dAngle[0]!);
    }
    if (second) next++;
  }
  priors.forEach((prior, j) => {
    for (let k = 0; k < size; k++) gain.prior[k]![j] = covariance[k * size + prior.parameter]! / prior.u ** 2;
  });
  return gain;
}

/** Residuals at the currents as measured. */
export function residualsAt(data: Observations, model: SweepModel, p: Float64Array): Residuals {
  const column = () => new Float64Array(data.y.length);
  const out = { residual: column(), standardised: column(), angleResidual: column(), standardisedAngle: column() };
  const rest = blankRest();
  for (let i = 0; i < data.y.length; i++) {
    predict(model, p, i, data.current_A[i]!, rest);
    const u = data.u_current_A[i]!;
    out.residual[i] = data.y[i]! - rest.y;
    out.standardised[i] = out.residual[i]! / Math.hypot(data.u_y[i]!, rest.dy[0]! * u);
    if (!model.directions || data.frame[i]! < 0) continue;
    out.angleResidual[i] = wrappedLine(data.angle[i]! - p[at.zeros + data.frame[i]!]! - rest.angle);
    out.standardisedAngle[i] = out.angleResidual[i]! / Math.hypot(data.u_angle[i]!, rest.dAngle[0]! * u);
  }
  return out;
}
