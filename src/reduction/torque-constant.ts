/**
 * Restoring torque per radian, N m, of an inertia (kg m²) whose undamped small-amplitude frequency has this square (Hz²):
 * 4 π² J f0². For a magnet without fibre it is moment times field.
 */
export function torqueConstant(f0_squared_Hz2: number, inertia_kg_m2: number): number {
  return 4 * Math.PI ** 2 * inertia_kg_m2 * f0_squared_Hz2;
}
