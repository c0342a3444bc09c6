import { roundedText } from '../../numerics/rounding.ts';
import { NOTHING, numberText, percentText, typedText } from '../number-text.ts';
import type { Results, SegmentResult } from '../results.ts';
import { html, type Markup, type Piece, symbolMarkup, table } from './html.ts';

/** The table of segments, in two parts: what the next person needs, and how each number was had. */
export function segmentTables(results: Results): Markup {
  const { segments } = results;
  if (segments.length === 0) return html`<section><h2>Segments</h2><p>The session has no segments.</p></section>`;
  const classes = segments.map((s) => (s.status !== 'measured' ? s.status : s.left_out !== null ? 'out' : null));
  return html`<section>
<h2>Segments</h2>
${table({
  caption: 'Frequency and damping',
  heads: [
    'Segment',
    html`Current ${symbolMarkup('I')} <small>A</small>`,
    'Sweep',
    'Status',
    html`${symbolMarkup('f_0')} <small>Hz</small>`,
    html`${symbolMarkup('f_d')} <small>Hz</small>`,
    html`${symbolMarkup('γ')} <small>1/s</small>`,
    symbolMarkup('Q'),
  ],
  rows: segments.map(frequencyRow),
  numbers: [1, 4, 5, 6, 7],
  classes,
})}
<p class="small">${symbolMarkup('f_0')}: undamped frequency at small amplitude, what is squared in the reduction. ${symbolMarkup('f_d')}: frequency as observed. ${symbolMarkup('γ')}: the amplitude decays as exp(−${symbolMarkup('γt')}). All uncertainties are standard uncertainties (<i>k</i> = 1).</p>
${table({
  caption: 'How they were had',
  heads: [
    'Segment',
    'Recording, view',
    html`From – to <small>s</small>`,
    'Cycles',
    html`Amplitude <small>°</small>`,
    html`Rest direction <small>°</small>`,
    html`Residual <small>rms, °</small>`,
    html`Frames <small>used of claimed</small>`,
    html`Swing <small>Hz; share</small>`,
  ],
  rows: segments.map(originRow),
  numbers: [2, 3, 4, 5, 6, 7, 8],
  classes,
})}
</section>`;
}

function frequencyRow(s: SegmentResult): Piece[] {
  return [
    s.id,
    s.current_A === null
      ? 'not typed'
      : s.u_current_A > 0
        ? roundedText(s.current_A, s.u_current_A).both
        : typedText(s.current_A),
    s.sweep === null ? '' : html`<span class="nb">${s.sweep === 'rising' ? '↑' : '↓'} ${s.sweep}</span>`,
    s.left_out === null ? s.status : `${s.status}, left out`,
    pair(s.f0_Hz, s.u_f0_Hz),
    pair(s.fd_Hz, s.u_fd_Hz),
    pair(s.gamma_per_s, s.u_gamma_per_s),
    s.q_factor === null ? NOTHING : pair(s.q_factor, s.u_q_factor),
  ];
}

function originRow(s: SegmentResult): Piece[] {
  const view = [s.recording, [s.view, s.view_kind].filter(Boolean).join(' ')].filter(Boolean).join(', ');
  const lost = s.frames_lost > 0 ? `, ${s.frames_lost} lost` : '';
  const refused = s.frames_refused > 0 ? `, ${s.frames_refused} refused` : '';
  return [
    s.id,
    view,
    `${s.start_s.toFixed(2)} – ${s.end_s.toFixed(2)}`,
    s.cycles === null ? NOTHING : s.cycles.toFixed(1),
    s.amplitude_start_deg === null || s.amplitude_end_deg === null
      ? NOTHING
      : `${s.amplitude_start_deg.toFixed(1)} → ${s.amplitude_end_deg.toFixed(1)}`,
    pair(s.equilibrium_deg, s.u_equilibrium_deg),
    numberText(s.residual_rms_deg, 2),
    html`${s.frames_used} of ${s.frames}<small>${lost}${refused}</small>`,
    s.swing_Hz === null ? NOTHING : `${s.swing_Hz.toFixed(3)}; ${percentText(s.swing_share)}`,
  ];
}

function pair(value: number | null, u: number | null): string {
  return value === null ? NOTHING : roundedText(value, u).both;
}
