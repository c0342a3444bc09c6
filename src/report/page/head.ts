import { estimateText, uncertaintyText } from '../number-text.ts';
import { quantities } from '../quantities.ts';
import type { Results } from '../results.ts';
import { html, type Markup, symbolMarkup } from './html.ts';

/** Title and what was measured in one line. */
export function pageHead(results: Results, madeOn: string | null): Markup {
  const { segments, recordings } = results;
  const counted = (status: string) => segments.filter((s) => s.status === status).length;
  const parts = [`${plural(segments.length, 'segment')} of ${plural(recordings.length, 'recording')}`];
  for (const status of ['measured', 'doubtful', 'unmeasured']) {
    if (counted(status) > 0) parts.push(`${counted(status)} ${status}`);
  }
  return html`<header>
<p>Oscillation of a suspended magnet: report</p>
<h1>${results.session.title.trim() || 'Untitled session'}</h1>
<p>${parts.join(' · ')}${madeOn === null ? null : html` · page made on ${madeOn}`}</p>
</header>`;
}

const MAIN = ['ambient_T', 'moment_A_m2', 'moment_to_inertia', 'slope_Hz2_per_A', 'coil_constant_T_per_A'] as const;

/** The main results in a row of boxes; null where there are none. */
export function mainResults({ reduction }: Results): Markup | null {
  const shown = MAIN.filter((name) => reduction[name] !== null).slice(0, 3);
  if (shown.length === 0) return null;
  const boxes = shown.map((name) => {
    const quantity = quantities.find((q) => q.name === name);
    const [value, u] = [reduction[name], reduction[`u_${name}`]];
    if (!quantity || value === null) return null;
    const budget = reduction.budget[name];
    const expanded =
      budget && budget.u > 0
        ? `U = ${uncertaintyText(budget.expanded_u * quantity.perUnit, quantity.unit, value * quantity.perUnit)} (k = ${budget.coverage_factor.toFixed(2)}, 95 %)`
        : 'standard uncertainty, k = 1';
    const text = estimateText(value * quantity.perUnit, u === null ? null : u * quantity.perUnit, quantity.unit);
    return html`<div><span>${quantity.title} ${symbolMarkup(quantity.symbol)}</span><strong>${text}</strong><span>${expanded}</span></div>
`;
  });
  return html`<div class="key">
${boxes}</div>`;
}

function plural(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}
