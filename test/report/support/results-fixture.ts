import type { FittedPoint, Reduction } from '../../../src/reduction/reduction.ts';
import type { Results, SegmentResult } from '../../../src/report/results.ts';

// The invented boathouse bench: 124 turns a side on 0.150 m, a bar of 60 mm by 8 mm and 18.7 g.
const COIL = 7.4332e-4;
const AMBIENT = 18.42e-6;
const INERTIA = 5.6848e-6;
const MOMENT = 0.912;
const SLOPE = (MOMENT * COIL) / (4 * Math.PI ** 2 * INERTIA);
const INTERCEPT = (MOMENT * AMBIENT) / (4 * Math.PI ** 2 * INERTIA);

const steps = [0, 0.1, 0.2, 0.4, 0.6, 0.8, 1, 0.8, 0.6, 0.4, 0.2, 0];

/** A number between -1 and 1 that looks random and never changes. */
const jitter = (i: number) => Math.sin(12.9898 * (i + 1)) * Math.cos(78.233 * (i + 1));

function segment(current_A: number, i: number): SegmentResult {
  const exact = Math.sqrt(INTERCEPT + SLOPE * current_A);
  const u = 3e-5 * exact + 1.2e-5;
  const f0 = exact + u * jitter(i);
  const start_s = 3.2 + 31.5 * i;
  return {
    id: `s${String(i + 1).padStart(2, '0')}`,
    recording: 'A',
    view: 'v1',
    view_kind: 'plan',
    start_s,
    end_s: start_s + 27.8,
    current_A,
    u_current_A: 0.0015,
    sweep: i <= 6 ? 'rising' : 'falling',
    status: 'measured',
    f0_Hz: f0,
    u_f0_Hz: u,
    dof_f0: 812.4,
    fd_Hz: f0 * 0.99914,
    u_fd_Hz: u,
    gamma_per_s: 0.0123 + 0.0004 * jitter(i + 3),
    u_gamma_per_s: 0.00031,
    q_factor: (Math.PI * f0) / 0.0123,
    u_q_factor: (Math.PI * f0 * 0.025) / 0.0123,
    amplitude_start_deg: 9.83 + jitter(i),
    amplitude_end_deg: 7.02 + 0.8 * jitter(i),
    equilibrium_deg: -12.41 + 0.3 * current_A,
    u_equilibrium_deg: 0.012,
    cycles: f0 * 27.8,
    frames: 834,
    frames_lost: 0,
    frames_refused: 3,
    frames_used: 829,
    residual_rms_deg: 0.0213,
    swing_Hz: null,
    swing_share: 0,
    u_time_scale: 2e-5,
    left_out: null,
    note: '',
    checks: [],
  };
}

const empty = {
  f0_Hz: null,
  u_f0_Hz: null,
  dof_f0: null,
  fd_Hz: null,
  u_fd_Hz: null,
  gamma_per_s: null,
  u_gamma_per_s: null,
  q_factor: null,
  u_q_factor: null,
  amplitude_start_deg: null,
  amplitude_end_deg: null,
  equilibrium_deg: null,
  u_equilibrium_deg: null,
  cycles: null,
  residual_rms_deg: null,
};

/** Segments as a careful evening yields them: one doubtful, one that could not be measured, one left out by the user. */
function exampleSegments(): SegmentResult[] {
  const rows = steps.map(segment);
  const change = (i: number, by: Partial<SegmentResult>) => {
    rows[i] = { ...(rows[i] as SegmentResult), ...by };
  };
  change(2, {
    status: 'doubtful',
    swing_Hz: 1.0213,
    swing_share: 0.14,
    checks: [
      {
        code: 'swing_close',
        severity: 'doubt',
        message:
          'The swing at 1.02 Hz is close to the twist and has 14 % of its size, so that the two can hardly be told apart; nudge the bar anew without touching the fibre, or wait until the swing has died.',
      },
    ],
  });
  change(4, {
    ...empty,
    status: 'unmeasured',
    frames_refused: 834,
    frames_used: 0,
    note: 'Lamp went out',
    checks: [
      {
        code: 'no_bar',
        severity: 'fault',
        message: 'No bar was found in the region of view v1: nothing in it moved; draw the region round the bar.',
      },
    ],
  });
  change(9, {
    left_out: 'meter was still settling',
    note: 'Typed "0,400"; read again later,\nseen 0.398',
    checks: [
      {
        code: 'amplitude_correction',
        severity: 'note',
        message: 'The amplitude of 9.8° shifts the period by 0.13 %; the frequency is corrected for it.',
      },
    ],
  });
  return rows;
}

function fittedPoint(row: SegmentResult, used: boolean): FittedPoint {
  const f0 = row.f0_Hz ?? 0;
  const current_A = row.current_A ?? 0;
  const square = f0 ** 2;
  const fitted = INTERCEPT + SLOPE * current_A;
  const u = 2 * f0 * (row.u_f0_Hz ?? 0);
  return {
    id: row.id,
    current_A,
    u_current_A: row.u_current_A,
    sweep: row.sweep,
    used,
    branch: 1,
    f0_squared_Hz2: square,
    u_f0_squared_Hz2: u,
    fitted_f0_squared_Hz2: fitted,
    residual_Hz2: square - fitted,
    standardised_residual: (square - fitted) / Math.hypot(u, SLOPE * row.u_current_A),
    equilibrium_deg: row.equilibrium_deg,
    fitted_equilibrium_deg: null,
    equilibrium_residual_deg: null,
    standardised_equilibrium_residual: null,
  };
}

function exampleReduction(rows: readonly SegmentResult[]): Reduction {
  const known = rows.filter((r) => r.f0_Hz !== null);
  const used = known.filter((r) => r.left_out === null).map((r) => r.id);
  const grid = Array.from({ length: 41 }, (_, i) => i / 40);
  return {
    ambient_T: AMBIENT,
    u_ambient_T: 0.31e-6,
    apparent_ambient_T: AMBIENT * 1.03,
    u_apparent_ambient_T: 0.29e-6,
    ambient_along_axis_T: AMBIENT,
    u_ambient_along_axis_T: 0.31e-6,
    ambient_across_axis_T: null,
    u_ambient_across_axis_T: null,
    misalignment_deg: null,
    u_misalignment_deg: null,
    slope_Hz2_per_A: SLOPE,
    u_slope_Hz2_per_A: 0.0042,
    intercept_Hz2: INTERCEPT,
    u_intercept_Hz2: 0.0011,
    coil_constant_T_per_A: COIL,
    u_coil_constant_T_per_A: 2.5e-6,
    moment_to_inertia: MOMENT / INERTIA,
    u_moment_to_inertia: 580,
    moment_A_m2: MOMENT,
    u_moment_A_m2: 0.0051,
    inertia_kg_m2: INERTIA,
    u_inertia_kg_m2: 1.9e-8,
    fibre_stiffness_N_m_per_rad: null,
    u_fibre_stiffness_N_m_per_rad: null,
    fibre_share: 0.03,
    u_fibre_share: 0.017,
    points_used: used,
    points_left_out: [
      { id: 's05', reason: 'it could not be measured' },
      { id: 's10', reason: 'left out by the user: meter was still settling' },
    ],
    checks: [
      {
        code: 'fibre_not_separable',
        severity: 'note',
        message:
          'Fibre stiffness and field can’t be told apart from one side of the reversal; the fibre is taken to bear 3.0 % ± 1.7 % of the torque. Reverse the current to separate them.',
      },
    ],
    model: {
      kind: 'line',
      fibre: 'assumed',
      turn: 'one side',
      sentence:
        'A straight line of f0² against current: all currents are on one side of the reversal, and the data show no field across the axis.',
      candidates: [
        {
          kind: 'line',
          fibre: 'assumed',
          turn: 'one side',
          reversal_A: null,
          chi_square: 8.1,
          dof: 8,
          parameters: 2,
          criterion: 13.8,
          chosen: true,
        },
        {
          kind: 'hyperbola',
          fibre: 'assumed',
          turn: 'one side',
          reversal_A: null,
          chi_square: 7.6,
          dof: 7,
          parameters: 3,
          criterion: 17.6,
          chosen: false,
        },
      ],
    },
    fit: {
      chi_square: 8.1,
      dof: 8,
      p_value: 0.42,
      scale_frequencies: 1,
      scale_directions: 1,
      parameters: [
        { place: 0, name: 'slope', unit: 'Hz²/A', value: SLOPE, u: 0.0042 },
        { place: 1, name: 'B_along / k', unit: 'A', value: AMBIENT / COIL, u: 0.0004 },
      ],
      correlation: [
        [1, -0.71],
        [-0.71, 1],
      ],
    },
    points: known.map((row) => fittedPoint(row, used.includes(row.id))),
    fibre_sources: [],
    fibre_lengths: null,
    leave_one_out: used.map((id, i) => ({
      id,
      ambient_change_T: 4e-8 * jitter(i),
      moment_to_inertia_change: 90 * jitter(i + 2),
      fibre_stiffness_change_N_m_per_rad: null,
      largest_change_in_u: Math.abs(jitter(i)) * 0.3,
    })),
    sweeps: {
      rising: 6,
      falling: 4,
      difference_Hz2: 0.0021,
      u_difference_Hz2: 0.0029,
      difference_T: 5.2e-7,
      p_value: 0.49,
    },
    repeats: [
      { current_A: 0, ids: ['s01', 's12'], mean_f0_squared_Hz2: 0.0749, scatter_Hz2: 2.1e-5, scatter_over_u: 1.1 },
    ],
    budget: {
      ambient_T: {
        value: AMBIENT,
        u: 0.31e-6,
        unit: 'T',
        rows: [
          {
            input: 'frequencies of all steps',
            value: null,
            u: null,
            unit: 'Hz',
            sensitivity: null,
            contribution: 0.9e-7,
            dof: 8,
          },
          {
            input: 'currents of all steps',
            value: null,
            u: null,
            unit: 'A',
            sensitivity: null,
            contribution: 1.3e-7,
            dof: null,
          },
          {
            input: 'coil radius',
            value: 0.15,
            u: 0.0005,
            unit: 'm',
            sensitivity: -1.2e-4,
            contribution: 6.1e-8,
            dof: null,
          },
          {
            input: 'fibre share',
            value: 0.03,
            u: 0.017,
            unit: '1',
            sensitivity: -1.8e-5,
            contribution: 2.6e-7,
            dof: null,
          },
        ],
        effective_dof: 61.3,
        coverage_factor: 2.0,
        expanded_u: 0.62e-6,
      },
      moment_A_m2: {
        value: MOMENT,
        u: 0.0051,
        unit: 'A m²',
        rows: [
          { input: 'coil radius', value: 0.15, u: 0.0005, unit: 'm', sensitivity: 6.1, contribution: 0.003, dof: null },
          { input: 'mass', value: 0.0187, u: 0.00001, unit: 'kg', sensitivity: 48.8, contribution: 0.00049, dof: null },
          { input: 'meter gain', value: 1, u: 0.004, unit: '1', sensitivity: -0.91, contribution: -0.0036, dof: null },
        ],
        effective_dof: null,
        coverage_factor: 1.96,
        expanded_u: 0.01,
      },
    },
    correlation: {
      results: ['ambient_T', 'moment_A_m2', 'slope_Hz2_per_A'],
      matrix: [
        [1, -0.34, -0.52],
        [-0.34, 1, 0.81],
        [-0.52, 0.81, 1],
      ],
    },
    monte_carlo: {
      draws: 2000,
      failed: 0,
      seed: 1,
      results: [
        { name: 'ambient_T', mean: 18.43e-6, u: 0.314e-6, low: 17.81e-6, high: 19.04e-6, u_over_budget: 1.013 },
        { name: 'moment_A_m2', mean: 0.9121, u: 0.00508, low: 0.9022, high: 0.922, u_over_budget: 0.996 },
      ],
    },
    expected_field: {
      model: 'World Magnetic Model 2025',
      horizontal_T: 18.91e-6,
      u_horizontal_T: 0.13e-6,
      vertical_T: 45.6e-6,
      declination_deg: 3.2,
      inclination_deg: 67.5,
      measured_less_expected_share: -0.0259,
    },
    curve: {
      current_A: grid,
      f0_squared_Hz2: grid.map((i) => INTERCEPT + SLOPE * i),
      u_f0_squared_Hz2: grid.map((i) => Math.hypot(0.0011, 0.0042 * i)),
      rest_from_axis_deg: null,
    },
  };
}

/** Results such as a session of the boathouse bench yields. */
export function exampleResults(): Results {
  const segments = exampleSegments();
  return {
    format: 'needlebeat/results',
    version: 1,
    program: 'needlebeat 0.1.0',
    session: {
      title: 'Boathouse bench, evening run',
      sha256: '5d41402abc4b2a76b9719d911017c592a1b2c3d4e5f60718293a4b5c6d7e8f90',
    },
    recordings: [
      {
        id: 'A',
        file: 'evening.mp4',
        bytes: 16846867,
        content: '9e107d9d372bb6826bd81d3542a419d6e4d909c290d0fb1ca068ffaddf22cbd0',
        time_scale: 1,
        u_time_scale: 2e-5,
      },
    ],
    ffmpeg: 'ffmpeg 5.1.6 (on the path)',
    apparatus: {
      coil: { turns_per_coil: 124, radius_m: 0.15, u_radius_m: 0.0005, spacing_m: 0.15 },
      magnet: { shape: 'cylinder', mass_kg: 0.0187, u_mass_kg: 0.00001, length_m: 0.06, diameter_m: 0.008 },
    },
    place: { latitude_deg: 54.2, longitude_deg: 10.4, height_m: 12, date: '2026-11-28' },
    segments,
    reduction: exampleReduction(segments),
  };
}

/** The example with one segment changed. */
export function withSegment(index: number, change: Partial<SegmentResult>): Results {
  const results = exampleResults();
  const segments = results.segments.map((s, i) => (i === index ? { ...s, ...change } : s));
  return { ...results, segments };
}
