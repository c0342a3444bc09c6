import type { RingDownCurves } from './plots/ring-down-plot.ts';
import type { FitColumns, TraceColumns } from './trace-csv.ts';

/** Columns of a trace and its fit as a plot takes them: in degrees, or px where the motion is not scaled. */
export function traceCurves(id: string, trace: TraceColumns, fit: FitColumns | null): RingDownCurves {
  const scale = trace.unit === 'rad' ? 180 / Math.PI : 1;
  const scaled = (column: ArrayLike<number>) => Float64Array.from(column, (value) => value * scale);
  return {
    id,
    time_s: trace.time_s,
    angle: scaled(trace.angle),
    unit: trace.unit === 'rad' ? 'deg' : 'px',
    fitted: fit ? scaled(fit.fitted) : null,
    residual: fit ? scaled(fit.residual) : null,
    used: fit ? fit.usedRows : null,
  };
}
