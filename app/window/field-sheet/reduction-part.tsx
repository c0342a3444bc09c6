import { quantities } from '../../../src/report/quantities.ts';
import type { Results } from '../../contract.ts';
import { prefixed, quantityText } from '../numbers/quantity-text.ts';
import { LoweredSymbol } from '../parts/lowered-symbol.tsx';

type Reduction = Results['reduction'];

/** What follows from frequencies and currents: field, constants, moment, with the model they come from. */
export function ReductionPart({ reduction }: { reduction: Reduction }) {
  const rows = quantities.filter(({ name }) => reduction[name] !== null);
  return (
    <section>
      <h3>Reduction</h3>
      {reduction.model ? <p class="quiet">{reduction.model.sentence}</p> : null}
      {rows.length === 0 ? (
        <p class="quiet">Nothing can be reduced yet: what is missing stands below.</p>
      ) : (
        <table class="numbers reduction" aria-label="Reduction">
          <tbody>
            {rows.map((q) => {
              const value = reduction[q.name];
              const shown = shownUnit(value ?? 0, q.unit, q.perUnit);
              const text = quantityText(value, reduction[`u_${q.name}`], shown.unit, shown.factor);
              return (
                <tr key={q.name} title={q.description}>
                  <th scope="row">
                    <span class="symbol">
                      <LoweredSymbol of={q.symbol} />
                    </span>{' '}
                    <span class="quantity-name">{q.title}</span>
                  </th>
                  <td class="value">{text.value}</td>
                  <td class="u">{text.u}</td>
                  <td class="unit">{text.unit}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      )}
      {reduction.fibre_sources.map((source) => {
        const [value, u] = [source.stiffness_N_m_per_rad, source.u_stiffness_N_m_per_rad];
        const unit = shownUnit(value ?? 0, 'N m/rad', 1);
        const text =
          value === null
            ? quantityText(source.fibre_Hz2, source.u_fibre_Hz2, 'Hz² of f₀²', 1)
            : quantityText(value, u, unit.unit, unit.factor);
        const from = source.segments.length === 0 ? '' : ` (${source.segments.join(', ')})`;
        const weight = source.weight > 0 ? `, weight ${Math.round(100 * source.weight)} %` : ', not used';
        return (
          <p key={source.origin} class="facts">
            Fibre, {ORIGINS[source.origin]}
            {from}: {text.both}
            {weight}.
          </p>
        );
      })}
      {reduction.fit ? (
        <p class="facts">
          {reduction.points_used.length} points, χ² = {reduction.fit.chi_square.toPrecision(3)} with {reduction.fit.dof}{' '}
          degrees of freedom
          {reduction.fit.p_value === null ? '' : `, p = ${reduction.fit.p_value.toPrecision(2)}`}
          {reduction.fit.scale_frequencies > 1.001
            ? `; uncertainties raised ${reduction.fit.scale_frequencies.toPrecision(3)} times to match the scatter`
            : ''}
          .
        </p>
      ) : null}
    </section>
  );
}

const ORIGINS: Readonly<Record<Reduction['fibre_sources'][number]['origin'], string>> = {
  typed: 'stiffness as typed',
  'run without field': 'from the run without field',
  'runs at lengths': 'from several lengths',
};

/** Small SI numbers get a prefix so that no power of ten is needed: 2.4e-10 N m/rad as 0.24 nN m/rad. */
export function shownUnit(
  value: number,
  unit: string,
  perUnit: number,
): { readonly unit: string; readonly factor: number } {
  if (perUnit !== 1 || value === 0) return { unit, factor: perUnit };
  if (unit === 'kg m²') return { unit: 'g cm²', factor: 1e7 };
  if (unit === 'A m²' || unit === 'N m/rad') {
    const { factor, unit: shown } = prefixed(value, unit);
    return { unit: shown, factor };
  }
  return { unit, factor: 1 };
}
