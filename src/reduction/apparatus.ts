/** The rig as the session file describes it: SI units, every `u_…` a standard uncertainty (0 where left out). */
export interface Apparatus {
  readonly coil?: Coil | undefined;
  readonly magnet?: Magnet | undefined;
  readonly fibre?: Fibre | undefined;
  readonly meter?: Meter | undefined;
}

/** The coil pair: its dimensions, or its constant as measured. */
export type Coil = CoilByDimensions | CoilByConstant;

/** Two coaxial coils; the second one's values default to the first one's. `spacing_m` is between their middle planes. */
export interface CoilByDimensions {
  readonly turns_per_coil: number;
  readonly u_turns_per_coil?: number | undefined;
  readonly turns_second_coil?: number | undefined;
  readonly u_turns_second_coil?: number | undefined;
  readonly radius_m: number;
  readonly u_radius_m?: number | undefined;
  readonly radius_second_coil_m?: number | undefined;
  readonly u_radius_second_coil_m?: number | undefined;
  readonly spacing_m: number;
  readonly u_spacing_m?: number | undefined;
}

/** A coil pair whose field per ampere at the bar was measured. */
export interface CoilByConstant {
  readonly constant_T_per_A: number;
  readonly u_constant_T_per_A?: number | undefined;
}

/** The bar magnet: a shape with mass and dimensions, or its moment of inertia. */
export type Magnet = Cylinder | Bar | KnownInertia;

/** A round bar that lies along its length. */
export interface Cylinder {
  readonly shape: 'cylinder';
  readonly mass_kg: number;
  readonly u_mass_kg?: number | undefined;
  readonly length_m: number;
  readonly u_length_m?: number | undefined;
  readonly diameter_m: number;
  readonly u_diameter_m?: number | undefined;
}

/** A rectangular bar. */
export interface Bar {
  readonly shape: 'bar';
  readonly mass_kg: number;
  readonly u_mass_kg?: number | undefined;
  readonly length_m: number;
  readonly u_length_m?: number | undefined;
  /** Horizontal width, across the length. */
  readonly width_m: number;
  readonly u_width_m?: number | undefined;
}

/** A magnet of any shape whose moment of inertia about the fibre is known. */
export interface KnownInertia {
  readonly inertia_kg_m2: number;
  readonly u_inertia_kg_m2?: number | undefined;
  /** Only for the mean of the coil field over the bar. */
  readonly length_m?: number | undefined;
  readonly u_length_m?: number | undefined;
}

/** What is known of the fibre: its stiffness (0 for one that has none worth mention), or runs that tell it. */
export interface Fibre {
  readonly stiffness_N_m_per_rad?: number | undefined;
  readonly u_stiffness_N_m_per_rad?: number | undefined;
  /** From the clamp to the bar, in the sweep; needed with `runs_at_lengths`. */
  readonly length_m?: number | undefined;
  readonly u_length_m?: number | undefined;
  readonly run_without_field?: RunWithoutField | undefined;
  readonly runs_at_lengths?: readonly RunAtLength[] | undefined;
}

/** A frequency as typed (undamped, at small amplitude), or the id of the segment that shows it. */
export type RunFrequency =
  | { readonly f0_Hz: number; readonly u_f0_Hz?: number | undefined }
  | { readonly segment: string };

/** The fibre alone turns a body back: another one that is not magnetic, or (left out) the magnet itself where coils cancel the field. */
export type RunWithoutField = RunFrequency & { readonly body?: Body | undefined };

/** The magnet in one and the same field on this fibre cut, or clamped, to some length. */
export type RunAtLength = RunFrequency & { readonly length_m: number; readonly u_length_m?: number | undefined };

/** A body that is not magnetic, whose moment of inertia about the fibre is known. */
export type Body = Cylinder | Bar | Omit<KnownInertia, 'length_m' | 'u_length_m'>;

/** The current meter: what all steps have in common, and its last digit. */
export interface Meter {
  /** Relative standard uncertainty of its scale. */
  readonly u_gain?: number | undefined;
  /** Standard uncertainty of its zero, A. */
  readonly u_zero_A?: number | undefined;
  /** Step of its last digit, A; a reading is taken to lie evenly within it. */
  readonly resolution_A?: number | undefined;
}

/** Where and when, for the field that the World Magnetic Model expects there. `date` is YYYY-MM-DD. */
export interface Place {
  readonly latitude_deg: number;
  readonly longitude_deg: number;
  /** Height above the WGS84 ellipsoid. */
  readonly height_m: number;
  readonly date: string;
}
