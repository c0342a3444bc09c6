/** Linear light, red, green and blue, 1 for a white sheet in full lamp light. */
export type Colour = readonly [number, number, number];

/** What hangs on the fibre and between which coils; SI units, angles from the coil axis, anticlockwise seen from above. */
export interface Apparatus {
  readonly turnsPerCoil: number;
  readonly radius_m: number;
  readonly u_radius_m: number;
  readonly spacing_m: number;
  readonly mass_kg: number;
  readonly length_m: number;
  readonly diameter_m: number;
  readonly moment_A_m2: number;
  readonly ambient_T: number;
  readonly misalignment_deg: number;
  readonly fibreStiffness_N_m_per_rad: number;
  readonly fibreRest_deg: number;
  /** Angular acceleration by damping: -2 gamma w - s |w| w. */
  readonly gamma_per_s: number;
  readonly squareDrag_per_rad: number;
  /** Pendulum swing along and across the coil axis, Hz, and its decay. */
  readonly swing_Hz: readonly [number, number];
  readonly swingDecay_per_s: number;
}

/** One current of the sweep: the gap in which it is set and the bar nudged, then the stretch in which it is left alone. */
export interface Step {
  readonly id: string;
  /** What the meter shows and the session says. */
  readonly current_A: number;
  /** What really flows; the same where left out. */
  readonly trueCurrent_A?: number;
  readonly u_current_A: number;
  readonly sweep?: 'rising' | 'falling';
  readonly note?: string;
  /** Length of the segment. */
  readonly hold_s: number;
  /** Where the bar is let go, degrees from its rest direction. */
  readonly amplitude_deg: number;
  /** Pendulum displacement when let go, metres along and across the coil axis; none where left out. */
  readonly swing_m?: readonly [number, number];
  /** Seconds from the segment's start at which the hand nudges once more, inside the segment. */
  readonly renudge_s?: number;
  readonly expected: 'measured' | 'doubtful' | 'unmeasured';
  readonly why?: string;
}

/** How the bar looks. */
export interface BarLook {
  readonly shape: 'cylinder' | 'block';
  /** Colour of the half towards the magnet's own direction, and of the other. */
  readonly ends: readonly [Colour, Colour];
  /** Strength and narrowness of the highlight. */
  readonly gloss: number;
  /** Half width of the stirrup at the middle, metres, and its colour; 0 for none. */
  readonly band_m: number;
  readonly bandColour: Colour;
  /** Height of the bar's axis above the board. */
  readonly height_m: number;
}

/** What the board is made of. */
export type Board = 'planed_wood' | 'squared_paper' | 'drawing_paper' | 'dark_mat' | 'black_mat' | 'metal' | 'stone';

/** The lamp: where it stands, how large it is, its colour, and how much light comes from everywhere else. */
export interface Lamp {
  readonly place_m: readonly [number, number, number];
  readonly size_m: number;
  readonly colour: Colour;
  readonly ambient: Colour;
  /** Light on the board below the bar, 1: a white sheet just reaches full scale. */
  readonly strength: number;
}

/** Everything that stands on the bench. */
export interface BenchLook {
  readonly board: Board;
  readonly bar: BarLook;
  readonly lamp: Lamp;
  /** Colour of the winding, null for coils outside the picture that throw no shadow either. */
  readonly winding: Colour | null;
  /** A round graduated card below the bar: its radius, 0 for none. */
  readonly cardRadius_m: number;
  /** Where the current meter lies (its middle) and how it is turned, null for none. */
  readonly meter: { readonly x_m: number; readonly y_m: number; readonly turn_deg: number } | null;
  /** Share of light the board mirrors. */
  readonly mirror: number;
  /** The hand that nudges the bar is seen. */
  readonly hand: boolean;
  /** Somebody's shadow passes over the bench: its depth, 0 for none. */
  readonly passingShadow: number;
}

/** Where the phone is. */
export interface CameraPlan {
  readonly view: 'plan' | 'oblique' | 'side';
  readonly width_px: number;
  readonly height_px: number;
  /** Direction of the coil axis, by the convention of `equilibrium_deg` of the view. */
  readonly coilAxis_deg: number;
  /** Height of the camera above the bench: 90 for plan, near 0 for side. */
  readonly elevation_deg: number;
  readonly distance_m: number;
  /** Length a broadside bar would have in the picture at the fibre's distance; sets the focal length. */
  readonly barLength_px: number;
  /** Where the bar's middle at rest stands in the picture, centre of the top left pixel (0, 0). */
  readonly axis_px: readonly [number, number];
  /** Standard deviation of the lens blur. */
  readonly blur_px: number;
  /** Slow sagging of the phone, pixels per second. */
  readonly sag_px_per_s?: readonly [number, number];
  /** Autofocus breathing: relative change of magnification and its period. */
  readonly breathing?: { readonly share: number; readonly period_s: number };
  /** Shaking: amplitude in pixels and frequency. */
  readonly shake?: { readonly x_px: number; readonly y_px: number; readonly rate_Hz: number };
}

/** How the phone takes frames. */
export interface SensorPlan {
  readonly rate_Hz: number;
  /** Standard deviation of the interval between frames; 0 for a constant rate. */
  readonly jitter_s: number;
  readonly droppedShare: number;
  /** The rate falls to this share of itself in the middle third of the recording; 1 for never. */
  readonly dimRateShare: number;
  readonly exposure_s: number;
  readonly readout_s: number;
  /** Standard deviation of the noise, grey levels of 255. */
  readonly noise: number;
  /** Slow relative drift of the exposure and its period. */
  readonly drift: number;
  readonly driftPeriod_s: number;
  /** Relative flicker of the lamp at 100 Hz. */
  readonly flicker: number;
}

/** How the recording is stored. */
export interface FilePlan {
  readonly codec: 'h264' | 'hevc' | 'hevc10';
  readonly extension: 'mp4' | 'mov' | 'mkv';
  /** Ticks per second of the container's clock. */
  readonly clock_Hz: number;
  readonly start_s: number;
  /** How far the stored picture is turned clockwise for display. */
  readonly rotation_deg: 0 | 90 | 180 | 270;
  readonly quality: number;
  readonly preset: string;
  /** Container seconds are true seconds divided by this: 0.125 for slow motion stored at an eighth of its speed. */
  readonly timeScale: number;
  readonly keyframeEvery: number;
}

/** A bench and its recording, whole. */
export interface BenchPlan {
  readonly name: string;
  readonly title: string;
  readonly about: string;
  readonly seed: number;
  readonly apparatus: Apparatus;
  readonly steps: readonly Step[];
  /** Time before the first gap and after the last segment. */
  readonly lead_s: number;
  readonly gap_s: number;
  readonly look: BenchLook;
  readonly camera: CameraPlan;
  readonly sensor: SensorPlan;
  readonly file: FilePlan;
  /** Facing of each step's own side view is written where true. */
  readonly viewPerSegment?: boolean;
}
