import type { LeftOut, Point } from './reduction.ts';

/** A point fit for the reduction: it has a current and a frequency. */
export interface UsablePoint extends Point {
  readonly current_A: number;
  readonly f0_Hz: NonNullable<Point['f0_Hz']>;
}

/** The points that enter the fit and those that don't. */
export interface PointSelection {
  readonly used: readonly UsablePoint[];
  readonly leftOut: readonly LeftOut[];
  /** Doubtful points had to be used because the others were too few. */
  readonly doubtfulUsed: boolean;
}

/** Nothing that swings is slower; keeps squares of denormal numbers out. */
const leastFrequency_Hz = 1e-6;

/** Whether a point has what a fit needs, whatever its status. */
export function isUsable(point: Point): point is UsablePoint {
  return (
    point.current_A !== null &&
    Number.isFinite(point.current_A) &&
    point.f0_Hz !== null &&
    Number.isFinite(point.f0_Hz.value) &&
    point.f0_Hz.value > leastFrequency_Hz
  );
}

/**
 * Chooses the points: measured ones with a current. Doubtful ones stay out (they are shown against the fit) unless fewer
 * than two currents would be left without them. Those in `fibreRuns` tell the fibre's stiffness and are no steps.
 */
export function selectPoints(points: readonly Point[], fibreRuns: ReadonlySet<string> = new Set()): PointSelection {
  const candidates = points.filter(isUsable).filter(({ leftOut, id }) => leftOut === undefined && !fibreRuns.has(id));
  const sure = candidates.filter((point) => point.status === 'measured');
  const doubtfulUsed = distinctCurrents(sure) < 2 && candidates.length > sure.length;
  const used = (doubtfulUsed ? candidates : sure).filter((point) => point.status !== 'unmeasured');
  const kept = new Set(used.map((point) => point.id));
  const leftOut = points
    .filter((point) => !kept.has(point.id))
    .map((point) => ({
      id: point.id,
      reason: fibreRuns.has(point.id) && point.leftOut === undefined ? fibreRun : reason(point),
    }));
  return { used, leftOut, doubtfulUsed };
}

const fibreRun = 'made to find the fibre’s stiffness, no step of the sweep';

/** Number of different currents. */
export function distinctCurrents(points: readonly { readonly current_A: number }[]): number {
  return new Set(points.map((point) => point.current_A)).size;
}

function reason(point: Point): string {
  if (point.leftOut !== undefined) return point.leftOut.trim() === '' ? 'left out by the user' : point.leftOut;
  if (point.status === 'unmeasured' || point.f0_Hz === null) return 'no frequency could be measured';
  if (point.current_A === null) return 'its current has not been typed';
  if (point.status === 'doubtful') return 'its frequency is doubtful';
  return 'its current or frequency is not a number above zero';
}
