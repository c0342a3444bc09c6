import type { Meter } from './apparatus.ts';
import { blankRest, wrappedLine } from './bar-on-fibre.ts';
import type { ScaledCandidate } from './candidates.ts';
import { type Observations, observe } from './observations.ts';
import type { FittedPoint, Point } from './reduction.ts';
import { at, predict } from './sweep-model.ts';
import { isUsable, type UsablePoint } from './used-points.ts';

const degree = Math.PI / 180;

/** Every point with a current and a frequency against the fit, also those that did not enter it. */
export function fittedPoints(
  points: readonly Point[],
  data: Observations,
  candidate: ScaledCandidate | null,
  meter: Meter | undefined,
): FittedPoint[] {
  return points.filter(isUsable).map((point) => {
    const index = data.ids.indexOf(point.id);
    return candidate === null ? bare(point, meter) : against(point, index, candidate, meter);
  });
}

function bare(point: UsablePoint, meter: Meter | undefined): FittedPoint {
  const own = observe([point], meter);
  return {
    id: point.id,
    current_A: point.current_A,
    u_current_A: own.u_current_A[0]!,
    sweep: point.sweep,
    used: false,
    branch: null,
    f0_squared_Hz2: own.y[0]!,
    u_f0_squared_Hz2: 2 * point.f0_Hz.value * point.f0_Hz.u,
    fitted_f0_squared_Hz2: null,
    residual_Hz2: null,
    standardised_residual: null,
    equilibrium_deg: point.equilibrium_rad === null ? null : point.equilibrium_rad.value / degree,
    fitted_equilibrium_deg: null,
    equilibrium_residual_deg: null,
    standardised_equilibrium_residual: null,
  };
}

function against(
  point: UsablePoint,
  index: number,
  { fit, data }: ScaledCandidate,
  meter: Meter | undefined,
): FittedPoint {
  const shown = bare(point, meter);
  const p = fit.parameters;
  const rest = blankRest();
  const positive = point.current_A + p[at.along]! > 0;
  // A point that was not used is held against the line of its own side.
  const sign = fit.model.signs?.findIndex((_, i) => data.current_A[i]! + p[at.along]! > 0 === positive) ?? 0;
  if (!predict(fit.model, p, index >= 0 ? index : Math.max(sign, 0), point.current_A, rest)) {
    return { ...shown, used: index >= 0 };
  }
  const residual = shown.f0_squared_Hz2 - rest.y;
  const own = observe([point], meter);
  const frame = data.frames.indexOf(point.viewFrame);
  const base: FittedPoint = {
    ...shown,
    used: index >= 0,
    branch: fit.model.signs !== null && index >= 0 ? (fit.model.signs[index]! > 0 ? 1 : -1) : positive ? 1 : -1,
    fitted_f0_squared_Hz2: rest.y,
    residual_Hz2: residual,
    standardised_residual: residual / Math.hypot(own.u_y[0]!, rest.dy[0]! * own.u_current_A[0]!),
  };
  if (!fit.model.directions || frame < 0 || point.equilibrium_rad === null) return base;
  const direction = wrappedLine(rest.angle + p[at.zeros + frame]!);
  const away = wrappedLine(point.equilibrium_rad.value - direction);
  return {
    ...base,
    fitted_equilibrium_deg: direction / degree,
    equilibrium_residual_deg: away / degree,
    standardised_equilibrium_residual: away / Math.hypot(own.u_angle[0]!, rest.dAngle[0]! * own.u_current_A[0]!),
  };
}
