import { expect, it } from 'vitest';
import { agreementText } from '../../src/reduction/monte-carlo-agreement.ts';

it('says which end of the drawn interval parts from the budget’s, as a share of the half-width', () => {
  const budget = { value: 10, u: 1, unit: 'T', rows: [], effective_dof: null, coverage_factor: 2, expanded_u: 2 };
  const drawn = (low: number, high: number) =>
    agreementText({ name: 'ambient_T', mean: 10, u: 1, low, high, u_over_budget: 1 }, budget);
  expect(drawn(8.1, 11.9)).toBe('agree');
  expect(drawn(7, 11.9)).toBe('lower end 50 % further out');
  expect(drawn(8.5, 13)).toBe('lower end 25 % further in, upper end 50 % further out');
});
