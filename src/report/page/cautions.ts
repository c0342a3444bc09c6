import { html, type Markup } from './html.ts';

/** What anybody who works from the page should know, in plain sentences. */
export const cautionSentences: readonly string[] = [
  'Coils get hot at high current: stay within the winding’s rating and watch the supply’s limit.',
  'Strong magnets pinch fingers and disturb pacemakers, cards and instruments.',
  'Follow the laboratory’s own rules and local codes; these results are no substitute for a calibration by an accredited laboratory where one is required.',
];

/** The cautions as a box. */
export function cautions(): Markup {
  return html`<p class="cautions">${cautionSentences.join(' ')}</p>`;
}
