import { nextSteps } from '../../reduction/next-steps.ts';
import type { Reduction } from '../../reduction/reduction.ts';
import { percentText } from '../number-text.ts';
import { quantities } from '../quantities.ts';
import { html, type Markup, table } from './html.ts';

/** Which one step more would tighten field, moment over inertia and stiffness most; null where none would. */
export function nextStepsSection(reduction: Reduction): Markup | null {
  const best = nextSteps(reduction)?.best;
  if (best === undefined) return null;
  const names = ['ambient_T', 'moment_to_inertia', 'fibre_stiffness_N_m_per_rad'] as const;
  const rows = names.flatMap((name) => {
    const left = best[name]?.remaining[name] ?? null;
    const quantity = quantities.find((q) => q.name === name);
    return left === null || !quantity ? [] : [[quantity.title, `${step(best[name]?.current_A)} A`, percentText(left)]];
  });
  if (rows.length === 0) return null;
  return html`<section class="whole">
<h3>What one step more would do</h3>
<p>The current at which a further segment, as good as those so far, would tighten each result most.</p>
${table({ heads: ['Result', 'Step at', 'Uncertainty left'], rows, numbers: [1, 2] })}
</section>`;
}

function step(current_A: number | undefined): string {
  return (current_A ?? 0).toFixed(3).replace('-', '−');
}
