import { studentProbability, studentQuantile } from '../numerics/distributions.ts';

/** Values that exclude each other, with their probabilities; what is missing to 1 is a shift of 0. */
export type Alternatives = readonly { readonly shift: number; readonly weight: number }[];

/** The parts of a result's error that are known by their distribution. */
export interface ErrorParts {
  /** Standard uncertainty of all that is normal, and its effective degrees of freedom. */
  readonly u: number;
  readonly dof: number;
  /** Half-widths within which everything is equally likely. */
  readonly halfWidths: readonly number[];
  readonly alternatives: readonly Alternatives[];
}

/** An even distribution is taken as so many equal steps. */
const steps = 16;
const most = 4000;

/**
 * Half-width of the interval about the value that holds the error with probability 0.95: by Student's t where all parts are
 * normal (JCGM 100:2008, G.4), else from their joint distribution (JCGM 100:2008, G.1.5 and G.6.5, for a part that is not normal
 * and counts for much).
 */
export function expandedUncertainty({ u, dof, halfWidths, alternatives }: ErrorParts): number {
  const plain = u * studentQuantile(0.975, Math.max(dof, 1));
  let shifts: Alternatives = [{ shift: 0, weight: 1 }];
  for (const group of alternatives) shifts = joined(shifts, completed(group));
  // Wide even parts first; one that is narrow beside the rest is as good as normal.
  let rest = u;
  for (const half of halfWidths) {
    if (half < 0.2 * u) rest = Math.hypot(rest, half / Math.sqrt(3));
    else shifts = joined(shifts, evenSteps(half));
  }
  if (shifts.length === 1) return rest === u ? plain : rest * studentQuantile(0.975, Math.max(dof, 1));
  const reach = shifts.reduce((largest, { shift }) => Math.max(largest, Math.abs(shift)), 0);
  const held = (width: number) =>
    shifts.reduce((sum, { shift, weight }) => sum + weight * between(-width - shift, width - shift, rest, dof), 0);
  let low = 0;
  let high = reach + 4 * plain;
  for (let i = 0; i < 40 && high - low > 1e-4 * high; i++) {
    const middle = (low + high) / 2;
    if (held(middle) < 0.95) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

function between(from: number, to: number, u: number, dof: number): number {
  if (u === 0) return from <= 0 && to >= 0 ? 1 : 0;
  return studentProbability(to / u, Math.max(dof, 1)) - studentProbability(from / u, Math.max(dof, 1));
}

function completed(group: Alternatives): Alternatives {
  const kept = group.filter(({ weight }) => weight > 1e-4);
  const missing = 1 - kept.reduce((sum, { weight }) => sum + weight, 0);
  return missing > 1e-4 ? [{ shift: 0, weight: missing }, ...kept] : kept;
}

function evenSteps(half: number): Alternatives {
  return Array.from({ length: steps }, (_, i) => ({ shift: half * ((2 * i + 1) / steps - 1), weight: 1 / steps }));
}

function joined(a: Alternatives, b: Alternatives): Alternatives {
  if (a.length * b.length > most) return a;
  return a.flatMap((one) => b.map(({ shift, weight }) => ({ shift: one.shift + shift, weight: one.weight * weight })));
}
