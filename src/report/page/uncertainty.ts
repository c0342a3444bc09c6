import type { Budget, ResultName } from '../../reduction/reduction.ts';
import { dofText, estimateText, NOTHING, numberText, percentText, shortText, uncertaintyText } from '../number-text.ts';
import { type Quantity, quantities } from '../quantities.ts';
import type { Results } from '../results.ts';
import { html, type Markup, symbolMarkup, table } from './html.ts';
import { coefficient, shown } from './reduction.ts';

/** Budgets by JCGM 100, correlations of the results, and the cross-check by JCGM 101; null where there is none of them. */
export function uncertaintySection({ reduction }: Results): Markup | null {
  const budgets = quantities.flatMap((q) => {
    const budget = reduction.budget[q.name];
    return budget ? [budgetTable(q, budget)] : [];
  });
  if (budgets.length === 0 && reduction.monte_carlo === null) return null;
  return html`<section>
<h2>Uncertainty</h2>
${budgets.length === 0 ? null : html`<p>Budgets by JCGM 100:2008 (GUM). Sensitivity: change of the result per change of the input. Share: contribution squared over <i>u</i> squared; correlated inputs can make the shares add up to another sum than 100 %.</p>`}
${budgets}
${correlations(reduction.correlation)}
${monteCarlo(reduction.monte_carlo)}
</section>`;
}

function budgetTable(q: Quantity, budget: Budget): Markup {
  const rows = budget.rows.map((row) => [
    row.input,
    html`<span class="nb">${shortText(row.value)}</span>`,
    numberText(row.u, 2),
    row.unit === '1' ? '' : row.unit,
    numberText(row.sensitivity, 3),
    numberText(row.contribution, 2),
    dofText(row.dof),
    budget.u > 0 ? percentText((row.contribution / budget.u) ** 2) : NOTHING,
  ]);
  const total = [
    html`Result ${symbolMarkup(q.symbol)}`,
    numberText(budget.value, 6),
    '',
    budget.unit === '1' ? '' : budget.unit,
    '',
    html`<i>u</i> = ${numberText(budget.u, 2)}`,
    dofText(budget.effective_dof),
    '',
  ];
  return html`<section class="whole">
<h3>${q.title} ${symbolMarkup(q.symbol)} = ${estimateText(budget.value * q.perUnit, budget.u * q.perUnit, q.unit)}; expanded <i>U</i> = ${uncertaintyText(budget.expanded_u * q.perUnit, q.unit)} (<i>k</i> = ${budget.coverage_factor.toFixed(2)}, 95 %)</h3>
${table({
  heads: [
    'Quantity',
    'Value',
    'Standard uncertainty',
    'Unit',
    'Sensitivity',
    html`Contribution <small>${budget.unit}</small>`,
    'Degrees of freedom',
    'Share',
  ],
  rows: [...rows, total],
  numbers: [1, 2, 4, 5, 6, 7],
  classes: [...rows.map(() => null), 'total'],
})}
</section>`;
}

function correlations(correlation: Results['reduction']['correlation']): Markup | null {
  const { results, matrix } = correlation;
  if (results.length < 2) return null;
  const symbol = (name: ResultName) => symbolMarkup(quantities.find((q) => q.name === name)?.symbol ?? name);
  return html`<section class="whole">
<h3>Correlation of the results</h3>
${table({
  heads: ['', ...results.map(symbol)],
  rows: results.map((name, i) => [symbol(name), ...results.map((_, j) => coefficient(matrix[i]?.[j]))]),
  numbers: results.map((_, i) => i + 1),
})}
</section>`;
}

function monteCarlo(drawn: Results['reduction']['monte_carlo']): Markup | null {
  if (drawn === null || drawn.results.length === 0) return null;
  const rows = drawn.results.flatMap((r) => {
    const q = quantities.find(({ name }) => name === r.name);
    if (!q) return [];
    const end = (value: number) => numberText(value * q.perUnit, 4);
    return [[q.title, shown(q, r.mean, r.u), html`${end(r.low)} … ${end(r.high)}`, q.unit, r.u_over_budget.toFixed(3)]];
  });
  const failed = drawn.failed > 0 ? ` ${drawn.failed} of them ended without a fit and were left out.` : '';
  return html`<section class="whole">
<h3>Cross-check by Monte Carlo (JCGM 101:2008)</h3>
<p>${drawn.draws} draws of all inputs, seed ${drawn.seed}.${failed}</p>
${table({
  heads: ['Quantity', 'Mean ± standard deviation', html`95 % interval`, 'Unit', html`<i>u</i> over that of the budget`],
  rows,
  numbers: [1, 2, 4],
})}
</section>`;
}
