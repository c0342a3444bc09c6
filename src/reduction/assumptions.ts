/**
 * What is assumed of a bench where neither data nor apparatus say it. All are common practice of such benches, not published
 * figures; each shows as a row of the budget and in a sentence.
 */

/**
 * Largest usual share of the fibre in the restoring torque without current. Anything from none to this is taken as equally
 * likely; since none is what the value is worked out for, the standard uncertainty is the root mean square from there,
 * limit / √3 (JCGM 100:2008, F.2.4.5, for a correction that is not applied).
 */
export const fibreShareLimit = 0.1;
/** Standard uncertainty of that share about none. */
export const u_fibreShare = fibreShareLimit / Math.sqrt(3);

/** How well the fibre's untwisted direction is brought onto the rest direction without current, rad. */
export const u_twist_rad = (15 * Math.PI) / 180;

/** How well the coil axis is laid along the ambient field by eye, rad: a scale with wide tails, see below. */
export const u_misalignment_rad = (7 * Math.PI) / 180;
const misalignmentDof = 4;

/** Relative probability of a misalignment: Student's with that scale and few degrees of freedom, since some benches are far off. */
export function misalignmentDensity(angle_rad: number): number {
  const square = (angle_rad / u_misalignment_rad) ** 2;
  return (1 + square / misalignmentDof) ** (-(misalignmentDof + 1) / 2);
}

/** A fibre's share counts as separated from the field where its standard uncertainty is below this. */
export const separatedShare = 0.03;
