import { acrossShifts } from './across-shift.ts';
import type { Meter } from './apparatus.ts';
import { u_fibreShare, u_misalignment_rad, u_twist_rad } from './assumptions.ts';
import type { ScaledCandidate } from './candidates.ts';
import type { CoilConstant } from './coil-constant.ts';
import type { FibrePart } from './fibre-sources.ts';
import type { ResultName } from './reduction.ts';
import { type ResultInputs, type ResultValues, resultNames, results } from './results.ts';
import type { Derived } from './sensitivity.ts';
import { at } from './sweep-model.ts';

/** One independent source of uncertainty and how every result answers to it. */
export interface Source {
  /** Name of its row in the budget; sources of one name share a row. */
  readonly row: string;
  /** Value, or null where the row stands for many. */
  readonly value: number | null;
  readonly u: number;
  readonly unit: string;
  readonly dof: number;
  /** Sources whose uncertainties were raised by one factor have its degrees of freedom together; null: this one alone. */
  readonly pool: string | null;
  /**
   * `normal`: a normal distribution, or Student's where `dof` is finite; `even`: all values within √3 u equally likely; `either`:
   * the sources of this row exclude each other, and each shifts the result by its sensitivity with the probability u².
   */
  readonly law: 'normal' | 'even' | 'either';
  /** Change of each result per change of the source. */
  readonly sensitivity: { readonly [name in ResultName]?: number };
}

/** What the sources are drawn from. */
export interface SourceContext {
  readonly inputs: ResultInputs;
  readonly candidate: ScaledCandidate | null;
  readonly coil: CoilConstant | null;
  readonly inertia: Derived | null;
  readonly meter: Meter | undefined;
  /** The fibre's part of f0² as known beforehand; null: not known. */
  readonly fibre: FibrePart | null;
}

/** Everything that makes the results uncertain, each source independent of the others. */
export function sources(context: SourceContext): Source[] {
  const gradient = gradients(context.inputs);
  return [
    ...(context.candidate === null ? [] : fitSources(context, context.candidate, gradient)),
    ...dimensionSources(context, gradient),
  ];
}

/** Derivatives of every result by the fit's parameters and by coil constant, felt constant and inertia. */
interface Gradients {
  readonly parameters: readonly ResultValues[];
  readonly coil: ResultValues;
  readonly felt: ResultValues;
  readonly inertia: ResultValues;
}

function gradients(inputs: ResultInputs): Gradients {
  const by = (typical: number, moved: (step: number) => ResultInputs): ResultValues => {
    const step = 1e-5 * (Math.abs(typical) || 1e-3);
    const high = results(moved(step));
    const low = results(moved(-step));
    return Object.fromEntries(
      resultNames.map((name) => {
        const [above, below] = [high[name], low[name]];
        if (above === null || below === null) return [name, null];
        // A direction given modulo half a turn may step over its end.
        const gap =
          name === 'misalignment_deg' ? above - below - 180 * Math.round((above - below) / 180) : above - below;
        return [name, gap / (2 * step)];
      }),
    ) as ResultValues;
  };
  const { parameters: p, coil_T_per_A: coil, felt_T_per_A: felt, inertia_kg_m2: j } = inputs;
  const bend = (k: number) => (step: number) => ({ ...inputs, parameters: p!.map((v, i) => (i === k ? v + step : v)) });
  const scale = p === null ? 0 : Math.abs(p[at.along]!);
  const typical = (k: number) => p![k]! || (k === at.across ? scale : k === at.fibre ? p![at.slope]! * scale : 1);
  return {
    parameters: p === null ? [] : Array.from(p, (_, k) => by(typical(k), bend(k))),
    coil: by(coil ?? 1, (step) => ({ ...inputs, coil_T_per_A: coil === null ? null : coil + step })),
    felt: by(felt ?? 1, (step) => ({ ...inputs, felt_T_per_A: felt === null ? null : felt + step })),
    inertia: by(j ?? 1, (step) => ({ ...inputs, inertia_kg_m2: j === null ? null : j + step })),
  };
}

type Sensitivity = Source['sensitivity'];

/** Sensitivity of the results to something that moves the parameters by `shift`. */
function through(gradient: Gradients, shift: (parameter: number) => number): Sensitivity {
  const out: { [name in ResultName]?: number } = {};
  for (const name of resultNames) {
    let sum = 0;
    let known = true;
    gradient.parameters.forEach((by, k) => {
      const value = by[name];
      if (value === null) known = false;
      else sum += value * shift(k);
    });
    if (known && sum !== 0) out[name] = sum;
  }
  return out;
}

function plus(a: Sensitivity, b: ResultValues, factor: number): Sensitivity {
  const out = { ...a };
  for (const name of resultNames) {
    const value = b[name];
    if (value !== null && value * factor !== 0) out[name] = (out[name] ?? 0) + value * factor;
  }
  return out;
}

function fitSources(context: SourceContext, candidate: ScaledCandidate, gradient: Gradients): Source[] {
  const { data, fit } = candidate;
  const { gain } = fit;
  const sum = (columns: readonly Float64Array[], weight: (i: number) => number) => (k: number) =>
    columns[k]!.reduce((total, value, i) => total + value * weight(i), 0);
  const dof = (scale: number, own: number, part: { dof: number }) => (scale > 1 ? Math.max(part.dof, 1) : own);
  const pool = (scale: number, name: string) => (scale > 1 ? name : null);
  const many: Source[] = [];
  for (let i = 0; i < data.y.length; i++) {
    const one = (columns: readonly Float64Array[]) => through(gradient, (k) => columns[k]![i]!);
    const scatter = (own: number) => dof(candidate.scaleFrequencies, own, fit.parts.frequencies);
    const raised = pool(candidate.scaleFrequencies, 'frequencies');
    many.push(
      {
        row: 'frequencies',
        value: null,
        u: data.u_y[i]!,
        unit: 'Hz²',
        dof: scatter(data.dof_y[i]!),
        pool: raised,
        law: 'normal',
        sensitivity: one(gain.y),
      },
      {
        row: 'currents, each step',
        value: null,
        u: data.u_current_A[i]!,
        unit: 'A',
        dof: scatter(Number.POSITIVE_INFINITY),
        pool: raised,
        law: 'normal',
        sensitivity: one(gain.current),
      },
    );
    if (!fit.model.directions || data.frame[i]! < 0) continue;
    many.push({
      row: 'rest directions',
      value: null,
      u: data.u_angle[i]!,
      unit: 'rad',
      dof: dof(candidate.scaleDirections, data.dof_angle[i]!, fit.parts.directions),
      pool: pool(candidate.scaleDirections, 'directions'),
      law: 'normal',
      sensitivity: one(gain.angle),
    });
  }
  const common: Source[] = [
    {
      row: 'clock, common to all',
      value: 1,
      u: Math.max(...data.u_clock),
      unit: '1',
      dof: Number.POSITIVE_INFINITY,
      pool: null,
      law: 'normal',
      // A stiffness found with the same clock moves with it too.
      sensitivity: through(
        gradient,
        (k) => sum(gain.y, (i) => 2 * data.y[i]!)(k) + fibreGain(candidate)(k) * (context.fibre?.byClock ?? 0),
      ),
    },
    {
      row: 'meter’s scale, common to all',
      value: 1,
      u: context.meter?.u_gain ?? 0,
      unit: '1',
      dof: Number.POSITIVE_INFINITY,
      pool: null,
      law: 'normal',
      sensitivity: through(
        gradient,
        sum(gain.current, (i) => data.current_A[i]!),
      ),
    },
    {
      row: 'meter’s zero, common to all',
      value: 0,
      u: context.meter?.u_zero_A ?? 0,
      unit: 'A',
      dof: Number.POSITIVE_INFINITY,
      pool: null,
      law: 'normal',
      sensitivity: through(
        gradient,
        sum(gain.current, () => 1),
      ),
    },
  ];
  return [...many, ...common, ...priorSources(candidate, gradient), ...unseenAcross(candidate, gradient)];
}

/** Change of each parameter per change of the fibre's part as known beforehand; 0 where it is not known. */
function fibreGain({ fibre, fit }: ScaledCandidate): (parameter: number) => number {
  const prior = fibre === 'given' ? fit.model.priors.findIndex(({ parameter }) => parameter === at.fibre) : -1;
  return (k) => (prior < 0 ? 0 : fit.gain.prior[k]![prior]!);
}

function priorSources(candidate: ScaledCandidate, gradient: Gradients): Source[] {
  const { fit, fibre } = candidate;
  const p = fit.parameters;
  const dof = Number.POSITIVE_INFINITY;
  const pool = null;
  const out: Source[] = [];
  fit.model.priors.forEach((prior, index) => {
    const by = (factor: number) => through(gradient, (k) => fit.gain.prior[k]![index]! * factor);
    if (prior.parameter === at.twist) {
      const degree = Math.PI / 180;
      out.push({
        row: 'fibre’s untwisted direction',
        value: 0,
        u: prior.u / degree,
        unit: '°',
        dof,
        pool,
        law: 'normal',
        sensitivity: by(degree),
      });
    } else if (fibre === 'assumed') {
      // Of the fibre as it is, not of what is assumed: data that pull a little at the assumption don't tell it.
      const torque = prior.u / u_fibreShare / fit.gain.prior[at.fibre]![index]!;
      out.push({
        row: 'fibre’s share, not separated',
        value: 0,
        u: u_fibreShare,
        unit: '1',
        dof,
        pool,
        law: 'even',
        sensitivity: by(torque),
      });
    }
  });
  // Neither share nor untwisted direction is known: their product turns the rest directions, and is no first-order effect of either.
  if (fibre === 'assumed' && fit.model.directions) {
    const size = Math.hypot(p[at.along]!, p[at.across]!);
    const turn = through(gradient, (k) => (k === at.along ? -p[at.across]! : k === at.across ? p[at.along]! : 0));
    const u = size > 0 ? u_fibreShare * u_twist_rad : 0;
    out.push({
      row: 'fibre’s share times its untwisted direction',
      value: 0,
      u,
      unit: '1',
      dof,
      pool,
      law: 'normal',
      sensitivity: turn,
    });
  }
  return out;
}

/**
 * A field component across the coil axis that was not fitted: what a misalignment of usual size does to a straight line. The
 * effect goes with the square of the angle, so that its root mean square for a normal angle is √3 times that at one u.
 */
function unseenAcross(candidate: ScaledCandidate, gradient: Gradients): Source[] {
  const { data, fit, scenarios } = candidate;
  if (!fit.model.fixed.across || scenarios.length > 0) return [];
  const shifts = acrossShifts(fit, data.current_A, u_misalignment_rad);
  const effect = (k: number) => fit.gain.y[k]!.reduce((total, value, i) => total + value * shifts[i]!, 0);
  const u = (u_misalignment_rad * 180) / Math.PI;
  return [
    {
      row: 'misalignment, not seen',
      value: 0,
      u,
      unit: '°',
      dof: Number.POSITIVE_INFINITY,
      pool: null,
      law: 'normal',
      sensitivity: through(gradient, (k) => (Math.sqrt(3) * effect(k)) / u),
    },
  ];
}

/** Inputs of coil, bar and fibre; one that enters several (the bar's length) is one source. */
function dimensionSources({ inputs, coil, inertia, fibre, candidate }: SourceContext, gradient: Gradients): Source[] {
  const byName = new Map<string, Source>();
  const add = (source: Source) => {
    const other = byName.get(source.row);
    if (other === undefined) byName.set(source.row, source);
    else byName.set(source.row, { ...source, sensitivity: joined(other.sensitivity, source.sensitivity) });
  };
  for (const row of coil?.rows ?? []) {
    const both = plus(plus({}, gradient.coil, row.sensitivity), gradient.felt, row.sensitivity);
    add({
      row: row.name,
      value: row.value,
      u: row.u,
      unit: row.unit,
      dof: row.dof,
      pool: null,
      law: 'normal',
      sensitivity: both,
    });
  }
  if (coil !== null && coil.turningShift !== 0) {
    add({
      row: 'unevenness of the coil field over the bar',
      value: 0,
      u: Math.abs(coil.turningShift) / Math.sqrt(3),
      unit: '1',
      dof: Number.POSITIVE_INFINITY,
      pool: null,
      law: 'normal',
      sensitivity: plus({}, gradient.felt, inputs.felt_T_per_A ?? 0),
    });
  }
  for (const row of inertia?.rows ?? []) {
    const { name, value, u, unit, dof, sensitivity } = row;
    add({
      row: name,
      value,
      u,
      unit,
      dof,
      pool: null,
      law: 'normal',
      sensitivity: plus({}, gradient.inertia, sensitivity),
    });
  }
  // What is known of the fibre may hold the bar's dimensions as well.
  const gain = candidate?.fibre === 'given' ? fibreGain(candidate) : null;
  for (const row of gain === null ? [] : (fibre?.rows ?? [])) {
    const { name, value, u, unit, dof } = row;
    const sensitivity = through(gradient, (k) => gain!(k) * row.sensitivity);
    add({ row: name, value, u, unit, dof, pool: null, law: 'normal', sensitivity });
  }
  return [...byName.values()];
}

function joined(a: Sensitivity, b: Sensitivity): Sensitivity {
  const out: { [name in ResultName]?: number } = { ...a };
  for (const name of resultNames) if (b[name] !== undefined) out[name] = (out[name] ?? 0) + b[name];
  return out;
}
