import type { Budget, MonteCarloResult } from './reduction.ts';

/** A budget's interval counts as confirmed where no end of the drawn one is further from it than this share of its half-width. */
const tolerance = 0.1;

/**
 * Whether the interval of a budget (JCGM 100) is confirmed by drawing the inputs (JCGM 101:2008, clause 8, with a tenth of the
 * half-width instead of the last digit): `agree`, or which end parts by what share of the half-width.
 */
export function agreementText(drawn: MonteCarloResult, budget: Budget): string {
  const { value, expanded_u } = budget;
  if (!(expanded_u > 0)) return 'nothing to compare';
  const ends = (
    [
      ['lower', (value - expanded_u - drawn.low) / expanded_u],
      ['upper', (drawn.high - value - expanded_u) / expanded_u],
    ] as const
  ).filter(([, out]) => Math.abs(out) > tolerance);
  const words = ends.map(
    ([end, out]) => `${end} end ${Math.round(100 * Math.abs(out))} % further ${out > 0 ? 'out' : 'in'}`,
  );
  return words.length === 0 ? 'agree' : words.join(', ');
}
