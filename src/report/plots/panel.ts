import type { Scale } from './scale.ts';
import { element, escapeText, type Label, labelMarkup } from './svg.ts';
import type { PlotTheme } from './theme.ts';

/** A rectangle of the drawing in which data are drawn, with a scale for each direction. */
export interface Panel {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
  readonly x: Scale;
  readonly y: Scale;
}

const FONT = 12;
const TICK = 4;

/** Grid, frame, ticks and labels of a panel. Without `xLabel` the x ticks stay unwritten (another panel below carries them). */
export function panelAxes(
  panel: Panel,
  labels: { readonly x: Label | null; readonly y: Label },
  theme: PlotTheme,
): string {
  const { left, right, top, bottom } = panel;
  let lines = '';
  let marks = '';
  let texts = '';
  for (const tick of panel.x.ticks) {
    const at = panel.x.place(tick.value);
    if (at === null || at < left - 0.5 || at > right + 0.5) continue;
    lines += element('path', { d: path([at, top], [at, bottom]) });
    marks += element('path', { d: path([at, bottom], [at, bottom + TICK]) });
    if (labels.x)
      texts += element('text', { x: at, y: bottom + TICK + FONT, 'text-anchor': 'middle' }, escapeText(tick.text));
  }
  for (const tick of panel.y.ticks) {
    const at = panel.y.place(tick.value);
    if (at === null || at < top - 0.5 || at > bottom + 0.5) continue;
    lines += element('path', { d: path([left, at], [right, at]) });
    marks += element('path', { d: path([left - TICK, at], [left, at]) });
    texts += element('text', { x: left - TICK - 3, y: at + FONT * 0.35, 'text-anchor': 'end' }, escapeText(tick.text));
  }
  const middle = (top + bottom) / 2;
  if (labels.x) {
    texts += element(
      'text',
      { x: (left + right) / 2, y: bottom + 35, 'text-anchor': 'middle' },
      labelMarkup(labels.x, FONT),
    );
  }
  texts += element(
    'text',
    { transform: `translate(15 ${Math.round(middle)}) rotate(-90)`, 'text-anchor': 'middle' },
    labelMarkup(labels.y, FONT),
  );
  return (
    element('g', { stroke: theme.grid, 'stroke-width': 1 }, lines) +
    element('rect', { x: left, y: top, width: right - left, height: bottom - top, fill: 'none', stroke: theme.frame }) +
    element('g', { stroke: theme.frame, 'stroke-width': 1 }, marks) +
    element('g', { fill: theme.text, 'font-size': FONT }, texts)
  );
}

/** A level line across the panel, such as the zero of residuals; nothing where the value is outside. */
export function levelLine(panel: Panel, value: number, theme: PlotTheme): string {
  const at = panel.y.place(value);
  if (at === null || at < panel.top || at > panel.bottom) return '';
  return element('path', { d: path([panel.left, at], [panel.right, at]), stroke: theme.frame, 'stroke-width': 1 });
}

/** A path through points, "M… L…". */
export function path(...points: readonly (readonly [number, number])[]): string {
  return points.map(([x, y], i) => `${i === 0 ? 'M' : 'L'}${round(x)} ${round(y)}`).join('');
}

/** The rows of a curve as one path, broken at rows that can't be placed and after steps in x wider than `gap`. */
export function curve(
  panel: Panel,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  rows: readonly number[],
  gap = Number.POSITIVE_INFINITY,
): string {
  let d = '';
  let before: number | null = null;
  for (const i of rows) {
    const px = panel.x.place(x[i]!);
    const py = panel.y.place(y[i]!);
    if (px === null || py === null) {
      before = null;
      continue;
    }
    d += `${before === null || x[i]! - before > gap ? 'M' : 'L'}${round(px)} ${round(py)}`;
    before = x[i]!;
  }
  return d;
}

/** A clipping path of the panel's rectangle; `id` must be unique within the page. */
export function clip(panel: Panel, id: string, content: string): string {
  const { left, top, right, bottom } = panel;
  return (
    element('clipPath', { id }, element('rect', { x: left, y: top, width: right - left, height: bottom - top })) +
    element('g', { 'clip-path': `url(#${id})` }, content)
  );
}

function round(value: number): string {
  return String(Math.round(value * 100) / 100);
}
