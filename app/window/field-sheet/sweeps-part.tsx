import { numberText } from '../../../src/report/number-text.ts';
import type { Results } from '../../contract.ts';
import { entryText, fixedText, quantityText } from '../numbers/quantity-text.ts';

/** Rising against falling steps, and segments at one current with their scatter: has anything drifted? */
export function SweepsPart({ reduction }: { reduction: Results['reduction'] }) {
  const { sweeps, repeats } = reduction;
  if (!sweeps && repeats.length === 0) return null;
  return (
    <details>
      <summary>Rising against falling, repeated currents</summary>
      {sweeps ? (
        <p class="facts">
          Falling less rising steps ({sweeps.falling} and {sweeps.rising}):{' '}
          {quantityText(sweeps.difference_Hz2, sweeps.u_difference_Hz2, 'Hz²').both} of f₀²
          {sweeps.difference_T === null ? '' : `, as ${numberText(sweeps.difference_T * 1e6, 2)} µT more field`}; so
          much or more has a chance of {fixedText(100 * sweeps.p_value, 0)} % where nothing drifts.
        </p>
      ) : null}
      {repeats.length > 0 ? (
        <table class="plain" aria-label="Several segments at one current">
          <thead>
            <tr>
              <th scope="col" class="number">
                current / A
              </th>
              <th scope="col">segments</th>
              <th scope="col" class="number">
                mean f₀² / Hz²
              </th>
              <th scope="col" class="number">
                scatter / u
              </th>
            </tr>
          </thead>
          <tbody>
            {repeats.map((one) => (
              <tr key={one.current_A}>
                <td class="value">{entryText(one.current_A)}</td>
                <td>{one.ids.join(', ')}</td>
                <td class="value">{quantityText(one.mean_f0_squared_Hz2, one.scatter_Hz2, '').both}</td>
                <td class="value">{fixedText(one.scatter_over_u, 2)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      ) : null}
    </details>
  );
}
