import { useState } from 'preact/hooks';
import { agreementText } from '../../../src/reduction/monte-carlo-agreement.ts';
import { dofText, numberText, typedText } from '../../../src/report/number-text.ts';
import { quantities } from '../../../src/report/quantities.ts';
import type { Results } from '../../contract.ts';
import { quantityText } from '../numbers/quantity-text.ts';
import { shownUnit } from './reduction-part.tsx';

/** Where the uncertainty of one result comes from, input by input; the result can be chosen. */
export function BudgetPart({ reduction }: { reduction: Results['reduction'] }) {
  const having = quantities.filter(({ name }) => reduction.budget[name] !== undefined);
  const [chosen, choose] = useState<string>('ambient_T');
  const quantity = having.find(({ name }) => name === chosen) ?? having[0];
  const budget = quantity && reduction.budget[quantity.name];
  if (!quantity || !budget) return null;
  const { factor, unit } = shownUnit(budget.value, quantity.unit, quantity.perUnit);
  const most = Math.max(...budget.rows.map((r) => Math.abs(r.contribution)), 1e-300);
  const drawn = reduction.monte_carlo?.results.find((r) => r.name === quantity.name);
  return (
    <details open>
      <summary>Uncertainty budget</summary>
      <label class="inline">
        of
        <select value={quantity.name} onChange={(event) => choose(event.currentTarget.value)}>
          {having.map(({ name, title }) => (
            <option key={name} value={name}>
              {title}
            </option>
          ))}
        </select>
      </label>
      <div class="table-scroll">
        <table class="plain budget" aria-label={`Budget of ${quantity.title}`}>
          <thead>
            <tr>
              <th scope="col">input</th>
              <th scope="col" class="number">
                value
              </th>
              <th scope="col" class="number">
                u
              </th>
              <th scope="col">unit</th>
              <th scope="col" class="number">
                contribution / {unit}
              </th>
              <th scope="col">
                <span class="unseen">share</span>
              </th>
              <th scope="col" class="number">
                ν
              </th>
            </tr>
          </thead>
          <tbody>
            {budget.rows.map((row) => (
              <tr key={row.input}>
                <th scope="row">{row.input}</th>
                <td class="value">{row.value === null ? '' : typedText(Number(row.value.toPrecision(6)))}</td>
                <td class="value">{row.u === null ? '' : numberText(row.u, 2)}</td>
                <td class="unit">{row.unit}</td>
                <td class="value">{numberText(row.contribution * factor, 2)}</td>
                <td class="share" aria-hidden="true">
                  <i style={{ width: `${(Math.abs(row.contribution) / most) * 100}%` }} />
                </td>
                <td class="value">{manyText(row.dof)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p class="facts">
        {quantity.title}: {quantityText(budget.value, budget.u, unit, factor).both}; effective degrees of freedom{' '}
        {dofText(budget.effective_dof)}; expanded uncertainty (95 %) {numberText(budget.expanded_u * factor, 2)} {unit},
        factor {numberText(budget.coverage_factor, 3)}.
      </p>
      {drawn && reduction.monte_carlo ? (
        <p class="facts">
          Drawn instead ({reduction.monte_carlo.draws} draws, Monte Carlo by JCGM 101):{' '}
          {quantityText(drawn.mean, drawn.u, unit, factor).both}, 95 % within {numberText(drawn.low * factor, 5)} and{' '}
          {numberText(drawn.high * factor, 5)} {unit}; by the budget within{' '}
          {numberText((budget.value - budget.expanded_u) * factor, 5)} and{' '}
          {numberText((budget.value + budget.expanded_u) * factor, 5)} {unit}: {agreementText(drawn, budget)}.
        </p>
      ) : null}
    </details>
  );
}

/** Degrees of freedom; above ten thousand the number says nothing more. */
function manyText(dof: number | null): string {
  return dof !== null && dof > 1e4 ? '> 10⁴' : dofText(dof);
}
