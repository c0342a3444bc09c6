import type { Estimate } from '../numerics/estimate.ts';
import type { Check } from '../oscillation/ring-down.ts';
import type { Apparatus, Place } from './apparatus.ts';

/** One segment as the reduction sees it: SI units, angles in radians. */
export interface Point {
  readonly id: string;
  /** null: not typed yet. */
  readonly current_A: number | null;
  /** Of this step alone (reading, resolution); what is common to all steps belongs to `apparatus.meter`. */
  readonly u_current_A: number;
  readonly sweep: 'rising' | 'falling' | null;
  readonly status: 'measured' | 'doubtful' | 'unmeasured';
  readonly f0_Hz: Estimate | null;
  /** Undamped frequency with no allowance for the amplitude: that of a bar which the fibre alone turns back. */
  readonly torsion_Hz?: Estimate | null | undefined;
  /** Relative standard uncertainty of the clock, contained in `f0_Hz.u` and common to all points (default 2e-5). */
  readonly u_time_scale?: number;
  /** Rest direction in the horizontal plane, anticlockwise from above; null where unknown. Only differences within one `viewFrame` mean anything. */
  readonly equilibrium_rad: Estimate | null;
  /** Points whose rest directions share one zero carry the same name here (recording and view kind). */
  readonly viewFrame: string;
  /** The user left it out, with this reason. */
  readonly leftOut?: string;
}

/** What `reduce` works on. */
export interface ReductionInput {
  readonly points: readonly Point[];
  readonly apparatus?: Apparatus | undefined;
  readonly place?: Place | undefined;
  /** Draws of the Monte Carlo cross-check (JCGM 101); 0 or absent: none. 2000 take a few seconds at most. */
  readonly monteCarloDraws?: number | undefined;
  /** Seed of those draws (default 1). */
  readonly seed?: number | undefined;
}

/** The results of the reduction that carry a budget. */
export type ResultName =
  | 'ambient_T'
  | 'apparent_ambient_T'
  | 'ambient_along_axis_T'
  | 'ambient_across_axis_T'
  | 'misalignment_deg'
  | 'slope_Hz2_per_A'
  | 'intercept_Hz2'
  | 'coil_constant_T_per_A'
  | 'moment_to_inertia'
  | 'moment_A_m2'
  | 'inertia_kg_m2'
  | 'fibre_stiffness_N_m_per_rad'
  | 'fibre_share';

type Values = { readonly [name in ResultName]: number | null };
type Uncertainties = { readonly [name in ResultName as `u_${name}`]: number | null };

/**
 * From frequencies and currents to field, moment and stiffness; plain JSON, the `reduction` of results.json. What could not
 * be had is null, with a reason in `checks`; degrees of freedom are null where infinite. Every `u_…` is a standard uncertainty.
 *
 * `ambient_T`: horizontal field of the place, its component along the coil axis where only frequencies are used, always positive.
 * `apparent_ambient_T`: the same with the fibre's share left in (what a plain line shows): ambient plus stiffness / moment.
 * `ambient_along_axis_T`, `ambient_across_axis_T`: components, positive along the field of a positive current and anticlockwise of it.
 * `misalignment_deg`: direction of the ambient field from the coil axis, anticlockwise from above, in (-90, 90].
 * `slope_Hz2_per_A`, `intercept_Hz2`: m k / (4 π² J) and (m B_along + κ) / (4 π² J).
 * `moment_to_inertia`: m / J in A m² / (kg m²). `fibre_share`: κ / (m B) at no current.
 */
export type Reduction = Values & Uncertainties & ReductionDetails;

/** What stands beside the numbers. */
export interface ReductionDetails {
  readonly points_used: readonly string[];
  readonly points_left_out: readonly LeftOut[];
  readonly checks: readonly Check[];
  /** null where there was nothing to fit. */
  readonly model: Model | null;
  readonly fit: FitSummary | null;
  /** One row for every point with a current and a frequency, used or not, in the order given. */
  readonly points: readonly FittedPoint[];
  /** What was known of the fibre beforehand; empty: nothing. */
  readonly fibre_sources: readonly FibreSource[];
  /** The line through the runs at several fibre lengths; null: none. */
  readonly fibre_lengths: FibreLengths | null;
  readonly leave_one_out: readonly LeaveOneOut[];
  readonly sweeps: SweepComparison | null;
  readonly repeats: readonly RepeatedCurrent[];
  /** Budget of every result that is not null. */
  readonly budget: { readonly [name in ResultName]?: Budget };
  /** Correlation of the results, in the order of `results`. */
  readonly correlation: { readonly results: readonly ResultName[]; readonly matrix: readonly (readonly number[])[] };
  readonly monte_carlo: MonteCarlo | null;
  readonly expected_field: ExpectedField | null;
  readonly curve: Curve | null;
}

/** How the fibre's stiffness is known: as typed, from a run that no field turns, from the magnet on several lengths of fibre. */
export type FibreOrigin = 'typed' | 'run without field' | 'runs at lengths';

/** One way in which the fibre's stiffness is known; `weight`: its share where several are combined, 0 where it is not used. */
export interface FibreSource {
  readonly origin: FibreOrigin;
  /** Segments it was measured in. */
  readonly segments: readonly string[];
  /** The fibre's part of f0². */
  readonly fibre_Hz2: number;
  readonly u_fibre_Hz2: number;
  /** null without the magnet's inertia. */
  readonly stiffness_N_m_per_rad: number | null;
  readonly u_stiffness_N_m_per_rad: number | null;
  readonly weight: number;
}

/** f0² = magnetic part + slope / length, through the runs at several fibre lengths. */
export interface FibreLengths {
  readonly magnetic_Hz2: number;
  readonly u_magnetic_Hz2: number;
  readonly slope_Hz2_m: number;
  readonly u_slope_Hz2_m: number;
  /** Standard deviation of f0² about the line; null for two lengths. */
  readonly scatter_Hz2: number | null;
  readonly runs: readonly {
    readonly length_m: number;
    readonly u_length_m: number;
    readonly f0_Hz: number;
    readonly u_f0_Hz: number;
    readonly segment: string | null;
    readonly fitted_f0_squared_Hz2: number;
    readonly residual_Hz2: number;
  }[];
}

/** A point that did not enter the fit, and why. */
export interface LeftOut {
  readonly id: string;
  readonly reason: string;
}

/**
 * Which model the numbers come from. `line`: f0² on one straight line; `two branches`: |k I + B| on both sides of the reversal;
 * `hyperbola`: a field component across the coil axis, seen in f0 alone; `turning`: the same from f0 and rest directions together.
 */
export type ModelKind = 'line' | 'two branches' | 'hyperbola' | 'turning';

/**
 * Where the fibre's share comes from: `separated` by the data; `given` in the apparatus; `assumed` small and unknown, with an
 * uncertainty for it in the budget.
 */
export type FibreKnowledge = 'separated' | 'given' | 'assumed';

/** The model that the numbers come from, and what it was chosen from. */
export interface Model {
  readonly kind: ModelKind;
  readonly fibre: FibreKnowledge;
  /**
   * How the fibre follows a bar that has turned round: `one side`: not turned; `with the field`: twisted by the turn the field
   * makes; `against the field`: the bar went round the other way; `set back`: untwisted again.
   */
  readonly turn: 'one side' | 'with the field' | 'against the field' | 'set back';
  /** Why this one, for people. */
  readonly sentence: string;
  readonly candidates: readonly Candidate[];
}

/** A model that was tried. */
export interface Candidate {
  readonly kind: ModelKind;
  readonly fibre: FibreKnowledge;
  readonly turn: Model['turn'];
  /** Currents below this one were taken as reversed (bar turned round); null: none, or not a matter of choice. */
  readonly reversal_A: number | null;
  readonly chi_square: number;
  readonly dof: number;
  readonly parameters: number;
  /** Akaike's, lower is better; differences below about 4 decide little. */
  readonly criterion: number;
  readonly chosen: boolean;
}

/** The fit of the chosen model. */
export interface FitSummary {
  readonly chi_square: number;
  readonly dof: number;
  /** Chance of a chi-square this large where the stated uncertainties are right; null without degrees of freedom. */
  readonly p_value: number | null;
  /** Factor by which the frequencies' and currents' uncertainties were raised to match the scatter; 1: not raised. */
  readonly scale_frequencies: number;
  /** The same for rest directions. */
  readonly scale_directions: number;
  /** Parameters in units of the current: B_along / k, B_across / k in A, slope and fibre's part of f0² in Hz²/A and Hz². */
  readonly parameters: readonly FittedParameter[];
  /** Correlation of the parameters, in their order. */
  readonly correlation: readonly (readonly number[])[];
}

/** One parameter of the fit; `u` for the uncertainties as used, coil and inertia not included. */
export interface FittedParameter {
  /** Its place in the fit's parameter vector: 0 slope, 1 along, 2 across, 3 fibre, 4 twist, then zeros of direction. */
  readonly place: number;
  readonly name: string;
  readonly unit: string;
  readonly value: number;
  readonly u: number;
}

/** A point against the fit. Residual = measured less fitted; standardised: over its own u, current included. */
export interface FittedPoint {
  readonly id: string;
  readonly current_A: number;
  readonly u_current_A: number;
  readonly sweep: 'rising' | 'falling' | null;
  readonly used: boolean;
  /** +1: ambient and coil field together along the axis on the side of a positive current; -1: the bar turned round. */
  readonly branch: 1 | -1 | null;
  readonly f0_squared_Hz2: number;
  readonly u_f0_squared_Hz2: number;
  readonly fitted_f0_squared_Hz2: number | null;
  readonly residual_Hz2: number | null;
  readonly standardised_residual: number | null;
  readonly equilibrium_deg: number | null;
  readonly fitted_equilibrium_deg: number | null;
  readonly equilibrium_residual_deg: number | null;
  readonly standardised_equilibrium_residual: number | null;
}

/** How the results move when one point is left out. Changes are "without it" less "with it". */
export interface LeaveOneOut {
  readonly id: string;
  readonly ambient_change_T: number | null;
  readonly moment_to_inertia_change: number | null;
  readonly fibre_stiffness_change_N_m_per_rad: number | null;
  /** Largest of the changes over the standard uncertainty of its result. */
  readonly largest_change_in_u: number | null;
}

/** Rising against falling steps: mean of the residuals of f0² on either side, and whether they differ. */
export interface SweepComparison {
  readonly rising: number;
  readonly falling: number;
  /** Mean residual of the falling steps less that of the rising ones, Hz². */
  readonly difference_Hz2: number;
  readonly u_difference_Hz2: number;
  /** The same as a change of the field, falling less rising. */
  readonly difference_T: number | null;
  /** Chance of a difference this large where there is none. */
  readonly p_value: number;
}

/** Several used segments at one current: their mean f0² and scatter. */
export interface RepeatedCurrent {
  readonly current_A: number;
  readonly ids: readonly string[];
  readonly mean_f0_squared_Hz2: number;
  /** Standard deviation of one segment, n - 1 in the denominator. */
  readonly scatter_Hz2: number;
  /** Scatter over the stated uncertainty of one segment. */
  readonly scatter_over_u: number;
}

/** Where the uncertainty of one result comes from (JCGM 100:2008, clause 8). */
export interface Budget {
  readonly value: number;
  readonly u: number;
  readonly unit: string;
  readonly rows: readonly BudgetRow[];
  /** Welch-Satterthwaite; null: infinite. */
  readonly effective_dof: number | null;
  /** Factor of a 95 % interval from Student's t. */
  readonly coverage_factor: number;
  readonly expanded_u: number;
}

/** What one input contributes to a result. */
export interface BudgetRow {
  readonly input: string;
  /** null where the row stands for many values (all frequencies, all currents). */
  readonly value: number | null;
  readonly u: number | null;
  readonly unit: string;
  /** Change of the result per change of the input; null where the row stands for many. */
  readonly sensitivity: number | null;
  /** Standard uncertainty that it contributes, in the unit of the result. */
  readonly contribution: number;
  /** null: infinite. */
  readonly dof: number | null;
}

/** The cross-check by drawing the inputs (JCGM 101:2008). */
export interface MonteCarlo {
  readonly draws: number;
  /** Draws whose fit did not end; left out. */
  readonly failed: number;
  readonly seed: number;
  readonly results: readonly MonteCarloResult[];
}

/** One result over the draws. */
export interface MonteCarloResult {
  readonly name: ResultName;
  readonly mean: number;
  readonly u: number;
  /** 2.5 % and 97.5 % quantiles of the draws. */
  readonly low: number;
  readonly high: number;
  /** `u` of the draws over `u` of the budget. */
  readonly u_over_budget: number;
}

/** What the World Magnetic Model expects at the place and date. */
export interface ExpectedField {
  readonly model: string;
  readonly horizontal_T: number;
  /** The model's own global 1 σ; a building adds far more. */
  readonly u_horizontal_T: number;
  readonly vertical_T: number;
  readonly declination_deg: number;
  readonly inclination_deg: number;
  /** Measured ambient field over the expected horizontal field, less 1; null without a measured one. */
  readonly measured_less_expected_share: number | null;
}

/** The fitted curve on a grid of currents, for plotting; columns of equal length. */
export interface Curve {
  readonly current_A: readonly number[];
  readonly f0_squared_Hz2: readonly number[];
  readonly u_f0_squared_Hz2: readonly number[];
  /** Rest direction from the coil axis; null where the model has none. */
  readonly rest_from_axis_deg: readonly number[] | null;
}
