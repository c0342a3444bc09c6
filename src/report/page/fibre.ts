import type { FibreLengths, FibreOrigin, Reduction } from '../../reduction/reduction.ts';
import { estimateText, NOTHING, numberText, percentText, typedText } from '../number-text.ts';
import { html, type Markup, symbolMarkup, table } from './html.ts';

const ORIGINS: Readonly<Record<FibreOrigin, string>> = {
  typed: 'stiffness as typed',
  'run without field': 'run without field',
  'runs at lengths': 'magnet on several lengths of fibre',
};

/** What was known of the fibre before the sweep, and the line through its runs at several lengths; null where nothing was. */
export function fibreSection({ fibre_sources: sources, fibre_lengths: lengths }: Reduction): Markup | null {
  if (sources.length === 0 && lengths === null) return null;
  return html`<section class="whole">
<h3>What was known of the fibre</h3>
${
  sources.length === 0
    ? null
    : table({
        heads: [
          'From',
          'Segments',
          html`Part of ${symbolMarkup('f_0²')} <small>Hz²</small>`,
          html`Stiffness ${symbolMarkup('κ')} <small>N m/rad</small>`,
          'Weight',
        ],
        rows: sources.map((source) => [
          ORIGINS[source.origin],
          source.segments.join(', ') || NOTHING,
          estimateText(source.fibre_Hz2, source.u_fibre_Hz2, ''),
          estimateText(source.stiffness_N_m_per_rad, source.u_stiffness_N_m_per_rad, ''),
          source.weight > 0 ? percentText(source.weight) : 'not used',
        ]),
        numbers: [2, 3, 4],
      })
}
${lengths === null ? null : lengthsTable(lengths)}
</section>`;
}

function lengthsTable(lengths: FibreLengths): Markup {
  const field = estimateText(lengths.magnetic_Hz2, lengths.u_magnetic_Hz2, 'Hz²');
  const slope = estimateText(lengths.slope_Hz2_m, lengths.u_slope_Hz2_m, 'Hz² m');
  return html`<p>${symbolMarkup('f_0²')} against 1/length: the field alone gives ${field}, the fibre ${slope} over its length.</p>
${table({
  heads: [
    html`Length <small>m</small>`,
    'Segment',
    html`${symbolMarkup('f_0²')} <small>Hz²</small>`,
    html`Fitted <small>Hz²</small>`,
    html`Residual <small>Hz²</small>`,
  ],
  rows: lengths.runs.map((run) => [
    typedText(run.length_m),
    run.segment ?? NOTHING,
    estimateText(run.f0_Hz ** 2, 2 * run.f0_Hz * run.u_f0_Hz, ''),
    numberText(run.fitted_f0_squared_Hz2, 6),
    numberText(run.residual_Hz2, 2),
  ]),
  numbers: [0, 2, 3, 4],
})}`;
}
