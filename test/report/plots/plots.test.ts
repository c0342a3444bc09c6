import { describe, expect, it } from 'vitest';
import { fieldCurves, fieldPlot, restDirectionPlot } from '../../../src/report/plots/field-plot.ts';
import { type RingDownCurves, ringDownPlot } from '../../../src/report/plots/ring-down-plot.ts';
import { spectrumPlot } from '../../../src/report/plots/spectrum-plot.ts';
import { escapeText, labelMarkup, labelText } from '../../../src/report/plots/svg.ts';
import { darkTheme, lightTheme } from '../../../src/report/plots/theme.ts';
import { exampleResults, withSegment } from '../support/results-fixture.ts';
import { elementsOf } from '../support/well-formed.ts';

const HOSTILE = '"/><script>x</script>&\u0000';

function ringDown(n = 834): RingDownCurves {
  const time_s = Float64Array.from({ length: n }, (_, i) => 3.2 + i / 30);
  const fitted = time_s.map((t) => 9.8 * Math.exp(-0.0123 * t) * Math.cos(2 * Math.PI * 0.61 * t));
  const residual = time_s.map((_, i) => 0.02 * Math.sin(12.9898 * i));
  return {
    id: 's01',
    time_s,
    angle: fitted.map((f, i) => f + (residual[i] ?? 0)),
    unit: 'deg',
    fitted,
    residual,
    used: Uint8Array.from(time_s, (_, i) => (i % 100 === 50 ? 0 : 1)),
  };
}

const spectrum = (id = 's01') => ({
  id,
  frequency_Hz: Float64Array.from({ length: 500 }, (_, i) => 0.03 * i),
  amplitude: Float64Array.from({ length: 500 }, (_, i) => 9 / (1 + (i - 20) ** 2) + 1e-3),
  residual: Float64Array.from({ length: 500 }, () => 1e-3),
  unit: 'deg' as const,
  marks: [{ frequency_Hz: 0.614, text: `twist ${id}` }],
});

/** Numbers of all paths of a plot. */
const drawnNumbers = (svg: string) =>
  elementsOf(svg).flatMap((e) => (e.attributes.d ?? '').match(/-?\d+(\.\d+)?/g)?.map(Number) ?? []);

describe.each([
  ['ring-down', (id: string) => ringDownPlot({ ...ringDown(), id })],
  ['spectrum', (id: string) => spectrumPlot(spectrum(id))],
  ['f0² against current', (id: string) => fieldPlot(withSegment(2, { id }))],
])('the plot of %s', (_, plot) => {
  it('is a well-formed SVG document with a title, whose paths hold finite numbers', () => {
    const svg = plot('s01');
    const [root] = elementsOf(svg);
    expect(root).toMatchObject({ name: 'svg', attributes: { xmlns: 'http://www.w3.org/2000/svg', role: 'img' } });
    expect(svg).toMatch(/<title>.+<\/title>/);
    expect(drawnNumbers(svg).every(Number.isFinite)).toBe(true);
    expect(svg).not.toMatch(/NaN|Infinity|undefined/);
  });

  it('stays harmless with a hostile id', () => {
    expect(elementsOf(plot(HOSTILE)).map((e) => e.name)).not.toContain('script');
  });
});

describe('the plot of a ring-down', () => {
  it('writes quantities with their units', () => {
    const svg = ringDownPlot(ringDown());
    expect(svg).toContain('angle <tspan font-style="italic">θ</tspan> / °');
    expect(svg).toContain('time <tspan font-style="italic">t</tspan> / s');
    expect(ringDownPlot({ ...ringDown(), unit: 'px' })).toContain(' / px');
  });

  it('marks poses left out by their own shape, and says so', () => {
    expect(ringDownPlot(ringDown())).toContain('poses left out');
    expect(ringDownPlot({ ...ringDown(), used: null })).not.toContain('poses left out');
  });

  it('stays small for an hour at 60 frames per second', () => {
    expect(ringDownPlot(ringDown(216_000)).length).toBeLessThan(400_000);
  });

  it('does without a fit, and with a single pose', () => {
    expect(ringDownPlot({ ...ringDown(), fitted: null, residual: null })).not.toContain('resid.');
    const one = ringDownPlot({ ...ringDown(1), used: null });
    expect(drawnNumbers(one).every(Number.isFinite)).toBe(true);
  });

  it('differs in dark colours only by its colours', () => {
    const plain = (svg: string) => svg.replaceAll(/#[0-9a-f]{6}/g, '#');
    const light = ringDownPlot(ringDown());
    const dark = ringDownPlot(ringDown(), { theme: darkTheme });
    expect(dark).not.toBe(light);
    expect(plain(dark)).toBe(plain(light));
  });
});

describe('the plot against current', () => {
  it('has every segment with a current and a frequency, and tells the used ones', () => {
    const { points } = fieldCurves(exampleResults());
    expect(points.map((p) => p.id)).not.toContain('s05');
    expect(points).toHaveLength(11);
    expect(points.filter((p) => !p.used).map((p) => p.id)).toEqual(['s10']);
    expect(points.filter((p) => !p.trusted).map((p) => p.id)).toEqual(['s03']);
  });

  it('squares the frequency and carries its uncertainty along: u(f²) = 2 f u(f)', () => {
    const results = withSegment(0, { f0_Hz: 0.5, u_f0_Hz: 0.001 });
    expect(fieldCurves(results).points[0]).toMatchObject({ value: 0.25, u: 0.001 });
  });

  it('tells rising, falling, doubtful and unused ones by shape and in words', () => {
    const svg = fieldPlot(exampleResults());
    for (const words of ['rising', 'falling', 'doubtful (open)', 'not used', 'fitted line'])
      expect(svg).toContain(words);
  });

  it('is drawn from the segments alone where there is no reduction', () => {
    const results = exampleResults();
    const reduction = { ...results.reduction, points: [], points_used: [], curve: null, model: null };
    const svg = fieldPlot({ ...results, reduction });
    expect(svg).not.toContain('resid.');
    expect(svg).not.toContain('fitted');
    expect(
      fieldCurves({ ...results, reduction })
        .points.filter((p) => !p.used)
        .map((p) => p.id),
    ).toEqual(['s10']);
  });

  it('of rest directions is null where the model has none', () => {
    expect(restDirectionPlot(exampleResults())).toBeNull();
    const { reduction, segments } = exampleResults();
    const points = reduction.points.map((p) => ({ ...p, fitted_equilibrium_deg: -12, equilibrium_residual_deg: 0.1 }));
    expect(restDirectionPlot({ segments, reduction: { ...reduction, points } })).toContain('fitted turning');
  });
});

describe('text in plots', () => {
  it('is escaped for elements and attributes, and holds only what XML can', () => {
    expect(escapeText(`<a href="x">&'`)).toBe('&lt;a href=&quot;x&quot;&gt;&amp;&#39;');
    expect(escapeText('a\u0000b\ud800c')).toBe('a\ufffdb\ufffdc');
    expect(escapeText('磁 🧲')).toBe('磁 🧲');
  });

  it('sets signs low and symbols slanted', () => {
    const label = [{ symbol: 'f' }, { sub: '0' }, '² / Hz²'];
    expect(labelText(label)).toBe('f0² / Hz²');
    expect(labelMarkup(label, 10)).toBe(
      '<tspan font-style="italic">f</tspan><tspan dy="2.2" font-size="7.2">0</tspan><tspan dy="-2.2">² / Hz²</tspan>',
    );
  });
});

/** Relative luminance and contrast by WCAG 2.1 (W3C Recommendation, 2018). */
function contrast(a: string, b: string): number {
  const luminance = (colour: string) => {
    const [r = 0, g = 0, blue = 0] = [1, 3, 5].map((i) => {
      const c = Number.parseInt(colour.slice(i, i + 2), 16) / 255;
      return c <= 0.03928 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
    });
    return 0.2126 * r + 0.7152 * g + 0.0722 * blue;
  };
  const [low = 0, high = 0] = [luminance(a), luminance(b)].sort((x, y) => x - y);
  return (high + 0.05) / (low + 0.05);
}

describe.each([
  ['light', lightTheme],
  ['dark', darkTheme],
])('the %s theme', (_, theme) => {
  it('has text of contrast 4.5 and marks of contrast 3 at least', () => {
    for (const text of [theme.text, theme.faint]) expect(contrast(text, theme.background)).toBeGreaterThanOrEqual(4.5);
    for (const mark of [theme.data, theme.fit, theme.second, theme.warning, theme.frame]) {
      expect(contrast(mark, theme.background)).toBeGreaterThanOrEqual(3);
    }
  });
});
