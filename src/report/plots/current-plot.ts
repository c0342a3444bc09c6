import { type LegendEntry, legend, lineSample } from './legend.ts';
import { type Marker, marker } from './markers.ts';
import { clip, curve, levelLine, type Panel, panelAxes, path } from './panel.ts';
import { clipId, type PlotOptions } from './ring-down-plot.ts';
import { domainOf, linearScale } from './scale.ts';
import { element, escapeText, type Label, svgDocument } from './svg.ts';
import { lightTheme, type PlotTheme } from './theme.ts';

/** One segment in a plot against current. `u_…` are standard uncertainties; null: not to be had. */
export interface CurrentPoint {
  readonly id: string;
  readonly current_A: number;
  readonly u_current_A: number;
  readonly value: number;
  readonly u: number | null;
  /** Value less fitted value, and its uncertainty, that of the current included. */
  readonly residual: number | null;
  readonly u_residual: number | null;
  readonly sweep: 'rising' | 'falling' | null;
  /** Drawn filled; the others are open. */
  readonly trusted: boolean;
  /** Entered the fit; the others are crosses. */
  readonly used: boolean;
}

/** What is drawn against the current: points, the fitted curve with its standard uncertainty, and the words. */
export interface CurrentCurves {
  /** Keeps the ids of the plot's parts unique within a page. */
  readonly id: string;
  readonly title: string;
  readonly quantity: Label;
  readonly residualQuantity: Label;
  readonly points: readonly CurrentPoint[];
  readonly curve: {
    readonly current_A: readonly number[];
    readonly value: readonly number[];
    readonly u: readonly number[] | null;
  } | null;
  readonly curveName: string;
}

/** A quantity against the current with its fitted curve, and the residuals below; an SVG document as text. */
export function currentPlot(curves: CurrentCurves, options: PlotOptions = {}): string {
  const { theme = lightTheme, width = 720, height = 420 } = options;
  const [left, right, bottom] = [64, width - 12, height - 44];
  const residuals = curves.points.some((p) => p.residual !== null);
  const split = residuals ? Math.round(bottom - 0.3 * (bottom - 28)) : bottom + 12;
  const x = linearScale(currentDomain(curves), [left, right], 10);
  const upper: Panel = {
    left,
    right,
    top: 28,
    bottom: split - 12,
    x,
    y: linearScale(domainOf(heights(curves), 0.06), [split - 12, 28], 6),
  };
  const currentLabel: Label = ['current ', { symbol: 'I' }, ' / A'];
  let content = panelAxes(upper, { x: residuals ? null : currentLabel, y: curves.quantity }, theme);
  content += clip(
    upper,
    clipId(curves.id, 'c'),
    levelLine(upper, 0, theme) + band(upper, curves, theme) + fitted(upper, curves, theme),
  );
  // What needs attention is drawn last, on top of the others.
  const points = [...curves.points].sort((a, b) => weight(a) - weight(b));
  content += points.map((p) => mark(upper, p, p.value, p.u, theme)).join('');
  if (residuals) {
    const lower: Panel = {
      left,
      right,
      top: split,
      bottom,
      x,
      y: linearScale(residualDomain(curves), [bottom, split], 4),
    };
    content += panelAxes(lower, { x: currentLabel, y: curves.residualQuantity }, theme) + levelLine(lower, 0, theme);
    const marks = points.map((p) => (p.residual === null ? '' : mark(lower, p, p.residual, p.u_residual, theme)));
    content += clip(lower, clipId(curves.id, 'd'), marks.join(''));
  }
  content += legend(entries(curves, theme), left, 14, theme);
  return svgDocument({ width, height }, { title: curves.title, background: theme.background }, content);
}

function weight(point: CurrentPoint): number {
  return (point.trusted ? 0 : 1) + (point.used ? 0 : 2);
}

function currentDomain(curves: CurrentCurves): readonly [number, number] {
  const ends = curves.points.flatMap((p) => [p.current_A - p.u_current_A, p.current_A + p.u_current_A]);
  return domainOf([...ends, ...(curves.curve?.current_A ?? [])], 0.03);
}

function heights(curves: CurrentCurves): number[] {
  const values = curves.points.flatMap((p) => [p.value - (p.u ?? 0), p.value + (p.u ?? 0)]);
  return [...values, ...(curves.curve?.value ?? [])];
}

/** Symmetric about zero; set by the points used, so that one that was left out doesn't flatten the others. */
function residualDomain(curves: CurrentCurves): readonly [number, number] {
  const reach = (points: readonly CurrentPoint[]) =>
    Math.max(0, ...points.map((p) => (p.residual === null ? 0 : Math.abs(p.residual) + (p.u_residual ?? 0))));
  const most = reach(curves.points.filter((p) => p.used)) || reach(curves.points) || 1;
  return [-1.15 * most, 1.15 * most];
}

function band(panel: Panel, curves: CurrentCurves, theme: PlotTheme): string {
  const { curve: line } = curves;
  if (!line?.u) return '';
  const edge = (sign: 1 | -1) =>
    line.current_A.flatMap((current, i): [number, number][] => {
      const at = panel.x.place(current);
      const y = panel.y.place((line.value[i] ?? Number.NaN) + sign * (line.u?.[i] ?? Number.NaN));
      return at === null || y === null ? [] : [[at, y]];
    });
  const outline = [...edge(1), ...edge(-1).reverse()];
  return outline.length < 3
    ? ''
    : element('path', { d: `${path(...outline)}Z`, fill: theme.fit, 'fill-opacity': '0.15', stroke: 'none' });
}

function fitted(panel: Panel, curves: CurrentCurves, theme: PlotTheme): string {
  if (!curves.curve) return '';
  const { current_A, value } = curves.curve;
  const d = curve(panel, current_A, value, [...current_A.keys()]);
  return d && element('path', { d, fill: 'none', stroke: theme.fit, 'stroke-width': 1.6 });
}

/** A point with its error bars; the name of a segment stands beside it where it is not to be trusted. */
function mark(panel: Panel, point: CurrentPoint, value: number, u: number | null, theme: PlotTheme): string {
  const x = panel.x.place(point.current_A);
  const y = panel.y.place(value);
  if (x === null || y === null) return '';
  const stroke = colour(point, theme);
  let bars = '';
  const [x0, x1] = [
    panel.x.place(point.current_A - point.u_current_A),
    panel.x.place(point.current_A + point.u_current_A),
  ];
  if (x0 !== null && x1 !== null && x1 - x0 > 1) bars += path([x0, y], [x1, y]);
  const [y0, y1] = [panel.y.place(value - (u ?? 0)), panel.y.place(value + (u ?? 0))];
  if (y0 !== null && y1 !== null && y0 - y1 > 1) {
    bars += path([x, y0], [x, y1]) + path([x - 3, y0], [x + 3, y0]) + path([x - 3, y1], [x + 3, y1]);
  }
  const fill = point.trusted ? stroke : theme.background;
  const named = point.used && point.trusted ? '' : name(panel, point, x, y, theme);
  return (
    (bars && element('path', { d: bars, stroke, 'stroke-width': 1.2, fill: 'none' })) +
    marker(shape(point), x, y, { stroke, fill }) +
    named
  );
}

function name(panel: Panel, point: CurrentPoint, x: number, y: number, theme: PlotTheme): string {
  const before = x > panel.right - 60;
  const text = point.id.length > 16 ? `${point.id.slice(0, 15)}…` : point.id;
  return element(
    'text',
    { x: x + (before ? -9 : 9), y: y + 4, 'text-anchor': before ? 'end' : 'start', fill: theme.faint, 'font-size': 11 },
    escapeText(text),
  );
}

function shape(point: CurrentPoint): Marker {
  if (!point.used) return 'cross';
  return point.sweep === 'rising' ? 'up' : point.sweep === 'falling' ? 'down' : 'circle';
}

function colour(point: CurrentPoint, theme: PlotTheme): string {
  if (!point.used) return theme.warning;
  return point.sweep === 'falling' ? theme.second : theme.data;
}

function entries(curves: CurrentCurves, theme: PlotTheme): LegendEntry[] {
  const list: LegendEntry[] = [];
  const add = (text: string, kind: Marker, stroke: string, open = false) =>
    list.push({ text, sample: (x, y) => marker(kind, x, y, { stroke, fill: open ? theme.background : stroke }) });
  const used = curves.points.filter((p) => p.used);
  if (used.some((p) => p.sweep === 'rising')) add('rising', 'up', theme.data);
  if (used.some((p) => p.sweep === 'falling')) add('falling', 'down', theme.second);
  if (used.some((p) => p.sweep === null)) add('measured', 'circle', theme.data);
  if (used.some((p) => !p.trusted)) add('doubtful (open)', 'circle', theme.data, true);
  if (curves.points.some((p) => !p.used)) add('not used', 'cross', theme.warning);
  if (curves.curve) list.push({ text: curves.curveName, sample: lineSample(theme.fit) });
  return list;
}
