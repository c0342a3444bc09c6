import { z } from 'zod';
import { quantities } from './quantities.ts';

const text = z.string().max(10_000);
const name = z.string().max(200);
const value = z.number();
const maybe = value.nullable();
const resultName = z.enum(quantities.map((q) => q.name));

/** The numbers with their uncertainties; one that a file leaves out counts as not to be had. */
const numbers = {
  ambient_T: maybe.default(null),
  u_ambient_T: maybe.default(null),
  apparent_ambient_T: maybe.default(null),
  u_apparent_ambient_T: maybe.default(null),
  ambient_along_axis_T: maybe.default(null),
  u_ambient_along_axis_T: maybe.default(null),
  ambient_across_axis_T: maybe.default(null),
  u_ambient_across_axis_T: maybe.default(null),
  misalignment_deg: maybe.default(null),
  u_misalignment_deg: maybe.default(null),
  slope_Hz2_per_A: maybe.default(null),
  u_slope_Hz2_per_A: maybe.default(null),
  intercept_Hz2: maybe.default(null),
  u_intercept_Hz2: maybe.default(null),
  coil_constant_T_per_A: maybe.default(null),
  u_coil_constant_T_per_A: maybe.default(null),
  moment_to_inertia: maybe.default(null),
  u_moment_to_inertia: maybe.default(null),
  moment_A_m2: maybe.default(null),
  u_moment_A_m2: maybe.default(null),
  inertia_kg_m2: maybe.default(null),
  u_inertia_kg_m2: maybe.default(null),
  fibre_stiffness_N_m_per_rad: maybe.default(null),
  u_fibre_stiffness_N_m_per_rad: maybe.default(null),
  fibre_share: maybe.default(null),
  u_fibre_share: maybe.default(null),
};

/** One finding, as it stands in a results file. */
export const checkSchema = z.object({
  code: z.string().min(1).max(100),
  severity: z.enum(['note', 'doubt', 'fault']),
  message: text,
});

const sweep = z.enum(['rising', 'falling']).nullable();
const modelKind = z.enum(['line', 'two branches', 'hyperbola', 'turning']);
const fibre = z.enum(['separated', 'given', 'assumed']);
const turn = z.enum(['one side', 'with the field', 'against the field', 'set back']);

const model = z.object({
  kind: modelKind,
  fibre,
  turn,
  sentence: text,
  candidates: z
    .array(
      z.object({
        kind: modelKind,
        fibre,
        turn,
        reversal_A: maybe,
        chi_square: value,
        dof: value,
        parameters: value,
        criterion: value,
        chosen: z.boolean(),
      }),
    )
    .max(1000),
});

const parameterPlace = z.number().int().default(0).describe('Place of the parameter in the fit’s vector.');

const fit = z.object({
  chi_square: value,
  dof: value,
  p_value: maybe,
  scale_frequencies: value,
  scale_directions: value,
  parameters: z.array(z.object({ place: parameterPlace, name, unit: name, value, u: value })).max(100),
  correlation: z.array(z.array(value).max(100)).max(100),
});

const point = z.object({
  id: name,
  current_A: value,
  u_current_A: value,
  sweep,
  used: z.boolean(),
  branch: z.union([z.literal(1), z.literal(-1)]).nullable(),
  f0_squared_Hz2: value,
  u_f0_squared_Hz2: value,
  fitted_f0_squared_Hz2: maybe,
  residual_Hz2: maybe,
  standardised_residual: maybe,
  equilibrium_deg: maybe,
  fitted_equilibrium_deg: maybe,
  equilibrium_residual_deg: maybe,
  standardised_equilibrium_residual: maybe,
});

const leaveOneOut = z.object({
  id: name,
  ambient_change_T: maybe,
  moment_to_inertia_change: maybe,
  fibre_stiffness_change_N_m_per_rad: maybe,
  largest_change_in_u: maybe,
});

const sweeps = z.object({
  rising: value,
  falling: value,
  difference_Hz2: value,
  u_difference_Hz2: value,
  difference_T: maybe,
  p_value: value,
});

const repeat = z.object({
  current_A: value,
  ids: z.array(name).max(10_000),
  mean_f0_squared_Hz2: value,
  scatter_Hz2: value,
  scatter_over_u: value,
});

const budget = z.object({
  value,
  u: value,
  unit: name,
  rows: z
    .array(
      z.object({
        input: name,
        value: maybe,
        u: maybe,
        unit: name,
        sensitivity: maybe,
        contribution: value,
        dof: maybe,
      }),
    )
    .max(1000),
  effective_dof: maybe,
  coverage_factor: value,
  expanded_u: value,
});

const monteCarlo = z.object({
  draws: value,
  failed: value,
  seed: value,
  results: z
    .array(z.object({ name: resultName, mean: value, u: value, low: value, high: value, u_over_budget: value }))
    .max(100),
});

const expectedField = z.object({
  model: name,
  horizontal_T: value,
  u_horizontal_T: value,
  vertical_T: value,
  declination_deg: value,
  inclination_deg: value,
  measured_less_expected_share: maybe,
});

const fibreSource = z.object({
  origin: z.enum(['typed', 'run without field', 'runs at lengths']),
  segments: z.array(name).max(1000),
  fibre_Hz2: value,
  u_fibre_Hz2: value,
  stiffness_N_m_per_rad: maybe,
  u_stiffness_N_m_per_rad: maybe,
  weight: value,
});

const fibreLengths = z.object({
  magnetic_Hz2: value,
  u_magnetic_Hz2: value,
  slope_Hz2_m: value,
  u_slope_Hz2_m: value,
  scatter_Hz2: maybe,
  runs: z
    .array(
      z.object({
        length_m: value,
        u_length_m: value,
        f0_Hz: value,
        u_f0_Hz: value,
        segment: name.nullable(),
        fitted_f0_squared_Hz2: value,
        residual_Hz2: value,
      }),
    )
    .max(1000),
});

const column = z.array(value).max(100_000);
const curve = z.object({
  current_A: column,
  f0_squared_Hz2: column,
  u_f0_squared_Hz2: column,
  rest_from_axis_deg: column.nullable(),
});

/** Scheme of the `reduction` of a results file. It is lenient: whatever is left out counts as not to be had. */
export const reductionSchema = z.object({
  ...numbers,
  points_used: z.array(name).max(10_000).default([]),
  points_left_out: z
    .array(z.object({ id: name, reason: text }))
    .max(10_000)
    .default([]),
  checks: z.array(checkSchema).max(10_000).default([]),
  model: model.nullable().default(null),
  fit: fit.nullable().default(null),
  points: z.array(point).max(10_000).default([]),
  fibre_sources: z.array(fibreSource).max(10).default([]),
  fibre_lengths: fibreLengths.nullable().default(null),
  leave_one_out: z.array(leaveOneOut).max(10_000).default([]),
  sweeps: sweeps.nullable().default(null),
  repeats: z.array(repeat).max(10_000).default([]),
  budget: z.partialRecord(resultName, budget).default({}),
  correlation: z
    .object({ results: z.array(resultName).max(100), matrix: z.array(z.array(value).max(100)).max(100) })
    .default({ results: [], matrix: [] }),
  monte_carlo: monteCarlo.nullable().default(null),
  expected_field: expectedField.nullable().default(null),
  curve: curve.nullable().default(null),
});
