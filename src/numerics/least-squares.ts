import { dot } from './dot.ts';
import { invertUpper, solveUpper, triangularise } from './qr.ts';

/** A nonlinear least-squares problem: minimise the sum of squares of `rows` residuals over the parameters. */
export interface LeastSquaresProblem {
  /** Number of residuals. */
  readonly rows: number;
  /**
   * Fills `residual` (length `rows`, each already divided by its standard deviation where weights are wanted) and, column by
   * column, the derivatives of the residuals by every parameter. Columns of fixed parameters may be left alone. Returns
   * false where the model can't be evaluated at `parameters`; the step is then shortened.
   */
  evaluate(parameters: Float64Array, residual: Float64Array, jacobian: readonly Float64Array[]): boolean;
}

/** Knowledge of one parameter from elsewhere: it enters as one more residual (parameter - value) / u. */
export interface Prior {
  readonly parameter: number;
  readonly value: number;
  readonly u: number;
}

/** How a fit is run; every tolerance is relative. */
export interface LeastSquaresOptions {
  /** Which parameters stay as they start; absent: none. */
  readonly fixed?: readonly boolean[];
  readonly priors?: readonly Prior[];
  /**
   * Stops when actual and predicted reduction of the sum of squares are both below this share of it, or the next step promises hardly any
   * (default 1e-12).
   */
  readonly sumTolerance?: number;
  /** Stops when every free parameter's step, in units of its own column scale, is below this share (default 1e-10). */
  readonly stepTolerance?: number;
  /** Most evaluations of the problem (default 200). */
  readonly maxEvaluations?: number;
  /** Damping of the first step (default 1e-3); next to none suits a start close to the minimum. */
  readonly damping?: number;
}

/**
 * How a fit ended: `converged` by one of the two rules; `stalled`: no shorter step helps although neither rule is met;
 * `evaluations`: their number ran out; `undefined_start`: the model can't be evaluated at the start.
 */
export type LeastSquaresStatus = 'converged' | 'stalled' | 'evaluations' | 'undefined_start';

/** Result of a fit. Whether it is plausible is for the caller to judge. */
export interface LeastSquaresFit {
  readonly status: LeastSquaresStatus;
  readonly parameters: Float64Array;
  /** Residuals at the end, without those of the priors. */
  readonly residual: Float64Array;
  /** Derivatives of the residuals at the end, one column a parameter. */
  readonly jacobian: readonly Float64Array[];
  /** Sum of squares of the residuals and of the priors' residuals. */
  readonly sumOfSquares: number;
  /** Residuals and priors less free parameters. */
  readonly dof: number;
  /**
   * Inverse of J'J (priors included) over all parameters, row by row, zero for fixed ones: the covariance for unit
   * residual variance. Multiply by `sumOfSquares / dof` where the residuals carry no weights. Null where J is singular.
   */
  readonly covariance: Float64Array | null;
  readonly evaluations: number;
}

/** A step that promises less than this times what `sumTolerance` asks for is not taken. */
const NEGLIGIBLE = 0.1;

/**
 * Levenberg-Marquardt: QR of the Jacobian, damping scaled by the largest norm each column has had (Moré 1978, The
 * Levenberg-Marquardt algorithm: implementation and theory, LNM 630), damping factor moved as by Nielsen (1999, Damping
 * parameter in Marquardt's method, IMM-REP-1999-05).
 */
export function leastSquares(
  problem: LeastSquaresProblem,
  start: Float64Array,
  options: LeastSquaresOptions = {},
): LeastSquaresFit {
  const free = [...start.keys()].filter((i) => options.fixed?.[i] !== true);
  const priors = (options.priors ?? []).filter((prior) => free.includes(prior.parameter));
  const n = free.length;
  const rows = problem.rows + priors.length;
  if (rows < n) throw new RangeError(`leastSquares: expected at least ${n} residuals for ${n} parameters, got ${rows}`);
  const maxEvaluations = options.maxEvaluations ?? 200;
  const sumTolerance = options.sumTolerance ?? 1e-12;
  const stepTolerance = options.stepTolerance ?? 1e-10;

  const blank = () => {
    const all = new Float64Array((start.length + 1) * rows);
    const column = (k: number) => all.subarray(k * rows, (k + 1) * rows);
    return { residual: column(start.length), jacobian: Array.from(start, (_, k) => column(k)) };
  };
  const evaluate = (p: Float64Array, point: ReturnType<typeof blank>): number => {
    if (!problem.evaluate(p, point.residual.subarray(0, problem.rows), point.jacobian)) return Number.POSITIVE_INFINITY;
    priors.forEach((prior, k) => {
      point.residual[problem.rows + k] = (p[prior.parameter]! - prior.value) / prior.u;
      for (const i of free) point.jacobian[i]![problem.rows + k] = i === prior.parameter ? 1 / prior.u : 0;
    });
    const sum = dot(point.residual, point.residual);
    return Number.isFinite(sum) ? sum : Number.POSITIVE_INFINITY;
  };

  let p = start.slice();
  let here = blank();
  let there = blank();
  let sum = evaluate(p, here);
  let evaluations = 1;
  let status: LeastSquaresStatus = Number.isFinite(sum) ? 'evaluations' : 'undefined_start';
  const scale = new Float64Array(n);
  const space = new Float64Array((n + 1) * rows);
  let damping = options.damping ?? 1e-3;
  let growth = 2;
  let triangle = status === 'undefined_start' ? null : factor(here, free, scale, space);
  while (triangle !== null && evaluations < maxEvaluations) {
    const step = dampedStep(triangle, scale, damping);
    // So close that the step isn't worth looking at; a strongly damped one promises little for another reason.
    if (evaluations > 1 && damping < 1e-2 && step.predicted <= NEGLIGIBLE * sumTolerance * sum) {
      status = 'converged';
      break;
    }
    const trial = p.slice();
    let largest = 0;
    for (let k = 0; k < n; k++) {
      trial[free[k]!] = p[free[k]!]! + step.step[k]!;
      const size = Math.abs(p[free[k]!]!) + Math.sqrt(sum) / (scale[k]! * Math.sqrt(rows));
      largest = Math.max(largest, Math.abs(step.step[k]!) / size);
    }
    const trialSum = evaluate(trial, there);
    evaluations++;
    const gain = (sum - trialSum) / step.predicted;
    const small = step.predicted <= sumTolerance * sum && Math.abs(sum - trialSum) <= sumTolerance * sum;
    if (trialSum <= sum) {
      [here, there] = [there, here];
      p = trial;
      sum = trialSum;
      triangle = factor(here, free, scale, space);
      damping *= Math.max(1 / 9, 1 - (2 * Math.min(gain, 2) - 1) ** 3);
      damping = Math.max(damping, 1e-15);
      growth = 2;
    } else {
      damping *= growth;
      growth *= 2;
    }
    if (small || largest <= stepTolerance || sum === 0) {
      status = 'converged';
      break;
    }
    if (damping > 1e20) {
      status = 'stalled';
      break;
    }
  }
  return {
    status,
    parameters: p,
    residual: here.residual.slice(0, problem.rows),
    jacobian: here.jacobian.map((column) => column.subarray(0, problem.rows)),
    sumOfSquares: sum,
    dof: rows - n,
    covariance: triangle === null ? null : spread(triangle.r, free, start.length),
    evaluations,
  };
}

interface Factor {
  readonly r: Float64Array;
  readonly qty: Float64Array;
}

function factor(
  point: { residual: Float64Array; jacobian: Float64Array[] },
  free: readonly number[],
  scale: Float64Array,
  space: Float64Array,
): Factor {
  free.forEach((i, k) => {
    const norm = Math.sqrt(dot(point.jacobian[i]!, point.jacobian[i]!));
    scale[k] = Math.max(scale[k]!, norm > 0 ? norm : scale[k]! > 0 ? 0 : 1);
  });
  return triangularise(
    free.map((i) => point.jacobian[i]!),
    point.residual,
    space,
  );
}

/** Minimises |R s + Q'r|² + damping |D s|² and says by how much the linear model expects the sum of squares to fall. */
function dampedStep(
  { r, qty }: Factor,
  scale: Float64Array,
  damping: number,
): { step: Float64Array; predicted: number } {
  const n = scale.length;
  const root = Math.sqrt(damping);
  const columns = Array.from({ length: n }, (_, j) => {
    const column = new Float64Array(2 * n);
    for (let i = 0; i <= j; i++) column[i] = r[i * n + j]! / scale[j]!;
    column[n + j] = root;
    return column;
  });
  const rhs = new Float64Array(2 * n);
  for (let i = 0; i < n; i++) rhs[i] = -qty[i]!;
  const small = triangularise(columns, rhs);
  const scaled = solveUpper(small.r, n, small.qty) ?? new Float64Array(n);
  let before = 0;
  let after = 0;
  for (let i = 0; i < n; i++) {
    let value = qty[i]!;
    for (let j = i; j < n; j++) value += (r[i * n + j]! / scale[j]!) * scaled[j]!;
    before += qty[i]! ** 2;
    after += value * value;
  }
  const step = scaled.map((value, k) => value / scale[k]!);
  return { step, predicted: Math.max(before - after, Number.MIN_VALUE) };
}

/** (J'J)^-1 = R^-1 R^-T over the free parameters, spread over all of them. Columns are equalised first so that units don't matter. */
function spread(r: Float64Array, free: readonly number[], size: number): Float64Array | null {
  const n = free.length;
  const norm = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i <= j; i++) norm[j] = norm[j]! + r[i * n + j]! ** 2;
    norm[j] = Math.sqrt(norm[j]!);
    if (norm[j] === 0) return null;
  }
  const equal = r.map((value, at) => value / norm[at % n]!);
  const inverse = invertUpper(equal, n);
  if (inverse === null) return null;
  const covariance = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let value = 0;
      for (let k = Math.max(i, j); k < n; k++) value += inverse[i * n + k]! * inverse[j * n + k]!;
      covariance[free[i]! * size + free[j]!] = value / (norm[i]! * norm[j]!);
    }
  }
  return covariance;
}

/**
 * Turns a plain residual function into a problem with central-difference derivatives (step: cube root of the rounding
 * unit times the parameter, or times `typical` where the parameter is zero). `residual` returns false where undefined.
 */
export function withNumericalJacobian(
  rows: number,
  residual: (parameters: Float64Array, out: Float64Array) => boolean,
  typical?: readonly number[],
): LeastSquaresProblem {
  return {
    rows,
    evaluate(parameters, out, jacobian) {
      if (!residual(parameters, out)) return false;
      const high = new Float64Array(rows);
      const low = new Float64Array(rows);
      for (const [k, column] of jacobian.entries()) {
        const value = parameters[k]!;
        const step = 6e-6 * (Math.abs(value) || Math.abs(typical?.[k] ?? 1));
        const moved = parameters.slice();
        moved[k] = value + step;
        const above = residual(moved, high) ? moved[k]! : null;
        moved[k] = value - step;
        const below = residual(moved, low) ? moved[k]! : null;
        if (above === null || below === null) return false;
        for (let i = 0; i < rows; i++) column[i] = (high[i]! - low[i]!) / (above - below);
      }
      return true;
    },
  };
}
