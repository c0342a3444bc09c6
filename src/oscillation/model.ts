import type { LeastSquaresProblem, Prior } from '../numerics/least-squares.ts';
import { integrate, type Motion } from './motion.ts';
import type { Series } from './series.ts';

/** Places of the parameters in the fit's vector: the motion's seven, then how it is seen; side lines follow from LINES on. */
export const OMEGA = 0;
export const GAMMA = 1;
export const DRAG = 2;
export const SHARE = 3;
export const SKEW = 4;
export const X0 = 5;
export const V0 = 6;
/** Rest direction at the middle of the series. */
export const OFFSET = 7;
/** Drift of the rest direction per second. */
export const DRIFT = 8;
/** Static bend of the angle seen, per radian: at x from rest the picture shows bend x² more. It moves no phase. */
export const BEND = 9;
/** First of the side lines, four parameters each: cosine, sine, angular frequency, decay rate. */
export const LINES = 10;

/** The model fitted: rest direction with drift, the motion times the loss by exposure, bent, and damped sines beside it. */
export interface Model {
  /** Middle of the series, where `OFFSET` holds. */
  readonly middle_s: number;
  /** What is left of the amplitude after averaging over the exposure of a frame: sin(pi f tau) / (pi f tau). */
  readonly blur: number;
  /** Number of damped sines beside the twist. */
  readonly lines: number;
  readonly priors: readonly Prior[];
  /** Which parameters are held. */
  readonly fixed: readonly boolean[];
}

/** The motion's part of a parameter vector. */
export function motionOf(p: Float64Array): Motion {
  return {
    omega: p[OMEGA]!,
    gamma: p[GAMMA]!,
    drag: p[DRAG]!,
    share: p[SHARE]!,
    skew: p[SKEW]!,
    x0: p[X0]!,
    v0: p[V0]!,
  };
}

/** Fills `value` with the model at `time_s` and, where given, `jacobian` with its derivatives. False where it has none. */
export function evaluateModel(
  model: Model,
  p: Float64Array,
  time_s: Float64Array,
  value: Float64Array,
  jacobian: readonly Float64Array[] | null,
): boolean {
  if (!integrate(motionOf(p), time_s, value, jacobian === null ? null : jacobian.slice(0, 7))) return false;
  const { middle_s, blur } = model;
  const bend = p[BEND]!;
  for (let i = 0; i < time_s.length; i++) {
    const x = blur * value[i]!;
    const since = time_s[i]! - middle_s;
    value[i] = x + bend * x * x + p[OFFSET]! + p[DRIFT]! * since;
    if (jacobian === null) continue;
    const slope = blur * (1 + 2 * bend * x);
    for (let k = 0; k < 7; k++) jacobian[k]![i] = slope * jacobian[k]![i]!;
    jacobian[OFFSET]![i] = 1;
    jacobian[DRIFT]![i] = since;
    jacobian[BEND]![i] = x * x;
  }
  for (let line = 0; line < model.lines; line++) addLine(LINES + 4 * line, p, time_s, value, jacobian);
  return true;
}

function addLine(
  at: number,
  p: Float64Array,
  time_s: Float64Array,
  value: Float64Array,
  jacobian: readonly Float64Array[] | null,
): void {
  const [cosine, sine, omega, decay] = [p[at]!, p[at + 1]!, p[at + 2]!, p[at + 3]!];
  for (let i = 0; i < time_s.length; i++) {
    const t = time_s[i]!;
    const fall = Math.exp(-decay * t);
    const c = fall * Math.cos(omega * t);
    const s = fall * Math.sin(omega * t);
    const sum = cosine * c + sine * s;
    value[i] = value[i]! + sum;
    if (jacobian === null) continue;
    jacobian[at]![i] = c;
    jacobian[at + 1]![i] = s;
    jacobian[at + 2]![i] = t * (sine * c - cosine * s);
    jacobian[at + 3]![i] = -t * sum;
  }
}

/** A model at given samples: residuals (observed less model) and their derivatives by its parameters, one column each. */
export interface Evaluation {
  readonly parameters: Float64Array;
  readonly residual: Float64Array;
  readonly jacobian: readonly Float64Array[];
}

/** The least-squares problem of a model on a series; what is `known` of it already at some parameters is not worked out again. */
export function problemOf(model: Model, series: Series, known: Evaluation | null): LeastSquaresProblem {
  const { time_s, value } = series;
  return {
    rows: time_s.length,
    evaluate(p, residual, jacobian) {
      if (known?.parameters.length === p.length && p.every((v, k) => v === known.parameters[k])) {
        residual.set(known.residual);
        known.jacobian.forEach((column, k) => {
          jacobian[k]!.set(column);
        });
        return true;
      }
      if (!evaluateModel(model, p, time_s, residual, jacobian)) return false;
      for (let i = 0; i < time_s.length; i++) residual[i] = value[i]! - residual[i]!;
      for (const column of jacobian) for (let i = 0; i < time_s.length; i++) column[i] = -column[i]!;
      return true;
    },
  };
}
