import { blankRest, type Rest, wrappedLine } from './bar-on-fibre.ts';
import type { Observations } from './observations.ts';
import { at, predict, type SweepModel } from './sweep-model.ts';

/**
 * Residuals of a sweep under a model, divided by what they should scatter by, with their derivatives. Every point's true
 * current is adjusted first, so that for a straight line this is the fit of York et al. 2004 (see `york-line.ts`), with
 * its standard uncertainties; the current's error then also links f0² and direction of a point.
 */
export class WhitenedSweep {
  readonly rows: number;
  /** Points with a direction that is fitted, in the order of their rows after those of f0². */
  readonly directed: readonly number[];
  /** Of each point, at its adjusted current after the last `evaluate`. */
  readonly points: readonly PointRow[];
  readonly #data: Observations;
  readonly #model: SweepModel;

  constructor(data: Observations, model: SweepModel) {
    this.#data = data;
    this.#model = model;
    const all = [...data.y.keys()];
    this.directed = model.directions ? all.filter((i) => data.frame[i]! >= 0) : [];
    this.rows = data.y.length + this.directed.length;
    this.points = all.map(() => ({
      y: 0,
      angle: 0,
      current_A: 0,
      rest: blankRest(),
      white: { first: 0, second: 0, mix: 0 },
    }));
  }

  /**
   * Fills residuals and, column by column, their derivatives by the physical parameters `p`. False where the model has no
   * stable rest direction at one of the points.
   */
  evaluate(p: Float64Array, residual: Float64Array, jacobian: readonly Float64Array[]): boolean {
    if (!(p[at.slope]! > 0)) return false;
    const n = this.points.length;
    let next = n;
    for (let i = 0; i < n; i++) {
      const second = this.directed[next - n] === i;
      if (!this.#adjust(p, i, second)) return false;
      const { y, angle, rest, white } = this.points[i]!;
      residual[i] = white.first * y;
      for (let k = 0; k < p.length; k++) jacobian[k]![i] = k < at.zeros ? -white.first * rest.dy[k + 1]! : 0;
      if (!second) continue;
      residual[next] = white.second * (angle - white.mix * y);
      for (let k = 0; k < p.length; k++) {
        const byParameter = k < at.zeros ? rest.dAngle[k + 1]! - white.mix * rest.dy[k + 1]! : 0;
        const isZero = k === at.zeros + this.#data.frame[i]!;
        jacobian[k]![next] = -white.second * (isZero ? 1 : byParameter);
      }
      next++;
    }
    return true;
  }

  /**
   * Finds the true current of a point that agrees best with its f0², direction and meter under the model, by Gauss-Newton,
   * and leaves the residuals as they would be at the measured current to first order.
   */
  #adjust(p: Float64Array, i: number, second: boolean): boolean {
    const data = this.#data;
    const point = this.points[i]!;
    const measured = data.current_A[i]!;
    const u = data.u_current_A[i]!;
    const zero = second ? p[at.zeros + data.frame[i]!]! : 0;
    const { rest } = point;
    point.current_A = measured;
    for (let turn = 0; turn < 30; turn++) {
      if (!predict(this.#model, p, i, point.current_A, rest)) return false;
      const away = measured - point.current_A;
      point.y = data.y[i]! - rest.y - rest.dy[0]! * away;
      point.angle = second ? wrappedLine(data.angle[i]! - zero - rest.angle) - rest.dAngle[0]! * away : 0;
      point.white = whitening(data, i, second, rest);
      if (u === 0) return true;
      const { first, second: other, mix } = point.white;
      const pull =
        first ** 2 * rest.dy[0]! * point.y +
        other ** 2 * (rest.dAngle[0]! - mix * rest.dy[0]!) * (point.angle - mix * point.y);
      const next = measured + u * u * pull;
      const moved = Math.abs(next - point.current_A);
      point.current_A = next;
      if (moved <= 1e-9 * u) return true;
    }
    return true;
  }
}

/** One point at its adjusted current: what is left of f0² and direction, and how they are whitened. */
export interface PointRow {
  y: number;
  angle: number;
  current_A: number;
  readonly rest: Rest;
  white: Whitening;
}

/** first · y and second · (angle - mix · y) are independent with unit variance. */
export interface Whitening {
  readonly first: number;
  readonly second: number;
  readonly mix: number;
}

/** Factors for the covariance that the own uncertainties of f0² and direction and the current's common error give. */
function whitening(data: Observations, i: number, second: boolean, rest: Rest): Whitening {
  const variance = data.u_current_A[i]! ** 2;
  const yy = data.u_y[i]! ** 2 + rest.dy[0]! ** 2 * variance;
  const first = 1 / Math.sqrt(yy);
  if (!second) return { first, second: 0, mix: 0 };
  const both = rest.dy[0]! * rest.dAngle[0]! * variance;
  const mix = both / yy;
  const angleAlone = data.u_angle[i]! ** 2 + rest.dAngle[0]! ** 2 * variance - mix * both;
  return { first, second: 1 / Math.sqrt(angleAlone), mix };
}
