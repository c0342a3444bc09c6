import { useMemo, useState } from 'preact/hooks';
import { nextSteps } from '../../../src/reduction/next-steps.ts';
import type { Results } from '../../contract.ts';
import { fixedText } from '../numbers/quantity-text.ts';

const WORDS = {
  ambient_T: 'the field',
  moment_to_inertia: 'moment over inertia',
  fibre_stiffness_N_m_per_rad: 'the fibre’s stiffness',
} as const;

/** While the rig still stands: which one step more would tighten each result most. */
export function NextPart({ reduction }: { reduction: Results['reduction'] }) {
  const [open, setOpen] = useState(false);
  const next = useMemo(() => (open ? nextSteps(reduction) : null), [open, reduction]);
  const names = Object.keys(WORDS) as (keyof typeof WORDS)[];
  const rows = names.flatMap((name) => {
    const best = next?.best[name];
    const left = best?.remaining[name] ?? null;
    return best && left !== null ? [{ name, current_A: best.current_A, left }] : [];
  });
  return (
    <details onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>Which step to film next</summary>
      {open && rows.length === 0 ? <p class="quiet">Nothing to say yet: a fit is needed first.</p> : null}
      {rows.length > 0 ? (
        <table class="plain" aria-label="Steps that would help most">
          <thead>
            <tr>
              <th scope="col">tightens most</th>
              <th scope="col" class="number">
                step at / A
              </th>
              <th scope="col" class="number">
                uncertainty left
              </th>
            </tr>
          </thead>
          <tbody>
            {rows.map(({ name, current_A, left }) => (
              <tr key={name}>
                <th scope="row">{WORDS[name]}</th>
                <td class="value">{fixedText(current_A, 3)}</td>
                <td class="value">{fixedText(100 * left, 1)} %</td>
              </tr>
            ))}
          </tbody>
        </table>
      ) : null}
    </details>
  );
}
