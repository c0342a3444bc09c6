import { fieldPlot } from '../../../src/report/plots/field-plot.ts';
import { tableText } from '../field-sheet/table-text.ts';
import { pngOf, svgSize } from '../plots/png.ts';
import { session } from './document.ts';
import { saveDrawing } from './files.ts';
import { tell, tellMistake } from './notices.ts';
import { resultsState } from './results.ts';

/** Copies the results table for a spreadsheet: one row per segment, columns parted by tabulators. */
export function copyTable(): void {
  const rows = resultsState.value?.results?.segments ?? [];
  const text = tableText(rows);
  const put = (event: ClipboardEvent) => {
    event.clipboardData?.setData('text/plain', text);
    event.preventDefault();
  };
  // The copy event needs no permission, which the program gives to nobody.
  document.addEventListener('copy', put, { once: true });
  const done = document.execCommand('copy');
  document.removeEventListener('copy', put);
  if (done) tell(`The table is on the clipboard: ${rows.length} rows.`);
  else tellMistake('The table could not be put on the clipboard.');
}

/** Saves the plot of f0² against current as SVG, or as PNG at twice its size. */
export async function exportPlot(kind: 'svg' | 'png'): Promise<void> {
  const results = resultsState.value?.results;
  if (!results) return;
  const svg = fieldPlot(results);
  const name = `${plainName(session.value?.title ?? 'needlebeat')}-field.${kind}`;
  const bytes = kind === 'svg' ? new TextEncoder().encode(svg) : await pngOf(svg, svgSize(svg), 2);
  if (bytes) await saveDrawing(name, bytes);
  else tellMistake('The plot could not be turned into a PNG picture.');
}

function plainName(title: string): string {
  const plain = title
    .normalize('NFKD')
    .replace(/[^\w]+/g, '-')
    .replace(/^-+|-+$/g, '')
    .toLowerCase();
  return plain.slice(0, 60) || 'needlebeat';
}
