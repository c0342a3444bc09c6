import { element, escapeText } from './svg.ts';
import type { PlotTheme } from './theme.ts';

/** One entry of a legend: a sample drawn at a given middle, and its words. */
export interface LegendEntry {
  readonly sample: (x: number, y: number) => string;
  readonly text: string;
}

/** Entries in a row from the left, at height `y`. Widths are estimated: drawing has no font metrics. */
export function legend(entries: readonly LegendEntry[], left: number, y: number, theme: PlotTheme): string {
  let x = left;
  let markup = '';
  for (const entry of entries) {
    markup += entry.sample(x + 9, y);
    markup += element('text', { x: x + 22, y: y + 4, fill: theme.text, 'font-size': 12 }, escapeText(entry.text));
    x += 22 + entry.text.length * 6.1 + 18;
  }
  return markup;
}

/** Sample of a line, 18 units wide. */
export function lineSample(stroke: string, dash?: string): LegendEntry['sample'] {
  return (x, y) =>
    element('path', {
      d: `M${x - 9} ${y}L${x + 9} ${y}`,
      stroke,
      'stroke-width': 1.8,
      'stroke-dasharray': dash,
      fill: 'none',
    });
}
