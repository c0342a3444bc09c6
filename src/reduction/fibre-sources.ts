import { chiSquareProbability } from '../numerics/distributions.ts';
import type { Estimate } from '../numerics/estimate.ts';
import type { Check } from '../oscillation/ring-down.ts';
import type { Apparatus, Body, RunFrequency } from './apparatus.ts';
import { type FibreLengthLine, fibreFromLengths } from './fibre-lengths.ts';
import * as say from './fibre-sentences.ts';
import { inertia } from './inertia.ts';
import { ownUncertainty } from './observations.ts';
import type { FibreLengths, FibreOrigin, FibreSource, Point } from './reduction.ts';
import { type BudgetInput, type Derived, derive } from './sensitivity.ts';
import { torqueConstant } from './torque-constant.ts';

/** The fibre's part of f0² in the sweep, Hz², as everything but the sweep itself has it. */
export interface FibrePart extends Derived {
  /** Change per relative change of the clock: twice the part that stems from segments of the session. */
  readonly byClock: number;
}

/** What is known of the fibre before the sweep is looked at. */
export interface FibreFindings {
  /** null: nothing that could be used. */
  readonly part: FibrePart | null;
  readonly sources: readonly FibreSource[];
  readonly lengths: FibreLengths | null;
  readonly checks: readonly Check[];
}

interface Found extends FibrePart {
  readonly origin: FibreOrigin;
  readonly segments: readonly string[];
  /** Its own input, not only what it shares with the magnet, has an uncertainty. */
  readonly stated: boolean;
}

/** Segments that were made to find the fibre's stiffness: they are no steps of the sweep. */
export function fibreSegments(apparatus: Apparatus | undefined): ReadonlySet<string> {
  const { run_without_field: free, runs_at_lengths: lengths } = apparatus?.fibre ?? {};
  const runs: readonly RunFrequency[] = [...(free === undefined ? [] : [free]), ...(lengths ?? [])];
  return new Set(runs.flatMap((run) => ('segment' in run ? [run.segment] : [])));
}

/**
 * Gathers what the apparatus says of the fibre: a typed stiffness, a run without field, runs at several lengths. Several sources
 * are combined with weights by their uncertainties and tested against each other; where they disagree, their uncertainty is
 * raised to the scatter (Birge's ratio). `magnet` is the inertia of the bar, null where it is not described.
 */
export function fibreFindings(
  apparatus: Apparatus | undefined,
  points: readonly Point[],
  magnet: Derived | null,
): FibreFindings {
  const fibre = apparatus?.fibre;
  if (fibre === undefined) return { part: null, sources: [], lengths: null, checks: [] };
  const checks: Check[] = [];
  const found: Found[] = [];
  const typed = fibre.stiffness_N_m_per_rad;
  if (typed !== undefined) {
    const stiffness = input('fibre stiffness', typed, fibre.u_stiffness_N_m_per_rad ?? 0, 'N m/rad');
    if (magnet === null) checks.push(say.stiffnessNeedsInertia());
    else
      found.push(
        source(
          'typed',
          [],
          joined([stiffness], [magnet], ([k], [j]) => k! / torqueConstant(1, j!)),
          0,
        ),
      );
  }
  const free = withoutField(apparatus, points, magnet, checks);
  if (free !== null) found.push(free);
  const { line, runs } = atLengths(apparatus, points, checks);
  const length_m = fibre.length_m;
  if (line !== null && length_m !== undefined) {
    const slope = { ...line.slope_Hz2_m, name: 'fibre’s part of f0² times its length', unit: 'Hz² m' };
    const length = input('length of the fibre', length_m, fibre.u_length_m ?? 0, 'm');
    const segments = runs.flatMap((run) => run.segment ?? []);
    const part = derive([slope, length], ([s, l]) => s! / l!);
    if (part.value > 0) found.push(source('runs at lengths', segments, part, segments.length === runs.length ? 1 : 0));
    else checks.push(say.lengthsShowNone());
  }
  const part = combine(found, checks);
  return {
    part: part?.combined ?? null,
    sources: found.map((one, i) => ({
      origin: one.origin,
      segments: one.segments,
      fibre_Hz2: one.value,
      u_fibre_Hz2: one.u,
      stiffness_N_m_per_rad: magnet === null ? null : torqueConstant(one.value, magnet.value),
      u_stiffness_N_m_per_rad:
        magnet === null ? null : joined([], [one, magnet], (_, [y, j]) => torqueConstant(y!, j!)).u,
      weight: part?.weights[i] ?? 0,
    })),
    lengths: line === null ? null : lengthsOf(line, runs),
    checks,
  };
}

/** A bar that the fibre alone turns back: the magnet itself, or another body of known inertia. */
function withoutField(
  apparatus: Apparatus | undefined,
  points: readonly Point[],
  magnet: Derived | null,
  checks: Check[],
): Found | null {
  const run = apparatus?.fibre?.run_without_field;
  if (run === undefined) return null;
  const f0 = frequencyOf(run, points, true, checks);
  if (f0 === null) return null;
  const frequency = { ...f0.own, name: 'frequency without field', unit: 'Hz' };
  const segments = 'segment' in run ? [run.segment] : [];
  const clock = segments.length;
  if (run.body === undefined)
    return source(
      'run without field',
      segments,
      derive([frequency], ([f]) => f! ** 2),
      clock,
    );
  if (magnet === null) {
    checks.push(say.stiffnessNeedsInertia());
    return null;
  }
  const part = joined([frequency], [otherBody(run.body), magnet], ([f], [body, j]) => (f! ** 2 * body!) / j!);
  return source('run without field', segments, part, clock);
}

interface LengthRun {
  readonly length_m: number;
  readonly u_length_m: number;
  readonly f0_Hz: Estimate;
  readonly segment: string | null;
}

function atLengths(apparatus: Apparatus | undefined, points: readonly Point[], checks: Check[]) {
  const given = apparatus?.fibre?.runs_at_lengths ?? [];
  if (given.length === 0) return { line: null, runs: [] };
  const runs = given.flatMap((run): LengthRun[] => {
    const f0 = frequencyOf(run, points, false, checks);
    if (f0 === null) return [];
    const segment = 'segment' in run ? run.segment : null;
    return [{ length_m: run.length_m, u_length_m: run.u_length_m ?? 0, f0_Hz: f0.own, segment }];
  });
  const currents = points.filter(({ id }) => runs.some(({ segment }) => segment === id)).map((p) => p.current_A);
  if (new Set(currents).size > 1) checks.push(say.lengthsAtCurrents());
  const line = fibreFromLengths(runs);
  if (line === null) checks.push(say.lengthsTooFew());
  else if (apparatus?.fibre?.length_m === undefined) checks.push(say.lengthInUseMissing());
  return { line, runs };
}

/** The frequency of a run, without what the clock has in common where it is that of a segment; null, with a check, where there is none. */
function frequencyOf(
  run: RunFrequency,
  points: readonly Point[],
  torsion: boolean,
  checks: Check[],
): { readonly own: Estimate } | null {
  if (!('segment' in run)) {
    return { own: { value: run.f0_Hz, u: run.u_f0_Hz ?? 0, dof: Number.POSITIVE_INFINITY } };
  }
  const point = points.find(({ id }) => id === run.segment);
  if (point?.leftOut !== undefined) {
    checks.push(say.runLeftOut(run.segment));
    return null;
  }
  const shown = point?.status === 'unmeasured' ? null : torsion ? (point?.torsion_Hz ?? point?.f0_Hz) : point?.f0_Hz;
  if (point === undefined || shown == null || !(shown.value > 0)) {
    checks.push(say.runUnmeasured(run.segment));
    return null;
  }
  if (point.status === 'doubtful') checks.push(say.runDoubtful(run.segment));
  return { own: { ...shown, u: ownUncertainty(shown, point.u_time_scale) } };
}

/** Weights by the uncertainties; sources that state none count only where no other is there, and then the first alone. */
function combine(found: readonly Found[], checks: Check[]) {
  const sure = found.filter(({ stated }) => stated);
  const used = sure.length > 0 ? sure : found.slice(0, 1);
  if (used.length === 0) return null;
  const raw = found.map((one) => (!used.includes(one) ? 0 : one.u > 0 ? one.u ** -2 : 1));
  const total = raw.reduce((sum, weight) => sum + weight, 0);
  const weights = raw.map((weight) => weight / total);
  const weighted = (values: readonly number[]) => values.reduce((sum, value, i) => sum + weights[i]! * value, 0);
  const plain = joined([], found, (_, values) => weighted(values));
  const byClock = weighted(found.map((one) => one.byClock));
  const { chiSquare, worst } = agreement(used);
  const dof = used.length - 1;
  const apart = dof > 0 && 1 - chiSquareProbability(chiSquare, dof) < 0.05;
  if (found.length > 1)
    checks.push(apart ? say.sourcesDisagree(found, worst) : say.sourcesCombined(found, weights, worst));
  const u_mean = total > 0 ? 1 / Math.sqrt(total) : 0;
  const extra = apart ? u_mean * Math.sqrt(chiSquare / dof - 1) : 0;
  const disagreement = { ...input('disagreement of the fibre’s sources', 0, extra, 'Hz²'), dof };
  const combined = extra > 0 ? joined([disagreement], [plain], ([d], [y]) => y! + d!) : plain;
  return { combined: { ...combined, byClock }, weights };
}

/** How far the sources are apart: chi-square about their mean, and the largest difference of two over its uncertainty. */
function agreement(used: readonly Found[]): { chiSquare: number; worst: number } {
  const total = used.reduce((sum, { u }) => sum + u ** -2, 0);
  let chiSquare = 0;
  let worst = 0;
  used.forEach((a, i) => {
    used.slice(i + 1).forEach((b) => {
      const gap = joined([], [a, b], (_, [x, y]) => x! - y!);
      if (!(gap.u > 0)) return;
      const inU = Math.abs(gap.value) / gap.u;
      worst = Math.max(worst, inU);
      // Pairs add up to chi-square where the sources are independent; what they share (the inertia) drops out of the gap.
      chiSquare += (inU ** 2 * (a.u ** 2 + b.u ** 2)) / (a.u ** 2 * b.u ** 2 * total);
    });
  });
  return { chiSquare, worst };
}

/** A function of own inputs and of derived quantities, whose inputs of one name are one input. */
function joined(
  own: readonly BudgetInput[],
  parts: readonly Derived[],
  of: (own: readonly number[], parts: readonly number[]) => number,
): Derived {
  const inputs = new Map(own.map((one) => [one.name, one]));
  for (const row of parts.flatMap(({ rows }) => rows)) {
    const { name, value, u, unit, dof } = row;
    if (!inputs.has(name)) inputs.set(name, { name, value, u, unit, dof });
  }
  const names = [...inputs.keys()];
  const places = parts.map(({ rows }) => rows.map(({ name }) => names.indexOf(name)));
  return derive([...inputs.values()], (values) =>
    of(
      values.slice(0, own.length),
      parts.map((part, k) => part.of(places[k]!.map((place) => values[place]!))),
    ),
  );
}

function source(origin: FibreOrigin, segments: readonly string[], part: Derived, clock: number): Found {
  return { ...part, origin, segments, stated: part.rows[0]!.u > 0, byClock: clock > 0 ? 2 * part.value : 0 };
}

function otherBody(body: Body): Derived {
  const derived = inertia(body);
  const rows = derived.rows.map((row) => ({
    ...row,
    name: `${row.name.replace(' of the bar', '')} of the other body`,
  }));
  return { ...derived, rows };
}

function lengthsOf(line: FibreLengthLine, runs: readonly LengthRun[]): FibreLengths {
  return {
    magnetic_Hz2: line.magnetic_Hz2.value,
    u_magnetic_Hz2: line.magnetic_Hz2.u,
    slope_Hz2_m: line.slope_Hz2_m.value,
    u_slope_Hz2_m: line.slope_Hz2_m.u,
    scatter_Hz2: line.scatter_Hz2,
    runs: runs.map(({ length_m, u_length_m, f0_Hz, segment }) => {
      const fitted = line.magnetic_Hz2.value + line.slope_Hz2_m.value / length_m;
      return {
        length_m,
        u_length_m,
        f0_Hz: f0_Hz.value,
        u_f0_Hz: f0_Hz.u,
        segment,
        fitted_f0_squared_Hz2: fitted,
        residual_Hz2: f0_Hz.value ** 2 - fitted,
      };
    }),
  };
}

function input(name: string, value: number, u: number, unit: string): BudgetInput {
  return { name, value, u, unit, dof: Number.POSITIVE_INFINITY };
}
