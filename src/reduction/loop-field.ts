import { ellipticE, ellipticK } from '../numerics/elliptic.ts';

/** Magnetic constant in N A⁻²: CODATA 2022, relative standard uncertainty 1.6e-10. */
export const magneticConstant_N_per_A2 = 1.25663706127e-6;

/** A field in the plane through a coil's axis: along the axis and away from it, tesla (or tesla per ampere). */
export interface AxialField {
  readonly along_T: number;
  readonly outward_T: number;
}

/**
 * Field of a circular loop of radius `radius_m` at distance `z_m` along its axis from its plane and `rho_m` >= 0 from the axis,
 * per ampere and turn, by complete elliptic integrals (Smythe, Static and Dynamic Electricity, 3rd ed., 7.10; parameter
 * m = k²). Infinite on the wire itself.
 */
export function loopField(radius_m: number, z_m: number, rho_m: number): AxialField {
  const far = (radius_m + rho_m) ** 2 + z_m ** 2;
  const near = (radius_m - rho_m) ** 2 + z_m ** 2;
  const m = (4 * radius_m * rho_m) / far;
  const k = ellipticK(m);
  const e = ellipticE(m);
  const factor = magneticConstant_N_per_A2 / (2 * Math.PI * Math.sqrt(far));
  const along_T = factor * (k + ((radius_m ** 2 - rho_m ** 2 - z_m ** 2) / near) * e);
  // Near the axis K and E cancel to the last digits: there the first term of the expansion in rho is the better value.
  const outward_T =
    rho_m < 1e-4 * radius_m
      ? (0.75 * magneticConstant_N_per_A2 * radius_m ** 2 * z_m * rho_m) / (radius_m ** 2 + z_m ** 2) ** 2.5
      : ((factor * z_m) / rho_m) * (((radius_m ** 2 + rho_m ** 2 + z_m ** 2) / near) * e - k);
  return { along_T, outward_T };
}

/** Two coaxial loops of many turns, the first at -spacing/2 and the second at +spacing/2 along the axis. */
export interface LoopPair {
  readonly turns1: number;
  readonly turns2: number;
  readonly radius1_m: number;
  readonly radius2_m: number;
  readonly spacing_m: number;
}

/** Field of a pair per ampere at `z_m` along the axis from the middle between the loops and `rho_m` from the axis. */
export function pairField(pair: LoopPair, z_m: number, rho_m: number): AxialField {
  const one = loopField(pair.radius1_m, z_m + pair.spacing_m / 2, rho_m);
  const two = loopField(pair.radius2_m, z_m - pair.spacing_m / 2, rho_m);
  return {
    along_T: pair.turns1 * one.along_T + pair.turns2 * two.along_T,
    outward_T: pair.turns1 * one.outward_T + pair.turns2 * two.outward_T,
  };
}

/**
 * Mean of the pair's axial field per ampere over a bar of `length_m` lying on the axis, its middle in the middle of the pair.
 * Weighting: every piece of the length counts alike, as for a bar magnetised evenly (m ∫ B dz / L), which is what magnets of
 * high coercivity come close to. The integral has a closed form on the axis: each loop gives N μ0 / 2 · z / sqrt(R² + z²).
 */
export function meanPairField(pair: LoopPair, length_m: number): number {
  if (!(length_m > 0)) return pairField(pair, 0, 0).along_T;
  const integral = (turns: number, radius: number, z: number) =>
    ((turns * magneticConstant_N_per_A2) / 2) * (z / Math.hypot(radius, z));
  const half = length_m / 2;
  const at = (z: number) =>
    integral(pair.turns1, pair.radius1_m, z + pair.spacing_m / 2) +
    integral(pair.turns2, pair.radius2_m, z - pair.spacing_m / 2);
  return (at(half) - at(-half)) / length_m;
}

/**
 * Restoring torque per radian, moment and ampere that an evenly magnetised bar feels when it is turned a little out of the
 * axis: its poles sit at its ends and are turned into other parts of the field, so this falls off faster with length than
 * the mean field does (for spacing = radius: 1 - 3.456 (L/2R)⁴ against 1 - 0.230 (L/2R)⁴). Equal to the mean of
 * B_z - dB_ρ/dρ · z at the two ends.
 */
export function turningPairField(pair: LoopPair, length_m: number): number {
  if (!(length_m > 0)) return pairField(pair, 0, 0).along_T;
  const half = length_m / 2;
  const rho = 1e-5 * Math.min(pair.radius1_m, pair.radius2_m);
  const at = (z: number) => {
    const { along_T, outward_T } = pairField(pair, z, rho);
    return along_T - (outward_T / rho) * z;
  };
  return (at(half) + at(-half)) / 2;
}
