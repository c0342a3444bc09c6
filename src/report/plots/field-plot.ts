import type { FittedPoint, Reduction } from '../../reduction/reduction.ts';
import type { SegmentResult } from '../results.ts';
import { type CurrentCurves, type CurrentPoint, currentPlot } from './current-plot.ts';
import type { PlotOptions } from './ring-down-plot.ts';
import type { Label } from './svg.ts';

/** The part of results that the plots against current draw. */
export interface PlottedResults {
  readonly segments: readonly SegmentResult[];
  readonly reduction: Reduction;
}

/** f0² against current with the fitted curve, its standard uncertainty, and the residuals; an SVG document as text. */
export function fieldPlot(results: PlottedResults, options: PlotOptions = {}): string {
  return currentPlot(fieldCurves(results), options);
}

/** The rest direction against current with the fitted turning and the residuals; null where there is nothing to draw. */
export function restDirectionPlot(results: PlottedResults, options: PlotOptions = {}): string | null {
  const curves = restDirectionCurves(results);
  return curves.points.length > 0 ? currentPlot(curves, { height: 340, ...options }) : null;
}

/** What `fieldPlot` draws: every segment with a current and a frequency, in Hz². */
export function fieldCurves({ segments, reduction }: PlottedResults): CurrentCurves {
  const fitted = new Map(reduction.points.map((p) => [p.id, p]));
  const used = usedIds(segments, reduction);
  const points = segments.flatMap((segment): CurrentPoint[] => {
    const { current_A, f0_Hz, u_f0_Hz } = segment;
    if (current_A === null || f0_Hz === null) return [];
    const point = fitted.get(segment.id);
    return [
      {
        ...place(segment, current_A, used),
        value: f0_Hz ** 2,
        u: u_f0_Hz === null ? null : 2 * f0_Hz * u_f0_Hz,
        residual: point?.residual_Hz2 ?? null,
        u_residual: point ? uncertainty(point.residual_Hz2, point.standardised_residual) : null,
      },
    ];
  });
  const { curve } = reduction;
  const square: Label = [{ symbol: 'f' }, { sub: '0' }, '² / Hz²'];
  return {
    id: 'field',
    title: `Square of the undamped frequency against current${curve ? ', with the fitted curve and residuals' : ''}`,
    quantity: square,
    residualQuantity: ['resid. / Hz²'],
    points,
    curve: curve && { current_A: curve.current_A, value: curve.f0_squared_Hz2, u: curve.u_f0_squared_Hz2 },
    curveName: reduction.model?.kind === 'line' ? 'fitted line' : 'fitted curve',
  };
}

/** What `restDirectionPlot` draws, in degrees. */
export function restDirectionCurves({ segments, reduction }: PlottedResults): CurrentCurves {
  const used = new Set(reduction.points_used);
  const rows = new Map(segments.map((s) => [s.id, s]));
  const turned = reduction.points.filter((p) => p.equilibrium_deg !== null && p.fitted_equilibrium_deg !== null);
  const points = turned.flatMap((point): CurrentPoint[] => {
    const segment = rows.get(point.id);
    if (!segment || point.equilibrium_deg === null) return [];
    return [
      {
        ...place(segment, point.current_A, used),
        value: point.equilibrium_deg,
        u: segment.u_equilibrium_deg,
        residual: point.equilibrium_residual_deg,
        u_residual: uncertainty(point.equilibrium_residual_deg, point.standardised_equilibrium_residual),
      },
    ];
  });
  return {
    id: 'rest',
    title: 'Rest direction against current, with the fitted turning and residuals',
    quantity: ['rest direction / °'],
    residualQuantity: ['resid. / °'],
    points,
    curve: turning(turned, reduction.curve),
    curveName: 'fitted turning',
  };
}

/** Where nothing was fitted every segment that was not left out counts: none is marked as refused by a fit that isn't there. */
function usedIds(segments: readonly SegmentResult[], reduction: Reduction): ReadonlySet<string> {
  if (reduction.points_used.length > 0) return new Set(reduction.points_used);
  return new Set(segments.filter((s) => s.left_out === null).map((s) => s.id));
}

/**
 * The model's turning on the grid of currents, set upon the zero that the fitted rest directions share. Null where they don't
 * share one (several recordings or views): there is no one curve then.
 */
function turning(points: readonly FittedPoint[], curve: Reduction['curve']): CurrentCurves['curve'] {
  const rest = curve?.rest_from_axis_deg;
  if (!curve || !rest || points.length === 0) return null;
  const offsets = points.map((p) => halfTurn((p.fitted_equilibrium_deg ?? 0) - at(curve.current_A, rest, p.current_A)));
  const first = offsets[0] ?? 0;
  const spread = offsets.map((offset) => halfTurn(offset - first)).sort((a, b) => a - b);
  const zero = first + (spread[spread.length >> 1] ?? 0);
  // Where the curve is steep the grid is too coarse to tell an offset: a quarter of the points may differ.
  if (offsets.filter((offset) => Math.abs(halfTurn(offset - zero)) > 2).length > points.length / 4) return null;
  const current_A: number[] = [];
  const value: number[] = [];
  for (const [i, current] of curve.current_A.entries()) {
    const angle = halfTurn((rest[i] ?? 0) + zero);
    // The curve is broken where it is folded by half a turn.
    if (value.length > 0 && Math.abs(angle - (value.at(-1) ?? 0)) > 90) {
      current_A.push(current);
      value.push(Number.NaN);
    }
    current_A.push(current);
    value.push(angle);
  }
  return { current_A, value, u: null };
}

/** An angle in degrees brought into (-90, 90]: a bar looks the same after half a turn. */
function halfTurn(angle_deg: number): number {
  return angle_deg - 180 * Math.ceil(angle_deg / 180 - 0.5);
}

/** Value at `x` on a grid, linear between its points. */
function at(grid: readonly number[], values: readonly number[], x: number): number {
  const above = grid.findIndex((g) => g >= x);
  const i = above < 0 ? grid.length - 1 : Math.max(1, above);
  const [x0, x1, y0, y1] = [grid[i - 1] ?? 0, grid[i] ?? 1, values[i - 1] ?? 0, values[i] ?? 0];
  return x1 === x0 ? y1 : y0 + halfTurn(y1 - y0) * ((x - x0) / (x1 - x0));
}

function place(segment: SegmentResult, current_A: number, used: ReadonlySet<string>) {
  return {
    id: segment.id,
    current_A,
    u_current_A: segment.u_current_A,
    sweep: segment.sweep,
    trusted: segment.status === 'measured',
    used: used.has(segment.id),
  };
}

/** A residual's own uncertainty from the residual and its standardised value. */
function uncertainty(residual: number | null, standardised: number | null): number | null {
  return residual === null || standardised === null || standardised === 0 ? null : Math.abs(residual / standardised);
}
