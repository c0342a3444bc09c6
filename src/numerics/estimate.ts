/** A measured quantity: value and standard uncertainty (k = 1) in the same unit, named by the field that holds it. */
export interface Estimate {
  readonly value: number;
  /** Standard uncertainty, k = 1, in the unit of `value`. */
  readonly u: number;
  /** Degrees of freedom of `u`; Infinity where `u` is taken as exactly known. */
  readonly dof: number;
}
