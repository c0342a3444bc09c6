import type { Session } from '../../contract.ts';
import { MAGNET_FIELDS, partOf, type RigField, valuesOf } from './apparatus-fields.ts';

export type Fibre = NonNullable<NonNullable<Session['apparatus']>['fibre']>;
type Run = NonNullable<Fibre['run_without_field']>;
type LengthRun = NonNullable<Fibre['runs_at_lengths']>[number];

/** Where the frequency of a run comes from: there is none, it is typed, or it is that of a segment. */
export type RunOrigin = 'none' | 'typed' | 'segment';
/** What the fibre turned back in a run without field. */
export type BodyKind = 'magnet' | 'cylinder' | 'bar' | 'inertia';
type Values = Readonly<Record<string, number | null>>;

/** One run as the form holds it. */
export interface RunDraft {
  readonly origin: RunOrigin;
  /** `f0_Hz`, `u_f0_Hz` and, on several lengths, `length_m`, `u_length_m`. */
  readonly values: Values;
  readonly segment: string;
}

/** The fibre as the form holds it, also where it is not complete yet. */
export interface FibreDraft {
  readonly values: Values;
  readonly free: RunDraft;
  readonly body: BodyKind;
  readonly bodyValues: Values;
  readonly lengths: readonly RunDraft[];
}

/** The stiffness where it is known already. */
export const STIFFNESS_FIELD: RigField = {
  key: 'stiffness_N_m_per_rad',
  label: 'Torsional stiffness, if known',
  unit: 'nN m/rad',
  factor: 1e9,
  optional: true,
  zero: true,
};
/** Length of the fibre in the sweep, and in one of several runs. */
export const LENGTH_FIELD: RigField = {
  key: 'length_m',
  label: 'Fibre’s length in the sweep',
  unit: 'mm',
  factor: 1e3,
};
export const FREQUENCY_FIELD: RigField = { key: 'f0_Hz', label: 'Frequency', unit: 'Hz', factor: 1 };

const EMPTY_RUN: RunDraft = { origin: 'none', values: {}, segment: '' };
/** A further length, to be filled in. */
export const NEW_LENGTH: RunDraft = { ...EMPTY_RUN, origin: 'typed' };

/** Fields of another body; the magnet itself needs none. */
export function bodyFields(kind: BodyKind): readonly RigField[] {
  return kind === 'magnet' ? [] : MAGNET_FIELDS[kind].filter(({ key }) => kind !== 'inertia' || key !== 'length_m');
}

/** What the session holds of a fibre, as the form's draft. */
export function fibreDraft(fibre: Fibre | undefined): FibreDraft {
  const free = fibre?.run_without_field;
  const body = free?.body;
  return {
    values: valuesOf(fibre),
    free: free === undefined ? EMPTY_RUN : runDraft(free),
    body: body === undefined ? 'magnet' : 'shape' in body ? body.shape : 'inertia',
    bodyValues: valuesOf(body),
    lengths: (fibre?.runs_at_lengths ?? []).map(runDraft),
  };
}

function runDraft(run: Run | LengthRun): RunDraft {
  const segment = 'segment' in run ? run.segment : '';
  return { origin: segment === '' ? 'typed' : 'segment', values: valuesOf(run), segment };
}

/** The complete parts of a draft as the session takes them; undefined: nothing is complete. */
export function fibreOf(draft: FibreDraft): Fibre | undefined {
  const stiffness = partOf([STIFFNESS_FIELD], draft.values) ?? {};
  const length = partOf([LENGTH_FIELD], draft.values);
  const free = withoutField(draft);
  const runs = draft.lengths.flatMap((run) => runOf(run, [LENGTH_FIELD]) ?? []);
  const fibre = {
    ...stiffness,
    ...length,
    ...(free && { run_without_field: free }),
    ...(length !== null && runs.length > 0 && { runs_at_lengths: runs }),
  };
  return Object.keys(fibre).length === 0 ? undefined : (fibre as Fibre);
}

function withoutField({ free, body, bodyValues }: FibreDraft): object | null {
  const run = runOf(free, []);
  if (run === null || body === 'magnet') return run;
  const other = partOf(bodyFields(body), bodyValues, body === 'inertia' ? {} : { shape: body });
  return other === null ? null : { ...run, body: other };
}

function runOf({ origin, values, segment }: RunDraft, others: readonly RigField[]): object | null {
  const rest = partOf(others, values);
  if (rest === null || origin === 'none') return null;
  if (origin === 'segment') return segment === '' ? null : { ...rest, segment };
  const typed = partOf([FREQUENCY_FIELD], values);
  return typed === null ? null : { ...rest, ...typed };
}

/** What a draft still lacks before its runs can be used, in words; empty: nothing. */
export function fibreLacks(draft: FibreDraft): readonly string[] {
  const lacks: string[] = [];
  const { free, body, bodyValues, lengths } = draft;
  if (free.origin !== 'none' && runOf(free, []) === null) lacks.push('the frequency without field');
  if (free.origin !== 'none' && body !== 'magnet' && partOf(bodyFields(body), bodyValues) === null) {
    lacks.push('the other body’s mass and dimensions');
  }
  const whole = lengths.filter((run) => runOf(run, [LENGTH_FIELD]) !== null).length;
  if (whole < lengths.length) lacks.push('length and frequency of every run');
  if (lengths.length > 0 && draft.values.length_m == null) lacks.push('the fibre’s length in the sweep');
  if (lengths.length === 1) lacks.push('a second length');
  return lacks;
}

/** The draft to show when the session's fibre has changed: what the user has begun to type stays while the session agrees with it. */
export function syncedDraft(draft: FibreDraft, fibre: Fibre | undefined): FibreDraft {
  return JSON.stringify(sorted(fibreOf(draft))) === JSON.stringify(sorted(fibre)) ? draft : fibreDraft(fibre);
}

function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted);
  if (typeof value !== 'object' || value === null) return value ?? null;
  const entries = Object.entries(value).map(([key, inner]) => [key, sorted(inner)] as const);
  return Object.fromEntries(entries.sort(([a], [b]) => (a < b ? -1 : 1)));
}
