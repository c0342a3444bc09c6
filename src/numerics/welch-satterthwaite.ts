/** One independent contribution to a combined uncertainty. */
export interface Contribution {
  /** Standard uncertainty that it contributes, in the unit of the result: |sensitivity| times u. */
  readonly u: number;
  /** Its degrees of freedom; Infinity where it is taken as exactly known. */
  readonly dof: number;
}

/** Root of the sum of squares of independent contributions. */
export function combinedUncertainty(contributions: readonly Contribution[]): number {
  return Math.sqrt(contributions.reduce((sum, { u }) => sum + u * u, 0));
}

/**
 * Effective degrees of freedom of a combined uncertainty: u_c⁴ / Σ(u_i⁴ / ν_i), the Welch-Satterthwaite formula (JCGM
 * 100:2008, G.4.1, equation G.2b). Infinity where no contribution has finitely many, also for none at all.
 */
export function effectiveDof(contributions: readonly Contribution[]): number {
  const combined = combinedUncertainty(contributions);
  const sum = contributions.reduce((total, { u, dof }) => total + u ** 4 / dof, 0);
  return sum > 0 ? combined ** 4 / sum : Number.POSITIVE_INFINITY;
}
