import type { SegmentResult, SessionSegment } from '../../contract.ts';
import { commonDecimals, fixedText, quantityText } from '../numbers/quantity-text.ts';
import { STANDING_WORDS, StandingMark } from '../parts/standing-mark.tsx';
import { showAround } from '../state/board.ts';
import { session } from '../state/document.ts';
import { reduction, resultOf, standingOf, waitingFor } from '../state/results.ts';
import { segment, selectSegment, sheet } from '../state/selection.ts';

const SWEEP_SIGNS = { rising: '▲', falling: '▼' } as const;

/** One row per segment; a row selects its segment, Enter opens its sheet. */
export function ResultsTable() {
  const rows = session.value?.segments ?? [];
  // A current is as exact as its uncertainty says, however few digits were typed.
  const decimals = commonDecimals(rows.flatMap((s) => [s.current_A, s.u_current_A ?? null]));
  if (rows.length === 0) return <p class="quiet">No segment has been marked yet.</p>;
  return (
    <div class="table-scroll">
      <table class="results" aria-label="Results by segment">
        <thead>
          <tr>
            <th scope="col" colSpan={2}>
              segment
            </th>
            <th scope="col" colSpan={2} class="number">
              current / A
            </th>
            <th scope="col">
              <span class="unseen">sweep</span>
            </th>
            <th scope="col" colSpan={2} class="number">
              f₀ / Hz
            </th>
            <th scope="col" colSpan={2} class="number">
              γ / s⁻¹
            </th>
            <th scope="col" class="number less">
              Q
            </th>
            <th scope="col" colSpan={2} class="number">
              rest direction / °
            </th>
            <th scope="col" class="number" title="Residual of f₀² from the fitted curve, in standard uncertainties">
              resid. / u
            </th>
          </tr>
        </thead>
        <tbody onKeyDown={walk}>
          {rows.map((s) => (
            <Row key={s.id} of={s} result={resultOf.value.get(s.id)} decimals={decimals} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

interface RowProps {
  readonly of: SessionSegment;
  readonly result: SegmentResult | undefined;
  /** Decimals of the currents and of their uncertainties. */
  readonly decimals: number;
}

function Row({ of: s, result, decimals }: RowProps) {
  const waiting = waitingFor.value.has(s.id);
  const standing = standingOf(s);
  const chosen = segment.value?.id === s.id;
  const f0 = quantityText(result?.f0_Hz, result?.u_f0_Hz, 'Hz');
  const gamma = quantityText(result?.gamma_per_s, result?.u_gamma_per_s, '1/s');
  const rest = quantityText(result?.equilibrium_deg, result?.u_equilibrium_deg, '°');
  const residual = reduction.value?.points.find((p) => p.id === s.id)?.standardised_residual;
  const why = s.left_out ?? result?.checks.find((c) => c.severity !== 'note')?.message;
  return (
    <tr
      data-chosen={chosen || undefined}
      data-row={s.id}
      data-stale={(waiting && result !== undefined) || undefined}
      aria-selected={chosen}
      tabIndex={chosen || segment.value === null ? 0 : -1}
      title={why ?? STANDING_WORDS[standing]}
      onClick={() => selectSegment(s.id)}
      onDblClick={() => open(s)}
      onFocus={() => selectSegment(s.id)}
      onKeyDown={(event) => {
        if (event.key !== 'Enter') return;
        event.preventDefault();
        open(s);
      }}
    >
      <td class="mark">
        <StandingMark standing={standing} />
      </td>
      <th scope="row">{s.id}</th>
      <td class="value">{s.current_A === null ? '?' : fixedText(s.current_A, decimals)}</td>
      <td class="u">{s.u_current_A ? `± ${fixedText(s.u_current_A, decimals)}` : ''}</td>
      <td class="sweep">{s.sweep ? <span title={`${s.sweep} step`}>{SWEEP_SIGNS[s.sweep]}</span> : null}</td>
      <td class="value">{f0.value}</td>
      <td class="u">{f0.u}</td>
      <td class="value">{gamma.value}</td>
      <td class="u">{gamma.u}</td>
      <td class="value less">
        {result?.q_factor == null ? '–' : quantityText(result.q_factor, result.u_q_factor, '').value}
      </td>
      <td class="value">{rest.value}</td>
      <td class="u">{rest.u}</td>
      <td class="value">{fixedText(residual, 1)}</td>
    </tr>
  );
}

function open(s: SessionSegment): void {
  selectSegment(s.id);
  showAround(s);
  sheet.value = 'segment';
}

/** Arrow keys go from row to row. */
function walk(event: KeyboardEvent): void {
  const way =
    event.key === 'ArrowDown' ? 'nextElementSibling' : event.key === 'ArrowUp' ? 'previousElementSibling' : null;
  const row = (event.target as Element).closest('tr');
  const next = way === null ? null : row?.[way];
  if (!(next instanceof HTMLElement)) return;
  event.preventDefault();
  next.focus();
}
