import type { BenchPlan } from '../drawing/bench.ts';
import { benchWith } from './base.ts';

const WHITE = [0.72, 0.72, 0.69] as const;
const BLACK = [0.025, 0.025, 0.027] as const;

/** Phones and benches that differ from the demo's: each shows one difficulty. */
export const benches: readonly BenchPlan[] = [
  benchWith({
    name: 'slow_motion',
    about: '240 frames/s stored to play at 30: time_scale 0.125. Fast twists of a short bar.',
    seed: 11,
    apparatus: { length_m: 0.03, diameter_m: 0.006, mass_kg: 0.006, moment_A_m2: 1.1, gamma_per_s: 0.25 },
    steps: [
      { current_A: 0.4, hold_s: 3 },
      { current_A: 0.9, hold_s: 3, amplitude_deg: -10 },
    ],
    gap_s: 1.5,
    sensor: {
      rate_Hz: 240,
      jitter_s: 0,
      droppedShare: 0,
      exposure_s: 0.002,
      readout_s: 0.0038,
      noise: 4,
      flicker: 0.02,
    },
    file: { timeScale: 0.125 },
  }),
  benchWith({
    name: 'low_light',
    about: '24 frames/s in poor light: heavy noise, exposures of 38 ms that smear the bar.',
    seed: 12,
    look: {
      lamp: {
        place_m: [0.2, 0.2, 0.5],
        size_m: 0.03,
        colour: [0.5, 0.4, 0.26],
        ambient: [0.05, 0.05, 0.05],
        strength: 0.3,
      },
    },
    sensor: { rate_Hz: 24, exposure_s: 0.038, noise: 9, droppedShare: 0.03 },
  }),
  benchWith({
    name: 'large_picture',
    about: '2560 x 1440 with a bar of 620 pixels, near and sharp, on stone.',
    seed: 13,
    steps: [{ current_A: 0.3, hold_s: 9 }],
    look: { board: 'stone' },
    camera: { width_px: 2560, height_px: 1440, barLength_px: 620, axis_px: [1290.2, 701.4], blur_px: 1.4 },
  }),
  benchWith({
    name: 'tiny_bar',
    about: 'The phone stands far away: the bar is 32 pixels long.',
    seed: 14,
    look: { board: 'drawing_paper' },
    camera: { barLength_px: 32, distance_m: 2.2 },
  }),
  benchWith({
    name: 'white_on_white',
    about: 'A white bar on white squared paper: only shadows, and one half that is painted pale red.',
    seed: 15,
    look: { board: 'squared_paper' },
    bar: { ends: [[0.62, 0.36, 0.33], WHITE], band_m: 0, gloss: 0.1 },
  }),
  benchWith({
    name: 'black_on_black',
    about: 'A black bar on a black mat; a grey stirrup.',
    seed: 16,
    look: { board: 'black_mat' },
    bar: { ends: [BLACK, [0.04, 0.04, 0.043]], gloss: 0.15, bandColour: [0.1, 0.1, 0.1] },
    sensor: { noise: 3 },
  }),
  benchWith({
    name: 'mirroring_metal',
    about: 'A bright steel bar over a brushed metal plate that mirrors it.',
    seed: 17,
    look: { board: 'metal', mirror: 0.4 },
    bar: {
      ends: [
        [0.5, 0.51, 0.53],
        [0.5, 0.51, 0.53],
      ],
      gloss: 2.5,
      band_m: 0.002,
    },
  }),
  benchWith({
    name: 'coil_shadow',
    about: 'A low lamp at the side: the shadow of a coil lies across the bar.',
    seed: 18,
    look: {
      lamp: {
        place_m: [-0.34, 0.1, 0.36],
        size_m: 0.012,
        colour: [1, 0.9, 0.75],
        ambient: [0.16, 0.16, 0.17],
        strength: 0.8,
      },
    },
  }),
  benchWith({
    name: 'passing_shadow',
    about: 'Somebody walks by: a broad shadow passes over the bench again and again.',
    seed: 19,
    look: { passingShadow: 0.5, board: 'squared_paper' },
    sensor: { drift: 0.06, driftPeriod_s: 9 },
  }),
  benchWith({
    name: 'shaking_table',
    about: 'The table shakes at 11 Hz by half a pixel, and the bar swings like a pendulum in two directions.',
    seed: 20,
    steps: [
      { current_A: 0.14, swing_m: [0.0012, 0.0008] },
      { current_A: 0.36, swing_m: [0.0004, 0.0015] },
    ],
    camera: { shake: { x_px: 0.6, y_px: 0.5, rate_Hz: 11.3 } },
  }),
  benchWith({
    name: 'wide_swing',
    about: 'Twists of 30 degrees.',
    seed: 21,
    steps: [
      { current_A: 0.14, amplitude_deg: 30 },
      { current_A: 0.36, amplitude_deg: -28 },
    ],
    look: { board: 'dark_mat' },
  }),
  benchWith({
    name: 'heavy_damping',
    about: 'A paper vane on the bar: it hardly swings four times; then oil: hardly twice.',
    seed: 22,
    apparatus: { gamma_per_s: 0.55 },
    steps: [
      { current_A: 0.14, amplitude_deg: 14, hold_s: 7, expected: 'doubtful', why: 'dies after few cycles' },
      { current_A: 0.02, amplitude_deg: 14, hold_s: 7, expected: 'doubtful', why: 'dies after few cycles' },
    ],
  }),
  benchWith({
    name: 'very_slow',
    about: 'A weak bar, no current: one twist takes ten seconds.',
    seed: 23,
    apparatus: { moment_A_m2: 0.075, gamma_per_s: 0.012, fibreStiffness_N_m_per_rad: 1e-7 },
    steps: [{ current_A: 0, hold_s: 36, amplitude_deg: 10, expected: 'doubtful', why: 'fewer than four cycles' }],
    sensor: { rate_Hz: 24 },
  }),
  benchWith({
    name: 'near_half_rate',
    about: 'Twists of 13.0 Hz filmed at 30 frames/s, then 18.1 Hz, which look like 11.9.',
    seed: 24,
    apparatus: { length_m: 0.014, diameter_m: 0.005, mass_kg: 0.0021, moment_A_m2: 0.48, gamma_per_s: 0.3 },
    steps: [
      { current_A: 0.81, hold_s: 6, expected: 'doubtful', why: 'close to half of the frame rate' },
      { current_A: 1.6, hold_s: 6, expected: 'doubtful', why: 'above half of the frame rate' },
    ],
    sensor: { exposure_s: 0.004, jitter_s: 0.0004 },
  }),
  benchWith({
    name: 'side_12',
    about: 'From bench level, the bar at rest 12 degrees from the line of sight.',
    seed: 25,
    camera: {
      view: 'side',
      elevation_deg: 3,
      coilAxis_deg: 11,
      barLength_px: 190,
      distance_m: 0.7,
      axis_px: [318.2, 190.4],
    },
    bar: { height_m: 0.04 },
    viewPerSegment: true,
  }),
  benchWith({
    name: 'oblique_20',
    about: 'From 20 degrees above the bench.',
    seed: 26,
    camera: { view: 'oblique', elevation_deg: 20, distance_m: 0.9, barLength_px: 200, axis_px: [318.2, 210.4] },
    bar: { height_m: 0.03 },
  }),
  benchWith({
    name: 'oblique_70',
    about: 'From 70 degrees above the bench.',
    seed: 27,
    camera: { view: 'oblique', elevation_deg: 70, distance_m: 0.9, barLength_px: 180 },
    look: { board: 'squared_paper' },
  }),
  benchWith({
    name: 'sagging_phone',
    about: 'The clamp gives way slowly: the picture sinks by a third of a pixel a second.',
    seed: 28,
    camera: { sag_px_per_s: [0.12, -0.3] },
  }),
  benchWith({
    name: 'breathing_focus',
    about: 'The autofocus hunts: the magnification breathes by half a per cent.',
    seed: 29,
    camera: { breathing: { share: 0.005, period_s: 5.3 } },
    look: { board: 'drawing_paper' },
  }),
  benchWith({
    name: 'ten_bit_upright',
    about: 'HEVC with 10 bits, the phone held upright: the stored picture carries a rotation. A square bar.',
    seed: 30,
    camera: { width_px: 360, height_px: 640, barLength_px: 190, axis_px: [176.4, 322.9], coilAxis_deg: 62 },
    bar: { shape: 'block' },
    file: { codec: 'hevc10', extension: 'mov', rotation_deg: 90, preset: 'ultrafast', start_s: 0.25, clock_Hz: 600 },
  }),
  benchWith({
    name: 'hand_inside',
    about: 'The hand comes back in the middle of a segment and nudges the bar anew.',
    seed: 31,
    steps: [
      { current_A: 0.14, renudge_s: 4.2, expected: 'doubtful', why: 'a hand nudges the bar within the segment' },
      { current_A: 0.36 },
    ],
  }),
];
