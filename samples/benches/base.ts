import type {
  Apparatus,
  BarLook,
  BenchLook,
  BenchPlan,
  CameraPlan,
  FilePlan,
  SensorPlan,
  Step,
} from '../drawing/bench.ts';

/** A bench made from the base one: parts given here replace single fields of its parts. */
export interface BenchChanges {
  readonly name: string;
  readonly about: string;
  readonly seed: number;
  readonly apparatus?: Partial<Apparatus>;
  readonly steps?: readonly (Partial<Step> & Pick<Step, 'current_A'>)[];
  readonly gap_s?: number;
  readonly look?: Partial<Omit<BenchLook, 'bar'>>;
  readonly bar?: Partial<BarLook>;
  readonly camera?: Partial<CameraPlan>;
  readonly sensor?: Partial<SensorPlan>;
  readonly file?: Partial<FilePlan>;
  readonly viewPerSegment?: boolean;
}

const APPARATUS: Apparatus = {
  turnsPerCoil: 96,
  radius_m: 0.14,
  u_radius_m: 0.0003,
  spacing_m: 0.14,
  mass_kg: 0.016,
  length_m: 0.055,
  diameter_m: 0.0075,
  moment_A_m2: 1.6,
  ambient_T: 2.2e-5,
  misalignment_deg: 4,
  fibreStiffness_N_m_per_rad: 1.8e-6,
  fibreRest_deg: -6,
  gamma_per_s: 0.045,
  squareDrag_per_rad: 0.005,
  swing_Hz: [0.93, 0.95],
  swingDecay_per_s: 0.04,
};

const LOOK: BenchLook = {
  board: 'planed_wood',
  bar: {
    shape: 'cylinder',
    ends: [
      [0.05, 0.12, 0.42],
      [0.55, 0.55, 0.52],
    ],
    gloss: 0.4,
    band_m: 0.003,
    bandColour: [0.45, 0.3, 0.1],
    height_m: 0.014,
  },
  lamp: { place_m: [0.1, 0.25, 0.6], size_m: 0.025, colour: [1, 0.92, 0.8], ambient: [0.2, 0.2, 0.21], strength: 0.75 },
  winding: [0.5, 0.24, 0.1],
  cardRadius_m: 0,
  meter: null,
  mirror: 0,
  hand: true,
  passingShadow: 0,
};

const CAMERA: CameraPlan = {
  view: 'plan',
  width_px: 640,
  height_px: 360,
  coilAxis_deg: 14,
  elevation_deg: 90,
  distance_m: 0.6,
  barLength_px: 150,
  axis_px: [322.3, 181.7],
  blur_px: 0.7,
};

const SENSOR: SensorPlan = {
  rate_Hz: 30,
  jitter_s: 0.0008,
  droppedShare: 0.01,
  dimRateShare: 1,
  exposure_s: 0.009,
  readout_s: 0.016,
  noise: 2,
  drift: 0.02,
  driftPeriod_s: 31,
  flicker: 0,
};

const FILE: FilePlan = {
  codec: 'h264',
  extension: 'mp4',
  clock_Hz: 90000,
  start_s: 0,
  rotation_deg: 0,
  quality: 20,
  preset: 'veryfast',
  timeScale: 1,
  keyframeEvery: 60,
};

const STEPS: NonNullable<BenchChanges['steps']> = [{ current_A: 0.14 }, { current_A: 0.36, amplitude_deg: -8 }];

/** The base bench with changes: two steps of nine seconds unless told otherwise. */
export function benchWith(changes: BenchChanges): BenchPlan {
  const steps = (changes.steps ?? STEPS).map(
    (step, i): Step => ({
      id: `s${String(i + 1).padStart(2, '0')}`,
      u_current_A: 0.0005,
      hold_s: 9,
      amplitude_deg: 9,
      expected: 'measured',
      ...step,
    }),
  );
  return {
    name: changes.name,
    title: `${changes.name.replaceAll('_', ' ')} (drawn)`,
    about: changes.about,
    seed: changes.seed,
    apparatus: { ...APPARATUS, ...changes.apparatus },
    steps,
    lead_s: 0.3,
    gap_s: changes.gap_s ?? 2.2,
    look: { ...LOOK, ...changes.look, bar: { ...LOOK.bar, ...changes.bar } },
    camera: { ...CAMERA, ...changes.camera },
    sensor: { ...SENSOR, ...changes.sensor },
    file: { ...FILE, ...changes.file },
    viewPerSegment: changes.viewPerSegment ?? false,
  };
}
