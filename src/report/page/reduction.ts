import type { ModelKind, Reduction } from '../../reduction/reduction.ts';
import { dofText, estimateText, NOTHING, numberText, percentText, typedText, uncertaintyText } from '../number-text.ts';
import { type Quantity, quantities } from '../quantities.ts';
import type { Results } from '../results.ts';
import { fibreSection } from './fibre.ts';
import { severityMark } from './findings.ts';
import { html, type Markup, type Piece, symbolMarkup, table } from './html.ts';
import { nextStepsSection } from './next-steps.ts';

/** The results of the reduction with their uncertainties, the model and why, and what could not be had. */
export function reductionSection(results: Results): Markup {
  const { reduction } = results;
  const known = quantities.filter((q) => reduction[q.name] !== null);
  const missing = quantities.filter((q) => reduction[q.name] === null);
  return html`<section>
<h2>Reduction</h2>
${reduction.model === null ? null : html`<p>${reduction.model.sentence}</p>`}
${known.length === 0 ? html`<p>No result could be had.</p>` : resultRows(reduction, known)}
${missing.length === 0 ? null : html`<p class="small">Not to be had from these data: ${missing.map((q) => q.title.toLowerCase()).join(', ')}.</p>`}
${
  reduction.checks.length === 0
    ? null
    : html`<ul class="checks">${reduction.checks.map(
        (check) => html`<li>${severityMark(check)}<span>reduction</span><span>${check.message}</span></li>
`,
      )}</ul>`
}
${fibreSection(reduction)}
${expectedField(reduction)}
${nextStepsSection(reduction)}
</section>`;
}

function resultRows(reduction: Reduction, known: readonly Quantity[]): Markup {
  return table({
    heads: [
      'Quantity',
      'Symbol',
      'Value ± standard uncertainty',
      html`Expanded <i>U</i> <small>95 %</small>`,
      html`<i>k</i>`,
    ],
    rows: known.map((q) => {
      const budget = reduction.budget[q.name];
      return [
        q.title,
        symbolMarkup(q.symbol),
        shown(q, reduction[q.name], reduction[`u_${q.name}`]),
        budget && budget.u > 0
          ? uncertaintyText(budget.expanded_u * q.perUnit, q.unit, budget.value * q.perUnit)
          : NOTHING,
        budget && budget.u > 0 ? budget.coverage_factor.toFixed(2) : NOTHING,
      ];
    }),
    numbers: [2, 3, 4],
  });
}

function expectedField({ expected_field: field }: Reduction): Markup | null {
  if (field === null) return null;
  const share = field.measured_less_expected_share;
  const compared =
    share === null ? '' : ` The measured field is ${percentText(Math.abs(share))} ${share < 0 ? 'below' : 'above'} it.`;
  const horizontal = estimateText(field.horizontal_T * 1e6, field.u_horizontal_T * 1e6, 'µT');
  return html`<h3>Field expected at the place</h3>
<p>${field.model} expects a horizontal field of ${horizontal} (declination ${field.declination_deg.toFixed(1)}°, inclination ${field.inclination_deg.toFixed(1)}°) at the place and date of the session.${compared} The uncertainty is the model’s own; the steel in a building shifts the real field far more.</p>`;
}

const MODELS: Readonly<Record<ModelKind, string>> = {
  line: 'straight line',
  'two branches': 'two branches about the reversal',
  hyperbola: 'hyperbola (field across the axis)',
  turning: 'hyperbola and turning of the rest direction',
};

/** How good the fit is, which models were tried, what single points do, rising against falling, repeated currents. */
export function fitDetails({ reduction }: Results): Markup | null {
  const { fit, model, sweeps } = reduction;
  const parts: Piece[] = [];
  if (fit) {
    const p = fit.p_value === null ? '' : `; a larger one has a chance of ${percentText(fit.p_value)}`;
    const raised =
      fit.scale_frequencies > 1
        ? ` Uncertainties of frequencies and currents were raised by ${fit.scale_frequencies.toFixed(2)} to match the scatter.`
        : '';
    parts.push(
      html`<p>χ² = ${fit.chi_square.toFixed(2)} with ${dofText(fit.dof)} degrees of freedom${p}.${raised}</p>`,
    );
    parts.push(
      table({
        caption: 'Fitted parameters',
        heads: [
          'Parameter',
          'Value ± standard uncertainty',
          'Unit',
          ...fit.parameters.map((_, i) => html`<i>r</i><sub>${i + 1}</sub>`),
        ],
        rows: fit.parameters.map((q, i) => [
          `${i + 1}. ${q.name}`,
          estimateText(q.value, q.u, ''),
          q.unit,
          ...fit.parameters.map((_, j) => coefficient(fit.correlation[i]?.[j])),
        ]),
        numbers: [1, ...fit.parameters.map((_, i) => i + 3)],
      }),
    );
  }
  if (model && model.candidates.length > 1) {
    parts.push(
      table({
        caption: 'Models tried',
        heads: ['Model', 'Fibre', 'χ²', 'Degrees of freedom', 'Parameters', 'Akaike’s criterion', ''],
        rows: model.candidates.map((c) => [
          MODELS[c.kind],
          c.fibre,
          numberText(c.chi_square, 4),
          dofText(c.dof),
          c.parameters,
          c.criterion.toFixed(2).replace('-', '−'),
          c.chosen ? 'chosen' : '',
        ]),
        numbers: [2, 3, 4, 5],
      }),
    );
  }
  if (sweeps) {
    const difference = estimateText(sweeps.difference_Hz2, sweeps.u_difference_Hz2, 'Hz²');
    const field =
      sweeps.difference_T === null
        ? ''
        : `, a change of the field by ${uncertaintyText(sweeps.difference_T * 1e6, 'µT')}`;
    parts.push(
      html`<p>Falling less rising steps (${sweeps.falling} and ${sweeps.rising}): ${difference} in ${symbolMarkup('f_0²')}${field}; a larger difference has a chance of ${percentText(sweeps.p_value)} where there is none.</p>`,
    );
  }
  parts.push(repeats(reduction), leaveOneOut(reduction), residuals(reduction));
  if (parts.every((part) => part === null)) return null;
  return html`<section>
<h2>The fit in detail</h2>
${parts}
</section>`;
}

function residuals({ points }: Reduction): Markup | null {
  if (points.length === 0) return null;
  return table({
    caption: 'Points and residuals',
    heads: [
      'Segment',
      html`${symbolMarkup('I')} <small>A</small>`,
      html`${symbolMarkup('f_0²')} <small>Hz²</small>`,
      html`Fitted <small>Hz²</small>`,
      html`Residual <small>Hz²</small>`,
      'Standardised residual',
      'Used',
    ],
    rows: points.map((p) => [
      p.id,
      typedText(p.current_A),
      estimateText(p.f0_squared_Hz2, p.u_f0_squared_Hz2, ''),
      numberText(p.fitted_f0_squared_Hz2, 6),
      numberText(p.residual_Hz2, 2),
      numberText(p.standardised_residual, 2),
      p.used ? 'yes' : 'no',
    ]),
    numbers: [1, 2, 3, 4, 5],
    classes: points.map((p) => (p.used ? null : 'out')),
  });
}

function leaveOneOut({ leave_one_out: rows }: Reduction): Markup | null {
  if (rows.length === 0) return null;
  const fibre = rows.some((r) => r.fibre_stiffness_change_N_m_per_rad !== null);
  return table({
    caption: 'How the results move when one point is left out',
    heads: [
      'Without',
      html`Ambient field <small>µT</small>`,
      html`Moment over inertia <small>A m²/(kg m²)</small>`,
      ...(fibre ? [html`Fibre stiffness <small>N m/rad</small>`] : []),
      html`Largest change <small>in standard uncertainties</small>`,
    ],
    rows: rows.map((r) => [
      r.id,
      numberText(r.ambient_change_T === null ? null : r.ambient_change_T * 1e6, 2),
      numberText(r.moment_to_inertia_change, 2),
      ...(fibre ? [numberText(r.fibre_stiffness_change_N_m_per_rad, 2)] : []),
      r.largest_change_in_u === null ? NOTHING : r.largest_change_in_u.toFixed(2),
    ]),
    numbers: fibre ? [1, 2, 3, 4] : [1, 2, 3],
  });
}

function repeats({ repeats: rows }: Reduction): Markup | null {
  if (rows.length === 0) return null;
  return table({
    caption: 'Several segments at one current',
    heads: [
      html`${symbolMarkup('I')} <small>A</small>`,
      'Segments',
      html`Mean ${symbolMarkup('f_0²')} <small>Hz²</small>`,
      html`Scatter <small>Hz²</small>`,
      html`Scatter over <i>u</i>`,
    ],
    rows: rows.map((r) => [
      typedText(r.current_A),
      r.ids.join(', '),
      numberText(r.mean_f0_squared_Hz2, 6),
      numberText(r.scatter_Hz2, 2),
      r.scatter_over_u.toFixed(2),
    ]),
    numbers: [2, 3, 4],
  });
}

/** A quantity of the reduction in the unit in which it is shown. */
export function shown(q: Quantity, value: number | null, u: number | null): string {
  return value === null ? NOTHING : estimateText(value * q.perUnit, u === null ? null : u * q.perUnit, q.unit);
}

/** A correlation coefficient with two decimals. */
export function coefficient(value: number | undefined): string {
  return value === undefined || !Number.isFinite(value)
    ? NOTHING
    : value
        .toFixed(2)
        .replace(/^-(?!0\.00)/, '−')
        .replace('-', '');
}
