import type { Apparatus } from './bench.ts';

const MU0 = 1.25663706127e-6; // CODATA 2022, N/A^2

/** Moment of inertia of a cylinder about a transverse axis through its middle, kg m^2: M (3 r^2 + l^2) / 12. */
export function inertia_kg_m2(apparatus: Apparatus): number {
  const radius = apparatus.diameter_m / 2;
  return (apparatus.mass_kg * (3 * radius * radius + apparatus.length_m * apparatus.length_m)) / 12;
}

/**
 * Field along the axis per ampere, T/A, of two equal loops in series, averaged over the length of a bar that lies on the
 * axis with its middle between them. Single loop on its axis: B = mu0 N I R^2 / (2 (R^2 + z^2)^(3/2)).
 */
export function coilConstant_T_per_A(apparatus: Apparatus): number {
  const { turnsPerCoil, radius_m, spacing_m, length_m } = apparatus;
  const loop = (z: number): number =>
    (MU0 * turnsPerCoil * radius_m * radius_m) / (2 * (radius_m * radius_m + z * z) ** 1.5);
  const pieces = 200;
  let sum = 0;
  for (let i = 0; i < pieces; i++) {
    const x = ((i + 0.5) / pieces - 0.5) * length_m;
    sum += loop(x - spacing_m / 2) + loop(x + spacing_m / 2);
  }
  return sum / pieces;
}

/** Size (T) and direction (radians from the coil axis, anticlockwise from above) of the total horizontal field. */
export function totalField(apparatus: Apparatus, current_A: number): { size_T: number; direction_rad: number } {
  const turn = (apparatus.misalignment_deg * Math.PI) / 180;
  const along = coilConstant_T_per_A(apparatus) * current_A + apparatus.ambient_T * Math.cos(turn);
  const across = apparatus.ambient_T * Math.sin(turn);
  return { size_T: Math.hypot(along, across), direction_rad: Math.atan2(across, along) };
}

/** Rest direction in radians near a given one: root of kappa (t - t_f) + m B sin(t - t_B). */
export function restDirection_rad(apparatus: Apparatus, current_A: number, near_rad: number): number {
  const { size_T, direction_rad } = totalField(apparatus, current_A);
  const torque = apparatus.moment_A_m2 * size_T;
  const fibreRest = (apparatus.fibreRest_deg * Math.PI) / 180;
  let angle = direction_rad + 2 * Math.PI * Math.round((near_rad - direction_rad) / (2 * Math.PI));
  for (let i = 0; i < 50; i++) {
    const value = apparatus.fibreStiffness_N_m_per_rad * (angle - fibreRest) + torque * Math.sin(angle - direction_rad);
    const slope = apparatus.fibreStiffness_N_m_per_rad + torque * Math.cos(angle - direction_rad);
    const change = value / slope;
    angle -= change;
    if (Math.abs(change) < 1e-15) break;
  }
  return angle;
}

/** What the small motion about a rest direction is: undamped frequency in Hz and how it falls with amplitude squared (per rad^2). */
export function smallMotion(
  apparatus: Apparatus,
  current_A: number,
  rest_rad: number,
): { f0_Hz: number; shift_per_rad2: number } {
  const { size_T, direction_rad } = totalField(apparatus, current_A);
  const inertia = inertia_kg_m2(apparatus);
  const torque = (apparatus.moment_A_m2 * size_T) / inertia;
  const away = rest_rad - direction_rad;
  const omega2 = torque * Math.cos(away) + apparatus.fibreStiffness_N_m_per_rad / inertia;
  // x'' + w0^2 x + a x^2 + b x^3 = 0 has w/w0 = 1 + (3 b / (8 w0^2) - 5 a^2 / (12 w0^4)) A^2 (Landau and Lifshitz, Mechanics, section 28; from memory).
  const square = (-torque * Math.sin(away)) / 2;
  const cube = (-torque * Math.cos(away)) / 6;
  const shift = (3 * cube) / (8 * omega2) - (5 * square * square) / (12 * omega2 * omega2);
  return { f0_Hz: Math.sqrt(omega2) / (2 * Math.PI), shift_per_rad2: shift };
}
