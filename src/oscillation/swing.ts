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

/** Motion of the bar's middle: lines of its own, and what follows the twist. */
export interface PositionMotion {
  /** At most as many as asked for, strongest first. */
  readonly lines: readonly SwingLine[];
  /** Pixels the middle moves per radian of twist, in step with it: a fibre off the middle does that. */
  readonly inPhase_px: number;
  /** The same a quarter cycle off: no fibre does that, a swing at the twist's frequency may. */
  readonly quadrature_px: number;
}

/**
 * Splits the motion of the bar's middle into what offset, drift, twist, its square and `later` (the twist a quarter cycle on)
 * explain, and damped sines in the rest: a fibre off the bar's middle makes no swing. All columns are aligned. Null for fewer than
 * 32 rows, positions that are not finite, or columns that can't be told apart.
 */
export function positionMotion(
  time_s: Float64Array,
  x_px: Float64Array,
  y_px: Float64Array,
  twist: Float64Array,
  later: Float64Array,
  count: number,
): PositionMotion | null {
  const n = time_s.length;
  if (n < 32 || !x_px.every(Number.isFinite) || !y_px.every(Number.isFinite)) return null;
  const duration = time_s[n - 1]! - time_s[0]!;
  const basis = [twist, later, twist.map((v) => v * v), time_s.map(() => 1), time_s.map((t) => t - duration / 2)];
  // What the lines found so far leave of the position; the twist's part is taken out anew each time, since a line disturbs it.
  let left = [x_px, y_px];
  const lines: SwingLine[] = [];
  for (;;) {
    const [x, y] = left.map((column) => linearLeastSquares(basis, column));
    if (x === null || x === undefined || y === null || y === undefined) return null;
    const found = lines.length < count ? nextLine(time_s, x.residual, y.residual, duration) : null;
    if (found === null) {
      const inPhase_px = Math.hypot(x.parameters[0]!, y.parameters[0]!);
      return { lines, inPhase_px, quadrature_px: Math.hypot(x.parameters[1]!, y.parameters[1]!) };
    }
    const line = refined(time_s, left, basis, found, duration);
    lines.push({ ...line.line, prominence: found.prominence });
    left = left.map((column, axis) => column.map((v, i) => v - line.curve[axis]![i]!));
  }
}

/** A damped sine fitted to x and y, with its curve in each. */
interface FittedLine {
  readonly line: Omit<SwingLine, 'prominence'>;
  readonly curve: readonly Float64Array[];
}

/** Fits the line once more to what the basis leaves once the line is out of it: the basis had taken its share of the line. */
function refined(
  time_s: Float64Array,
  left: readonly Float64Array[],
  basis: readonly Float64Array[],
  found: FittedLine,
  duration: number,
): FittedLine {
  let line = found;
  for (let pass = 0; pass < 2; pass++) {
    const rest = left.map((column, axis) => {
      const bare = column.map((v, i) => v - line.curve[axis]![i]!);
      const fit = linearLeastSquares(basis, bare);
      return fit === null ? bare : fit.residual.map((v, i) => v + line.curve[axis]![i]!);
    });
    line = fitLine(time_s, rest[0]!, rest[1]!, line.line.frequency_Hz, duration) ?? line;
  }
  return line;
}

/** The strongest line that stands out of x or y, fitted to both; null where none does. */
function nextLine(
  time_s: Float64Array,
  x: Float64Array,
  y: Float64Array,
  duration: number,
): (FittedLine & { prominence: number }) | null {
  const start = [x, y]
    .map((column) => {
      const s = spectrum(time_s, column);
      const line = s === null ? undefined : spectralLines(s, 3).find((l) => l.frequency_Hz * duration > 1.5);
      return s === null || line === undefined ? null : { ...line, prominence: line.amplitude / median(s.amplitude) };
    })
    .filter((line) => line !== null)
    .sort((a, b) => b.amplitude - a.amplitude)
    .find((line) => line.prominence > PROMINENT);
  if (start === undefined) return null;
  const fit = fitLine(time_s, x, y, start.frequency_Hz, duration);
  return fit === null ? null : { ...fit, prominence: start.prominence };
}

function fitLine(
  time_s: Float64Array,
  x: Float64Array,
  y: Float64Array,
  frequency_Hz: number,
  duration: number,
): FittedLine | null {
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
