import { wrappedLine } from './bar-on-fibre.ts';
import type { ResultName } from './reduction.ts';
import { at } from './sweep-model.ts';
import { torqueConstant } from './torque-constant.ts';

/** What the results are worked out from. */
export interface ResultInputs {
  /** Parameters of the fit, in the order of `at`; null without a fit. */
  readonly parameters: Float64Array | null;
  /** Sign of the straight line's slope: -1 where all points lie beyond the reversal. */
  readonly side: 1 | -1;
  /** Both components of the ambient field are known. */
  readonly horizontal: boolean;
  /** The fibre's part is known. */
  readonly fibre: boolean;
  /** Coil constant from the apparatus, T/A; null: not described. */
  readonly coil_T_per_A: number | null;
  /** The same as the bar feels it. */
  readonly felt_T_per_A: number | null;
  readonly inertia_kg_m2: number | null;
}

/** All results in one unit each, null where not to be had. */
export type ResultValues = { readonly [name in ResultName]: number | null };

/** Unit of every result, as text for people. */
export const resultUnits: { readonly [name in ResultName]: string } = {
  ambient_T: 'T',
  apparent_ambient_T: 'T',
  ambient_along_axis_T: 'T',
  ambient_across_axis_T: 'T',
  misalignment_deg: '°',
  slope_Hz2_per_A: 'Hz²/A',
  intercept_Hz2: 'Hz²',
  coil_constant_T_per_A: 'T/A',
  moment_to_inertia: 'A/kg',
  moment_A_m2: 'A m²',
  inertia_kg_m2: 'kg m²',
  fibre_stiffness_N_m_per_rad: 'N m/rad',
  fibre_share: '1',
};

/** Names in the order in which they are listed. */
export const resultNames = Object.keys(resultUnits) as readonly ResultName[];

/** Turns fitted parameters, coil constant and inertia into field, moment and stiffness. */
export function results(inputs: ResultInputs): ResultValues {
  const { parameters: p, coil_T_per_A: coil, felt_T_per_A: k, inertia_kg_m2: j, horizontal } = inputs;
  const none = Object.fromEntries(resultNames.map((name) => [name, null])) as ResultValues;
  if (p === null) return { ...none, coil_constant_T_per_A: coil, inertia_kg_m2: j };
  const slope = p[at.slope]!;
  const along = p[at.along]!;
  const across = p[at.across]!;
  const fibre = p[at.fibre]!;
  const size = horizontal ? Math.hypot(along, across) : Math.abs(along);
  const ratio = k === null ? null : torqueConstant(slope, 1) / k;
  return {
    ambient_T: k === null ? null : size * k,
    apparent_ambient_T: k === null ? null : (size + fibre / slope) * k,
    ambient_along_axis_T: k === null ? null : along * k,
    ambient_across_axis_T: k === null || !horizontal ? null : across * k,
    misalignment_deg: horizontal ? (wrappedLine(Math.atan2(across, along)) * 180) / Math.PI : null,
    slope_Hz2_per_A: inputs.side * slope,
    intercept_Hz2: inputs.side * slope * along + fibre,
    coil_constant_T_per_A: coil,
    moment_to_inertia: ratio,
    moment_A_m2: ratio === null || j === null ? null : ratio * j,
    inertia_kg_m2: j,
    fibre_stiffness_N_m_per_rad: inputs.fibre && j !== null ? torqueConstant(fibre, j) : null,
    fibre_share: inputs.fibre && size > 0 ? fibre / (slope * size) : null,
  };
}
