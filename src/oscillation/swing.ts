import { leastSquares } from '../numerics/least-squares.ts';
import { linearLeastSquares } from '../numerics/linear-least-squares.ts';
import { median } from '../numerics/statistics.ts';
import { spectralLines, spectrum } from './spectrum.ts';

/** A sideways motion of the bar's middle: a damped sine in x and y together. */
export interface SwingLine {
  readonly frequency_Hz: number;
  /** Amplitude falls as exp(-decay t). */
  readonly decay_per_s: number;
  /** Amplitude at time zero in pixels, both directions together. */
  readonly amplitude_px: number;
  /** How far the line stands above the median of its spectrum. */
  readonly prominence: number;
}

/** A line of noise reaches about four times the median of its spectrum in a thousand lines. */
const PROMINENT = 6;

/**
 * Lines in the motion of the bar's middle that do not follow the twist: x and y less what offset, drift, `twist` and
 * `twistRate` (aligned with them) explain, so that a fibre off the bar's middle makes no swing. At most `count`, strongest first.
 */
export function swingLines(
  time_s: Float64Array,
  x_px: Float64Array,
  y_px: Float64Array,
  twist: Float64Array,
  twistRate: Float64Array,
  count: number,
): SwingLine[] {
  const n = time_s.length;
  if (n < 32) return [];
  const duration = time_s[n - 1]! - time_s[0]!;
  const basis = [time_s.map(() => 1), time_s.map((t) => t - duration / 2), twist, twistRate];
  // What the lines found so far leave of the position; the twist's part is taken out anew each time, since a line disturbs it.
  let left = [x_px, y_px];
  const found: SwingLine[] = [];
  while (found.length < count) {
    const [x, y] = left.map((column) => linearLeastSquares(basis, column)?.residual ?? null);
    if (x === null || x === undefined || y === null || y === undefined) break;
    const start = [x, y]
      .map((column) => {
        const s = spectrum(time_s, column);
        const line = s === null ? undefined : spectralLines(s, 3).find((l) => l.frequency_Hz * duration > 1.5);
        return s === null || line === undefined ? null : { ...line, prominence: line.amplitude / median(s.amplitude) };
      })
      .filter((line) => line !== null)
      .sort((a, b) => b.amplitude - a.amplitude)
      .find((line) => line.prominence > PROMINENT);
    if (start === undefined) break;
    const fit = fitLine(time_s, x, y, start.frequency_Hz, duration);
    if (fit === null) break;
    found.push({ ...fit.line, prominence: start.prominence });
    left = left.map((column, axis) => column.map((v, i) => v - fit.curve[axis]![i]!));
  }
  return found;
}

function fitLine(time_s: Float64Array, x: Float64Array, y: Float64Array, frequency_Hz: number, duration: number) {
  const n = time_s.length;
  const problem = {
    rows: 2 * n,
    evaluate(p: Float64Array, residual: Float64Array, jacobian: readonly Float64Array[]) {
      for (let i = 0; i < n; i++) {
        const t = time_s[i]!;
        const fall = Math.exp(-p[1]! * t);
        const c = fall * Math.cos(p[0]! * t);
        const s = fall * Math.sin(p[0]! * t);
        for (let axis = 0; axis < 2; axis++) {
          const [a, b] = [p[2 + 2 * axis]!, p[3 + 2 * axis]!];
          const row = axis * n + i;
          residual[row] = (axis === 0 ? x[i]! : y[i]!) - a * c - b * s;
          jacobian[0]![row] = -t * (b * c - a * s);
          jacobian[1]![row] = t * (a * c + b * s);
          for (let k = 2; k < 6; k++) jacobian[k]![row] = 0;
          jacobian[2 + 2 * axis]![row] = -c;
          jacobian[3 + 2 * axis]![row] = -s;
        }
      }
      return Math.abs(p[1]! * duration) < 20;
    },
  };
  const fit = leastSquares(problem, new Float64Array([2 * Math.PI * frequency_Hz, 0.5 / duration, 0, 0, 0, 0]), {
    sumTolerance: 1e-6,
    maxEvaluations: 30,
  });
  const [omega, decay, ax, bx, ay, by] = fit.parameters;
  if (fit.covariance === null || !(omega! > 0)) return null;
  return {
    line: {
      frequency_Hz: omega! / (2 * Math.PI),
      decay_per_s: decay!,
      amplitude_px: Math.hypot(ax!, bx!, ay!, by!),
    },
    curve: [x.map((v, i) => v - fit.residual[i]!), y.map((v, i) => v - fit.residual[n + i]!)],
  };
}
