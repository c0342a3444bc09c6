import { decimated } from './decimation.ts';
import { type LegendEntry, legend, lineSample } from './legend.ts';
import { marker } from './markers.ts';
import { clip, curve, levelLine, type Panel, panelAxes } from './panel.ts';
import { domainOf, linearScale } from './scale.ts';
import { coordinate, element, type Label, svgDocument } from './svg.ts';
import { lightTheme, type PlotTheme } from './theme.ts';

/** What is drawn of one segment: aligned columns, one row per pose. */
export interface RingDownCurves {
  /** Names the plot where it is read aloud, and keeps its parts' ids unique within a page. */
  readonly id: string;
  /** Seconds, ascending. */
  readonly time_s: ArrayLike<number>;
  /** Degrees, or px where the motion could not be scaled. */
  readonly angle: ArrayLike<number>;
  readonly unit: 'deg' | 'px';
  /** Model and residual of every row, in the same unit; null where there is no fit. */
  readonly fitted: ArrayLike<number> | null;
  readonly residual: ArrayLike<number> | null;
  /** Non-zero where the row was used in the fit; null: all were. */
  readonly used: ArrayLike<number> | null;
}

/** How a plot looks; every plot has its own usual size. */
export interface PlotOptions {
  readonly theme?: PlotTheme;
  /** Drawing units, 1 per CSS pixel at full size. */
  readonly width?: number;
  readonly height?: number;
}

/** Angle against time with the fit, and below it the residuals; an SVG document as text. */
export function ringDownPlot(curves: RingDownCurves, options: PlotOptions = {}): string {
  const { theme = lightTheme, width = 720, height = 360 } = options;
  const left = 64;
  const right = width - 12;
  const bottom = height - 44;
  const split = curves.residual ? Math.round(bottom - 0.26 * (bottom - 28)) : bottom;
  const time = domainOf(Array.from(curves.time_s), 0.01);
  const x = linearScale(time, [left, right], 10);
  const upper: Panel = {
    left,
    right,
    top: 28,
    bottom: curves.residual ? split - 12 : bottom,
    x,
    y: linearScale(domainOf(both(curves.angle, curves.fitted), 0.06), [curves.residual ? split - 12 : bottom, 28], 6),
  };
  const unit = curves.unit === 'deg' ? '°' : 'px';
  const quantity: Label =
    curves.unit === 'deg' ? ['angle ', { symbol: 'θ' }, ` / ${unit}`] : ['position ', { symbol: 'x' }, ` / ${unit}`];
  const timeLabel: Label = ['time ', { symbol: 't' }, ' / s'];
  let content = panelAxes(upper, { x: curves.residual ? null : timeLabel, y: quantity }, theme);
  content += clip(
    upper,
    clipId(curves.id, 'a'),
    fitLine(upper, curves, theme) + dots(upper, curves, curves.angle, theme),
  );
  if (curves.residual) {
    const lower = residualPanel(left, right, split, bottom, x, curves);
    content += panelAxes(lower, { x: timeLabel, y: [`resid. / ${unit}`] }, theme) + levelLine(lower, 0, theme);
    content += clip(lower, clipId(curves.id, 'r'), dots(lower, curves, curves.residual, theme));
  }
  content += legend(entries(curves, theme), left, 14, theme);
  const title = `Ring-down of segment ${curves.id}: ${curves.unit === 'deg' ? 'angle' : 'position'} against time`;
  return svgDocument({ width, height }, { title, background: theme.background }, content);
}

function residualPanel(
  left: number,
  right: number,
  top: number,
  bottom: number,
  x: Panel['x'],
  curves: RingDownCurves,
) {
  const residual = curves.residual ?? [];
  const used = Array.from(residual).filter((_, i) => !curves.used || curves.used[i]);
  // The used rows set the height; a row left out may lie far off and is cut.
  const reach = Math.max(...domainOf(used.length ? used : [0], 0.15).map(Math.abs)) || 1;
  return { left, right, top, bottom, x, y: linearScale([-reach, reach], [bottom, top], 3) };
}

function entries(curves: RingDownCurves, theme: PlotTheme): LegendEntry[] {
  const list: LegendEntry[] = [{ sample: (x, y) => dot(x, y, theme.data, 2), text: 'poses' }];
  if (curves.fitted) list.push({ sample: lineSample(theme.fit), text: 'fit' });
  if (curves.used && Array.from(curves.used).some((u) => !u)) {
    list.push({ sample: (x, y) => openMark(x, y, theme), text: 'poses left out' });
  }
  return list;
}

/** Rows used as dots, the others as crosses. Each kind is one path: that keeps the page small. */
function dots(panel: Panel, curves: RingDownCurves, y: ArrayLike<number>, theme: PlotTheme): string {
  // A line of no length with round ends is a dot.
  const used = spots(panel, curves, y, curves.used, 'h0');
  const out =
    curves.used &&
    spots(
      panel,
      curves,
      y,
      Array.from(curves.used, (u) => (u ? 0 : 1)),
      'm-2.7-2.7l5.4 5.4m0-5.4l-5.4 5.4',
    );
  return (
    (used &&
      element('path', { d: used, stroke: theme.data, 'stroke-width': 2.2, 'stroke-linecap': 'round', fill: 'none' })) +
    (out ? element('path', { d: out, stroke: theme.warning, 'stroke-width': 1.6, fill: 'none' }) : '')
  );
}

function spots(
  panel: Panel,
  curves: RingDownCurves,
  y: ArrayLike<number>,
  keep: ArrayLike<number> | null,
  sign: string,
): string {
  let d = '';
  for (const i of decimated(curves.time_s, y, Math.round(panel.right - panel.left), keep ?? undefined)) {
    const px = panel.x.place(curves.time_s[i]!);
    const py = panel.y.place(y[i]!);
    if (px !== null && py !== null) d += `M${coordinate(px)} ${coordinate(py)}${sign}`;
  }
  return d;
}

function fitLine(panel: Panel, curves: RingDownCurves, theme: PlotTheme): string {
  if (!curves.fitted) return '';
  const rows = decimated(curves.time_s, curves.fitted, Math.round(2 * (panel.right - panel.left)));
  // Over a stretch without poses there is no fit to show.
  const d = curve(panel, curves.time_s, curves.fitted, rows, longestStep(curves.time_s));
  return d && element('path', { d, stroke: theme.fit, 'stroke-width': 1.2, fill: 'none', 'stroke-linejoin': 'round' });
}

/** Ten times the mean step of time. */
function longestStep(time_s: ArrayLike<number>): number {
  const n = time_s.length;
  return n > 1 ? (10 * (time_s[n - 1]! - time_s[0]!)) / (n - 1) : Number.POSITIVE_INFINITY;
}

function* both(a: ArrayLike<number>, b: ArrayLike<number> | null): Generator<number> {
  for (let i = 0; i < a.length; i++) yield a[i]!;
  if (b) for (let i = 0; i < b.length; i++) yield b[i]!;
}

function dot(x: number, y: number, fill: string, r: number): string {
  return element('circle', { cx: x, cy: y, r, fill });
}

function openMark(x: number, y: number, theme: PlotTheme): string {
  return marker('cross', x, y, { stroke: theme.warning, fill: 'none', size: 3 });
}

/** An id for a part of a plot: letters, digits and hyphens only, different for different names. */
export function clipId(name: string, part: string): string {
  const safe = [...name].map((c) => (/[A-Za-z0-9]/.test(c) ? c : `-${(c.codePointAt(0) ?? 0).toString(16)}-`)).join('');
  return `clip-${part}-${safe}`;
}
