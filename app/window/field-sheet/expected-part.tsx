import type { Results } from '../../contract.ts';
import { fixedText, quantityText } from '../numbers/quantity-text.ts';

/** The field expected at the place, beside the measured one. */
export function ExpectedPart({ reduction }: { reduction: Results['reduction'] }) {
  const e = reduction.expected_field;
  if (!e) return null;
  const share = e.measured_less_expected_share;
  return (
    <section>
      <h3>Expected field</h3>
      <p>
        {e.model}: horizontal {quantityText(e.horizontal_T, e.u_horizontal_T, 'µT', 1e6).both}, declination{' '}
        {fixedText(e.declination_deg, 1)}°, inclination {fixedText(e.inclination_deg, 1)}°.
        {share === null ? '' : ` Measured: ${fixedText(Math.abs(share) * 100, 1)} % ${share < 0 ? 'less' : 'more'}.`}
      </p>
      <p class="quiet">The steel of a building shifts the real field far more than the model’s own uncertainty.</p>
    </section>
  );
}
