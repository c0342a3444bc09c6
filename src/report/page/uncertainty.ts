import { agreementText } from '../../reduction/monte-carlo-agreement.ts';
import type { Budget, ResultName } from '../../reduction/reduction.ts';
import { dofText, estimateText, NOTHING, numberText, percentText, shortText, uncertaintyText } from '../number-text.ts';
import { type Quantity, quantities } from '../quantities.ts';
import type { Results } from '../results.ts';
import { html, type Markup, symbolMarkup, table } from './html.ts';
import { coefficient, shown } from './reduction.ts';

/** Budgets by JCGM 100, correlations of the results, and the cross-check by JCGM 101; null where there is none of them. */
export function uncertaintySection({ reduction }: Results): Markup | null {
  const known = quantities.flatMap((q) => {
    const budget = reduction.budget[q.name];
    return budget ? [{ q, budget }] : [];
  });
  const budgets = known.filter(({ budget }) => budget.u > 0);
  const exact = known.filter(({ budget }) => !(budget.u > 0));
  if (budgets.length === 0 && reduction.monte_carlo === null) return null;
  return html`<section>
<h2>Uncertainty</h2>
${budgets.length === 0 ? null : html`<p>Budgets by JCGM 100:2008 (GUM). Sensitivity: change of the result per change of the input. Share: contribution squared over <i>u</i> squared; correlated inputs can make the shares add up to another sum than 100 %.</p>`}
${exact.length === 0 ? null : html`<p>Without a budget, since no uncertainty is given for any of its inputs: ${exact.map(({ q }) => q.title.toLowerCase()).join(', ')}.</p>`}
${budgets.map(({ q, budget }) => budgetTable(q, budget))}
${correlations(reduction.correlation)}
${monteCarlo(reduction)}
</section>`;
}

function budgetTable(q: Quantity, budget: Budget): Markup {
  const counted = budget.rows.filter((row) => row.contribution !== 0);
  const exact = budget.rows.filter((row) => row.contribution === 0);
  const rows = counted.map((row) => [
    row.input,
    html`<span class="nb">${shortText(row.value)}</span>`,
    numberText(row.u, 2),
    unitText(row.unit),
    numberText(row.sensitivity, 3),
    numberText(row.contribution, 2),
    dofText(row.dof),
    percentText((row.contribution / budget.u) ** 2),
  ]);
  const total = [
    html`Result ${symbolMarkup(q.symbol)}`,
    numberText(budget.value, 6),
    '',
    unitText(budget.unit),
    '',
    html`<i>u</i> = ${numberText(budget.u, 2)}`,
    dofText(budget.effective_dof),
    '',
  ];
  const [value, u, expanded] = [budget.value, budget.u, budget.expanded_u].map((x) => x * q.perUnit);
  return html`<section class="whole">
<h3>${q.title} ${symbolMarkup(q.symbol)} = ${estimateText(value ?? null, u ?? null, q.unit)}; expanded <i>U</i> = ${uncertaintyText(expanded ?? 0, q.unit, value ?? null)} (<i>k</i> = ${budget.coverage_factor.toFixed(2)}, 95 %)</h3>
${table({
  heads: [
    'Quantity',
    'Value',
    'Standard uncertainty',
    'Unit',
    'Sensitivity',
    html`Contribution <small>${unitText(budget.unit)}</small>`,
    'Degrees of freedom',
    'Share',
  ],
  rows: [...rows, total],
  numbers: [1, 2, 4, 5, 6, 7],
  classes: [...rows.map(() => null), 'total'],
})}
${exact.length === 0 ? null : html`<p class="small">Taken as exact, or without influence: ${exact.map((row) => row.input).join('; ')}.</p>`}
</section>`;
}

/** A unit stays on one line. */
function unitText(unit: string): string {
  return unit === '1' ? '' : unit.replaceAll(' ', '\u00a0');
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

function monteCarlo({ monte_carlo: drawn, budget }: Results['reduction']): Markup | null {
  if (drawn === null || drawn.results.length === 0) return null;
  const rows = drawn.results.flatMap((r) => {
    const q = quantities.find(({ name }) => name === r.name);
    if (!q) return [];
    const end = (value: number) => numberText(value * q.perUnit, 4);
    const own = budget[r.name];
    const interval = (low: number, high: number) => html`<span class="nb">${end(low)} … ${end(high)}</span>`;
    return [
      [
        q.title,
        shown(q, r.mean, r.u),
        interval(r.low, r.high),
        own === undefined ? NOTHING : interval(own.value - own.expanded_u, own.value + own.expanded_u),
        r.u_over_budget.toFixed(2),
        own === undefined ? '' : agreementText(r, own),
      ],
    ];
  });
  const failed = drawn.failed > 0 ? ` ${drawn.failed} of them ended without a fit and were left out.` : '';
  return html`<section class="whole">
<h3>Cross-check by Monte Carlo (JCGM 101:2008)</h3>
<p>${drawn.draws} draws of all inputs, seed ${drawn.seed}.${failed}</p>
${table({
  heads: [
    'Quantity',
    'Mean ± standard deviation',
    html`95 % <small>drawn</small>`,
    html`95 % <small>by the budget</small>`,
    html`<i>u</i> <small>over the budget’s</small>`,
    'Intervals',
  ],
  rows,
  numbers: [1, 2, 3, 4],
})}
</section>`;
}
