const fourPiSquared = 4 * Math.PI ** 2;

/** Restoring torque per radian, N m: 4 π² J f0². For a magnet without fibre this is moment times field. */
export function torqueConstant(f0_Hz: number, inertia_kg_m2: number): number {
  return fourPiSquared * inertia_kg_m2 * f0_Hz ** 2;
}

/** Undamped small-amplitude frequency, Hz, of an inertia held by a torque per radian (N m, not negative). */
export function naturalFrequency(torque_N_m: number, inertia_kg_m2: number): number {
  return Math.sqrt(torque_N_m / (fourPiSquared * inertia_kg_m2));
}
