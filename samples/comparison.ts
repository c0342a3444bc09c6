import { type Measurement, measureSession, type Progress } from '../src/measure.ts';
import type { SegmentResult } from '../src/report/results.ts';
import { alignedRows } from '../src/report/text-table.ts';
import { readSession } from '../src/session/read-session.ts';
import type { Trace } from '../src/tracking/trace.ts';
import type { Case, FrameTruth, TrueSegment } from './truth-file.ts';

/** One segment, measured against true. */
export interface SegmentComparison {
  readonly measured: SegmentResult;
  readonly truth: TrueSegment;
  /** f0 - true f0, Hz; null where unmeasured. */
  readonly error_Hz: number | null;
  /** Error of f0 in standard uncertainties. */
  readonly ratio: number | null;
  readonly relativeU: number | null;
  /** Scatter of the angle about the true one after its mean is taken off, degrees; without true angles the fit's residual. */
  readonly angleNoise_deg: number | null;
  /** Mean of angle - true angle, degrees; without true angles that of the rest direction. */
  readonly angleBias_deg: number | null;
  readonly equilibriumRatio: number | null;
  readonly gammaRatio: number | null;
  /** What is wrong with it, as short words; empty for a sound one. */
  readonly faults: readonly string[];
}

/** A quantity of the reduction, measured against true. */
export interface ReductionComparison {
  readonly name: string;
  readonly value: number | null;
  readonly u: number | null;
  readonly truth: number;
  readonly ratio: number | null;
}

/** A whole session, measured against true. */
export interface Comparison {
  readonly name: string;
  readonly measurement: Measurement;
  readonly segments: readonly SegmentComparison[];
  readonly reduction: readonly ReductionComparison[];
}

const DEG = 180 / Math.PI;
/** Limits a segment that ought to be measured must keep. */
export const LIMITS = { ratio: 3, relativeU: 3e-4 } as const;

const REDUCED = [
  'ambient_T',
  'misalignment_deg',
  'moment_to_inertia',
  'moment_A_m2',
  'fibre_stiffness_N_m_per_rad',
  'slope_Hz2_per_A',
  'intercept_Hz2',
  'coil_constant_T_per_A',
  'inertia_kg_m2',
] as const;

/** Difference of two directions of a bar, within (-90, 90] degrees. */
function barDifference(a_deg: number, b_deg: number): number {
  const difference = a_deg - b_deg;
  return difference - 180 * Math.round(difference / 180);
}

function angleErrors(trace: Trace | null, frames: FrameTruth | null): { noise_deg: number; bias_deg: number } | null {
  if (trace === null || frames === null || trace.unit !== 'rad' || trace.angle.length < 3) return null;
  const errors = Array.from(trace.angle, (angle, i) => barDifference(angle * DEG, frames[trace.frame_index[i]!] ?? 0));
  const bias_deg = errors.reduce((sum, e) => sum + e, 0) / errors.length;
  const noise_deg = Math.sqrt(errors.reduce((sum, e) => sum + (e - bias_deg) ** 2, 0) / (errors.length - 1));
  return { noise_deg, bias_deg };
}

function over(difference: number | null, u: number | null): number | null {
  return difference === null || u === null || u === 0 ? null : difference / u;
}

function compareSegment(
  measured: SegmentResult,
  truth: TrueSegment,
  trace: Trace | null,
  frames: FrameTruth | null,
): SegmentComparison {
  const error_Hz = measured.f0_Hz === null ? null : measured.f0_Hz - truth.f0_Hz;
  const ratio = over(error_Hz, measured.u_f0_Hz);
  const relativeU = measured.u_f0_Hz === null || measured.f0_Hz === null ? null : measured.u_f0_Hz / measured.f0_Hz;
  const rest =
    measured.equilibrium_deg === null ? null : barDifference(measured.equilibrium_deg, truth.equilibrium_deg);
  const angles = angleErrors(trace, frames);
  const faults: string[] = [];
  if (truth.expected_status === 'measured') {
    if (measured.status !== 'measured') faults.push(measured.status);
    if (relativeU !== null && relativeU >= LIMITS.relativeU) faults.push('u large');
  }
  if (ratio !== null && Math.abs(ratio) > LIMITS.ratio && measured.status === 'measured') faults.push('beyond 3 u');
  return {
    measured,
    truth,
    error_Hz,
    ratio,
    relativeU,
    angleNoise_deg: angles?.noise_deg ?? measured.residual_rms_deg,
    angleBias_deg: angles?.bias_deg ?? rest,
    equilibriumRatio: over(rest, measured.u_equilibrium_deg),
    gammaRatio: over(
      measured.gamma_per_s === null ? null : measured.gamma_per_s - truth.gamma_per_s,
      measured.u_gamma_per_s,
    ),
    faults,
  };
}

/** Measures the session of a case and compares it with the truth. */
export async function compareCase(
  one: Case,
  options: {
    readonly signal?: AbortSignal;
    readonly onProgress?: (progress: Progress) => void;
    readonly cores?: number;
  } = {},
): Promise<Comparison> {
  const measurement = await measureSession(await readSession(one.sessionPath), options);
  const { results } = measurement;
  const segments = results.segments.flatMap((measured) => {
    const truth = one.truth.segments.find((segment) => segment.id === measured.id);
    if (truth === undefined) return [];
    return [compareSegment(measured, truth, measurement.segments.get(measured.id)?.trace ?? null, one.frames)];
  });
  const reduction = REDUCED.flatMap((name): ReductionComparison[] => {
    const truth = one.truth.apparatus[name];
    if (truth === undefined) return [];
    const value = results.reduction[name];
    const u = results.reduction[`u_${name}`];
    return [{ name, value, u, truth, ratio: over(value === null ? null : value - truth, u) }];
  });
  return { name: one.name, measurement, segments, reduction };
}

const fixed = (value: number | null, digits: number): string => (value === null ? '–' : value.toFixed(digits));
const short = (value: number | null, digits: number): string => (value === null ? '–' : value.toPrecision(digits));
const parts = (value: number | null): string =>
  value === null ? '–' : `${(value * 1e6).toFixed(value < 1e-4 ? 1 : 0)} ppm`;

/** The segments of a comparison as lines of a table. */
export function segmentLines(comparison: Comparison): string[] {
  const head = [
    'id',
    'I / A',
    'status',
    'f0 / Hz',
    'true',
    'error',
    'u',
    'err/u',
    'noise/deg',
    'bias/deg',
    'rest/u',
    'gamma/u',
    'used',
    'refused',
    'remarks',
  ];
  const rows = comparison.segments.map((segment) => {
    const { measured: m, truth } = segment;
    const codes = m.checks.filter((check) => check.severity !== 'note').map((check) => check.code);
    const expected = m.status === truth.expected_status ? m.status : `${m.status} (${truth.expected_status})`;
    return [
      m.id,
      m.current_A === null ? '–' : m.current_A.toFixed(3),
      expected,
      fixed(m.f0_Hz, 6),
      fixed(truth.f0_Hz, 6),
      parts(segment.error_Hz === null ? null : segment.error_Hz / truth.f0_Hz),
      parts(segment.relativeU),
      fixed(segment.ratio, 2),
      fixed(segment.angleNoise_deg, 4),
      fixed(segment.angleBias_deg, 4),
      fixed(segment.equilibriumRatio, 1),
      fixed(segment.gammaRatio, 1),
      String(m.frames_used),
      String(m.frames_refused),
      [...segment.faults.map((fault) => `! ${fault}`), ...codes].join(', '),
    ];
  });
  return alignedRows([head, ...rows], ['left', 'right', 'left', ...Array<'right'>(11).fill('right'), 'left'], 2);
}

/** The reduction of a comparison as lines of a table. */
export function reductionLines(comparison: Comparison): string[] {
  const rows = comparison.reduction.map((one) => [
    one.name,
    short(one.value, 7),
    short(one.u, 2),
    short(one.truth, 7),
    fixed(one.ratio, 2),
  ]);
  return alignedRows(
    [['quantity', 'measured', 'u', 'true', 'err/u'], ...rows],
    ['left', 'right', 'right', 'right', 'right'],
    2,
  );
}

/** Root mean square of the errors of f0 over their uncertainties, of the segments that ought to be and were measured; null without any. */
export function rmsRatio(segments: readonly SegmentComparison[]): number | null {
  const counted = segments.filter(
    ({ measured, truth }) => truth.expected_status === 'measured' && measured.status === 'measured',
  );
  const ratios = counted.flatMap(({ ratio }) => (ratio === null ? [] : [ratio]));
  return ratios.length === 0 ? null : Math.sqrt(ratios.reduce((sum, r) => sum + r * r, 0) / ratios.length);
}
