import type { ResultName } from '../reduction/reduction.ts';

/** How a result of the reduction is called and shown. */
export interface Quantity {
  readonly name: ResultName;
  readonly title: string;
  /** Symbol as trade usage writes it; `_` precedes what stands lowered. */
  readonly symbol: string;
  /** Unit shown, and how many of them make one SI unit of the stored value. */
  readonly unit: string;
  readonly perUnit: number;
  readonly description: string;
}

const quantity = (
  name: ResultName,
  title: string,
  symbol: string,
  [unit, perUnit]: readonly [string, number],
  description: string,
): Quantity => ({ name, title, symbol, unit, perUnit, description });

const microtesla = ['µT', 1e6] as const;

/** The results of the reduction in the order in which they are shown. */
export const quantities: readonly Quantity[] = [
  quantity(
    'ambient_T',
    'Ambient horizontal field',
    'B',
    microtesla,
    'Horizontal field of the place; its component along the coil axis where only frequencies are used. Always positive.',
  ),
  quantity(
    'apparent_ambient_T',
    'Field with the fibre’s share in it',
    'B + κ/m',
    microtesla,
    'What a plain line shows as field: the ambient field plus fibre stiffness over moment.',
  ),
  quantity(
    'ambient_along_axis_T',
    'Component along the coil axis',
    'B_∥',
    microtesla,
    'Component of the ambient field along the field of a positive current.',
  ),
  quantity(
    'ambient_across_axis_T',
    'Component across the coil axis',
    'B_⊥',
    microtesla,
    'Component of the ambient field across the coil axis, positive anticlockwise of the field of a positive current.',
  ),
  quantity(
    'misalignment_deg',
    'Misalignment',
    'α',
    ['°', 1],
    'Direction of the ambient field from the coil axis, anticlockwise seen from above, in (-90, 90] degrees.',
  ),
  quantity('slope_Hz2_per_A', 'Slope', 'df_0²/dI', ['Hz²/A', 1], 'Slope of f0² against current, m k / (4 pi² J).'),
  quantity(
    'intercept_Hz2',
    'Intercept',
    'f_0²(0)',
    ['Hz²', 1],
    'f0² of the fitted line at no current, (m B + kappa) / (4 pi² J), B along the coil axis.',
  ),
  quantity(
    'coil_constant_T_per_A',
    'Coil constant',
    'k',
    ['µT/A', 1e6],
    'Field of the coils per ampere, averaged over the bar’s length.',
  ),
  quantity(
    'moment_to_inertia',
    'Moment over inertia',
    'm/J',
    ['A m²/(kg m²)', 1],
    'Magnetic moment of the bar over its moment of inertia about the fibre.',
  ),
  quantity('moment_A_m2', 'Magnetic moment', 'm', ['A m²', 1], 'Magnetic moment of the bar.'),
  quantity('inertia_kg_m2', 'Moment of inertia', 'J', ['kg m²', 1], 'Moment of inertia of the bar about the fibre.'),
  quantity('fibre_stiffness_N_m_per_rad', 'Fibre stiffness', 'κ', ['N m/rad', 1], 'Torsional stiffness of the fibre.'),
  quantity(
    'fibre_share',
    'Fibre’s share of the torque',
    'κ/(mB)',
    ['%', 100],
    'Fibre stiffness over moment times ambient field: the fibre’s share of the restoring torque at no current.',
  ),
];
