import { decimated } from './decimation.ts';
import { type LegendEntry, legend, lineSample } from './legend.ts';
import { clip, curve, type Panel, panelAxes } from './panel.ts';
import { clipId, type PlotOptions } from './ring-down-plot.ts';
import { linearScale, logScale } from './scale.ts';
import { element, escapeText, type Label, svgDocument } from './svg.ts';
import { lightTheme, type PlotTheme } from './theme.ts';

/** Amplitude spectra of one segment: aligned columns. */
export interface SpectrumCurves {
  readonly id: string;
  /** Hz, ascending. */
  readonly frequency_Hz: ArrayLike<number>;
  /** Amplitude of the angle at each frequency, in `unit`. */
  readonly amplitude: ArrayLike<number>;
  /** The same of the residuals; null where there is no fit. */
  readonly residual: ArrayLike<number> | null;
  readonly unit: 'deg' | 'px';
  /** Frequencies worth pointing out, such as that of the twist. */
  readonly marks: readonly { readonly frequency_Hz: number; readonly text: string }[];
}

/** Amplitude against frequency, logarithmic upwards, of the data and of the residuals; an SVG document as text. */
export function spectrumPlot(curves: SpectrumCurves, options: PlotOptions = {}): string {
  const { theme = lightTheme, width = 720, height = 280 } = options;
  const [left, right, top, bottom] = [64, width - 12, 44, height - 44];
  const highest = curves.frequency_Hz[curves.frequency_Hz.length - 1] ?? 1;
  const panel: Panel = {
    left,
    right,
    top,
    bottom,
    x: linearScale([0, highest > 0 ? highest : 1], [left, right], 10),
    y: logScale(amplitudeDomain(curves), [bottom, top], 6),
  };
  const label: Label = [`amplitude / ${curves.unit === 'deg' ? '°' : 'px'}`];
  let content = panelAxes(panel, { x: ['frequency ', { symbol: 'f' }, ' / Hz'], y: label }, theme);
  let lines = spectrumLine(panel, curves.frequency_Hz, curves.amplitude, { stroke: theme.data });
  if (curves.residual) {
    lines += spectrumLine(panel, curves.frequency_Hz, curves.residual, { stroke: theme.fit, dash: '5 3' });
  }
  content += clip(panel, clipId(curves.id, 's'), lines) + marks(panel, curves, theme);
  const entries: LegendEntry[] = [{ sample: lineSample(theme.data), text: 'data' }];
  if (curves.residual) entries.push({ sample: lineSample(theme.fit, '5 3'), text: 'residuals' });
  content += legend(entries, left, 14, theme);
  const title = `Spectrum of segment ${curves.id}: amplitude against frequency`;
  return svgDocument({ width, height }, { title, background: theme.background }, content);
}

/** Five decades at most below the highest amplitude: what lies deeper is rounding. */
function amplitudeDomain(curves: SpectrumCurves): readonly [number, number] {
  let high = 0;
  let low = Number.POSITIVE_INFINITY;
  for (const column of [curves.amplitude, curves.residual ?? []]) {
    for (let i = 0; i < column.length; i++) {
      const value = column[i]!;
      if (!(value > 0) || !Number.isFinite(value)) continue;
      high = Math.max(high, value);
      low = Math.min(low, value);
    }
  }
  if (high === 0) return [0.1, 1];
  return [Math.max(low / 1.5, high * 1e-5), high * 1.6];
}

function spectrumLine(
  panel: Panel,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  style: { readonly stroke: string; readonly dash?: string },
): string {
  const d = curve(panel, x, y, decimated(x, y, Math.round(panel.right - panel.left)));
  return (
    d && element('path', { d, fill: 'none', stroke: style.stroke, 'stroke-width': 1.3, 'stroke-dasharray': style.dash })
  );
}

function marks(panel: Panel, curves: SpectrumCurves, theme: PlotTheme): string {
  let markup = '';
  curves.marks.forEach((mark, i) => {
    const at = panel.x.place(mark.frequency_Hz);
    if (at === null || at < panel.left || at > panel.right) return;
    const anchor = at > panel.right - 120 ? 'end' : 'start';
    const y = panel.top - 4 - 12 * (i % 2 === 0 ? 0 : 1);
    markup += element('path', {
      d: `M${Math.round(at * 100) / 100} ${panel.bottom}V${y}`,
      stroke: theme.second,
      'stroke-width': 1,
      'stroke-dasharray': '2 3',
    });
    markup += element(
      'text',
      { x: at + (anchor === 'end' ? -4 : 4), y: y + 2, 'text-anchor': anchor, fill: theme.second, 'font-size': 11 },
      escapeText(mark.text),
    );
  });
  return markup;
}
