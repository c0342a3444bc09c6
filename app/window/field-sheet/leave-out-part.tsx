import type { Results } from '../../contract.ts';
import { fixedText } from '../numbers/quantity-text.ts';
import { selectSegment } from '../state/selection.ts';

/** How the answer moves when a point is left out, and the points that were left out. */
export function LeaveOutPart({ reduction }: { reduction: Results['reduction'] }) {
  const moving = [...reduction.leave_one_out]
    .filter((one) => one.largest_change_in_u !== null)
    .sort((a, b) => (b.largest_change_in_u ?? 0) - (a.largest_change_in_u ?? 0))
    .slice(0, 5);
  const out = reduction.points_left_out;
  if (moving.length === 0 && out.length === 0) return null;
  return (
    <details>
      <summary>Points: which weigh most, which are left out</summary>
      {moving.length > 0 ? (
        <table class="plain" aria-label="Change of the results without one point">
          <thead>
            <tr>
              <th scope="col">without</th>
              <th scope="col" class="number">
                field / µT
              </th>
              <th scope="col" class="number">
                largest change / u
              </th>
            </tr>
          </thead>
          <tbody>
            {moving.map((one) => (
              <tr key={one.id} onClick={() => selectSegment(one.id)}>
                <th scope="row">{one.id}</th>
                <td class="value">{signed(one.ambient_change_T === null ? null : one.ambient_change_T * 1e6)}</td>
                <td class="value">{fixedText(one.largest_change_in_u, 2)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      ) : null}
      {out.length > 0 ? (
        <ul class="plain-list">
          {out.map((one) => (
            <li key={one.id}>
              <b>{one.id}</b> {one.reason}
            </li>
          ))}
        </ul>
      ) : null}
    </details>
  );
}

function signed(value: number | null): string {
  const text = fixedText(value, 3);
  return value !== null && value > 0 ? `+${text}` : text;
}
