import type { Check } from '../../oscillation/ring-down.ts';
import type { Results } from '../results.ts';
import { html, type Markup, table } from './html.ts';

/** Every check as a sentence, the points left out with their reasons, and the user's notes. */
export function findings(results: Results): Markup {
  const { segments, reduction } = results;
  const checks = segments.flatMap((s) => s.checks.map((check) => ({ id: s.id, check })));
  const order = ['fault', 'doubt', 'note'] as const;
  const sorted = order.flatMap((severity) => gathered(checks.filter(({ check }) => check.severity === severity)));
  const notes = segments.filter((s) => s.note.trim() !== '');
  return html`<section>
<h2>Checks, points left out, notes</h2>
${sorted.length === 0 ? html`<p>No check has anything to say about any segment.</p>` : html`<ul class="checks">${sorted.map(checkItem)}</ul>`}
${
  reduction.points_left_out.length === 0
    ? null
    : html`<h3>Left out of the reduction</h3>
${table({ heads: ['Segment', 'Reason'], rows: reduction.points_left_out.map((p) => [p.id, p.reason]) })}`
}
${
  notes.length === 0
    ? null
    : html`<h3>Notes of the session</h3>
${table({ heads: ['Segment', 'Note'], rows: notes.map((s) => [s.id, s.note]) })}`
}
</section>`;
}

/** A severity in words and sign: colour alone would be lost on a grey printer. */
export function severityMark(check: Check): Markup {
  const sign = { fault: '✕', doubt: '▲', note: '·' }[check.severity];
  return html`<span class="mark ${check.severity}">${sign} ${check.severity}</span>`;
}

interface Finding {
  readonly ids: readonly string[];
  readonly check: Check;
}

/** What is said of several segments in the same words is said once. */
function gathered(checks: readonly { readonly id: string; readonly check: Check }[]): Finding[] {
  const found = new Map<string, { ids: string[]; check: Check }>();
  for (const { id, check } of checks) {
    const same = found.get(check.message);
    if (same) same.ids.push(id);
    else found.set(check.message, { ids: [id], check });
  }
  return [...found.values()];
}

function checkItem({ ids, check }: Finding): Markup {
  return html`<li>${severityMark(check)}<span>${ids.join(', ')}</span><span>${check.message}</span></li>
`;
}
