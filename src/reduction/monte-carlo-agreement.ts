import type { Budget, MonteCarloResult } from './reduction.ts';

/** A budget's interval counts as confirmed where no end of the drawn one is further from it than this share of its half-width. */
const tolerance = 0.1;

/**
 * Whether the interval of a budget (JCGM 100) is confirmed by drawing the inputs (JCGM 101:2008, clause 8, with a tenth of the
 * half-width instead of the last digit), as a sentence that says where they part.
 */
export function agreementText(drawn: MonteCarloResult, budget: Budget): string {
  if (!(budget.expanded_u > 0)) return 'There is no interval to compare.';
  const low = (drawn.low - (budget.value - budget.expanded_u)) / budget.expanded_u;
  const high = (drawn.high - (budget.value + budget.expanded_u)) / budget.expanded_u;
  if (Math.max(Math.abs(low), Math.abs(high)) <= tolerance) return 'The two intervals agree.';
  const ends = [
    ...(Math.abs(low) > tolerance
      ? [`the lower end lies ${share(low)} ${low > 0 ? 'further in' : 'further out'}`]
      : []),
    ...(Math.abs(high) > tolerance
      ? [`the upper end lies ${share(high)} ${high < 0 ? 'further in' : 'further out'}`]
      : []),
  ];
  return `Of the half-width, ${ends.join(' and ')} when drawn.`;
}

function share(value: number): string {
  return `${Math.round(100 * Math.abs(value))} %`;
}
