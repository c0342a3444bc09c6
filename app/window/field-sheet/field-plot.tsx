import { useEffect, useRef, useState } from 'preact/hooks';
import type { CurrentPoint } from '../../../src/report/plots/current-plot.ts';
import { fieldCurves } from '../../../src/report/plots/field-plot.ts';
import { domainOf, linearScale, type Scale } from '../../../src/report/plots/scale.ts';
import type { Results } from '../../contract.ts';
import { entryText, quantityText } from '../numbers/quantity-text.ts';
import { PlotAxes } from '../plots/plot-axes.tsx';
import { segment, selectSegment } from '../state/selection.ts';

const HEIGHT = 250;
const LEFT = 58;
const SPLIT = 152;
const BOTTOM = HEIGHT - 36;
const LOWER_TOP = 166;

/** f0² against current with the fitted curve, and the residuals below. A point is a button that selects its segment. */
export function FieldPlot({ results }: { results: Results }) {
  const frame = useRef<HTMLDivElement>(null);
  const [width, setWidth] = useState(480);
  useEffect(() => {
    const element = frame.current;
    if (!element) return;
    const observer = new ResizeObserver(() => setWidth(Math.max(220, element.clientWidth)));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);

  const curves = fieldCurves(results);
  const { points, curve } = curves;
  const right = width - 10;
  const ends = points.flatMap((p) => [p.current_A - p.u_current_A, p.current_A + p.u_current_A]);
  const x = linearScale(domainOf([...ends, ...(curve?.current_A ?? [])], 0.03), [LEFT, right], width / 90);
  const heights = [...points.flatMap((p) => [p.value - (p.u ?? 0), p.value + (p.u ?? 0)]), ...(curve?.value ?? [])];
  const y = linearScale(domainOf(heights, 0.06), [SPLIT, 10], 5);
  const reach = Math.max(
    ...points.filter((p) => p.used).map((p) => Math.abs(p.residual ?? 0) + (p.u_residual ?? 0)),
    1e-9,
  );
  const r = linearScale([-1.2 * reach, 1.2 * reach], [BOTTOM, LOWER_TOP], 3);
  const line = (sign: number) =>
    (curve?.current_A ?? []).map(
      (a, i) => `${x.place(a)},${y.place((curve?.value[i] ?? 0) + sign * (curve?.u?.[i] ?? 0))}`,
    );
  const ordered = [...points].sort((a, b) => a.current_A - b.current_A);

  return (
    <div ref={frame} class="field-plot">
      {/* biome-ignore lint/a11y/useSemanticElements: SVG has no fieldset. */}
      <svg width={width} height={HEIGHT} role="group" aria-label={curves.title}>
        <PlotAxes left={LEFT} right={right} top={10} bottom={SPLIT} x={x} y={y} yLabel="f₀² / Hz²" />
        <PlotAxes
          left={LEFT}
          right={right}
          top={LOWER_TOP}
          bottom={BOTTOM}
          x={x}
          y={r}
          yLabel="resid. / Hz²"
          xLabel="current / A"
        />
        {curve?.u ? <polygon class="fit-band" points={[...line(1), ...line(-1).reverse()].join(' ')} /> : null}
        {curve ? <polyline class="fit-line" points={line(0).join(' ')} /> : null}
        <line class="zero-line" x1={LEFT} x2={right} y1={r.place(0) ?? 0} y2={r.place(0) ?? 0} />
        {/* biome-ignore lint/a11y/noAriaHiddenOnFocusable: these marks can’t take the keyboard, the points above can. */}
        <g aria-hidden="true">
          {points.map((p) =>
            p.residual === null ? null : (
              <Mark key={p.id} of={p} x={x} y={r} value={p.residual} u={p.u_residual} clip={[LOWER_TOP, BOTTOM]} />
            ),
          )}
        </g>
        {ordered.map((p, i) => (
          <PlotPoint key={p.id} of={p} x={x} y={y} first={segment.value ? segment.value.id === p.id : i === 0} />
        ))}
      </svg>
      <Legend points={points} curveName={curve ? curves.curveName : null} />
    </div>
  );
}

function PlotPoint({ of: p, x, y, first }: { of: CurrentPoint; x: Scale; y: Scale; first: boolean }) {
  const chosen = segment.value?.id === p.id;
  const text = quantityText(p.value, p.u, 'Hz²').both;
  const state = `${p.used ? '' : ', not used'}${p.trusted ? '' : ', doubtful'}${p.sweep ? `, ${p.sweep}` : ''}`;
  return (
    // biome-ignore lint/a11y/useSemanticElements: SVG has no button.
    <g
      class="plot-point"
      role="button"
      tabindex={first ? 0 : -1}
      data-point={p.id}
      data-chosen={chosen || undefined}
      aria-label={`${p.id}: ${entryText(p.current_A)} A, ${text}${state}`}
      aria-pressed={chosen}
      onClick={() => selectSegment(p.id)}
      onKeyDown={(event) => {
        const way =
          event.key === 'ArrowRight'
            ? 'nextElementSibling'
            : event.key === 'ArrowLeft'
              ? 'previousElementSibling'
              : null;
        if (event.key === 'Enter' || event.key === ' ') selectSegment(p.id);
        else if (way) {
          const next = event.currentTarget[way];
          if (!(next instanceof SVGElement) || !next.classList.contains('plot-point')) return;
          next.focus();
          selectSegment(next.dataset.point ?? p.id);
        } else return;
        event.preventDefault();
        event.stopPropagation();
      }}
    >
      <title>{`${p.id}: ${entryText(p.current_A)} A, ${text}${state}`}</title>
      <circle class="reach" cx={x.place(p.current_A) ?? 0} cy={y.place(p.value) ?? 0} r="11" />
      <Mark of={p} x={x} y={y} value={p.value} u={p.u} clip={[10, SPLIT]} />
    </g>
  );
}

interface MarkProps {
  readonly of: CurrentPoint;
  readonly x: Scale;
  readonly y: Scale;
  readonly value: number;
  readonly u: number | null;
  readonly clip: readonly [number, number];
}

/** Error bars and marker of one point, with the shapes that the exported plot has too. */
function Mark({ of: p, x, y, value, u, clip }: MarkProps) {
  const cx = x.place(p.current_A) ?? 0;
  const cy = y.place(value) ?? 0;
  if (cy < clip[0] - 1 || cy > clip[1] + 1) return null;
  const y0 = Math.min(clip[1], y.place(value - (u ?? 0)) ?? cy);
  const y1 = Math.max(clip[0], y.place(value + (u ?? 0)) ?? cy);
  const x0 = x.place(p.current_A - p.u_current_A) ?? cx;
  const x1 = x.place(p.current_A + p.u_current_A) ?? cx;
  return (
    <g
      class="plot-mark"
      data-sweep={p.sweep ?? undefined}
      data-open={!p.trusted || undefined}
      data-unused={!p.used || undefined}
    >
      {y0 - y1 > 2 ? <path class="error" d={`M${cx} ${y0}V${y1}M${cx - 3} ${y0}h6M${cx - 3} ${y1}h6`} /> : null}
      {x1 - x0 > 2 ? <path class="error" d={`M${x0} ${cy}H${x1}`} /> : null}
      <path class="shape" d={markerPath(p, cx, cy)} />
    </g>
  );
}

/** Outline of a point's marker: its shape tells the sweep, a cross that it isn't used. */
function markerPath(p: CurrentPoint, x: number, y: number): string {
  const r = 4.5;
  if (!p.used) return `M${x - 4} ${y - 4}l8 8M${x + 4} ${y - 4}l-8 8`;
  if (p.sweep === 'rising') return `M${x} ${y - r * 1.2}L${x + r * 1.15} ${y + r * 0.8}H${x - r * 1.15}Z`;
  if (p.sweep === 'falling') return `M${x} ${y + r * 1.2}L${x + r * 1.15} ${y - r * 0.8}H${x - r * 1.15}Z`;
  return `M${x - r} ${y}a${r} ${r} 0 1 0 ${2 * r} 0a${r} ${r} 0 1 0 ${-2 * r} 0`;
}

function Legend({ points, curveName }: { points: readonly CurrentPoint[]; curveName: string | null }) {
  const entries: [string, Partial<CurrentPoint>][] = [];
  if (points.some((p) => p.used && p.sweep === 'rising'))
    entries.push(['rising', { sweep: 'rising', used: true, trusted: true }]);
  if (points.some((p) => p.used && p.sweep === 'falling'))
    entries.push(['falling', { sweep: 'falling', used: true, trusted: true }]);
  if (points.some((p) => p.used && p.sweep === null))
    entries.push(['measured', { sweep: null, used: true, trusted: true }]);
  if (points.some((p) => p.used && !p.trusted))
    entries.push(['doubtful (open)', { sweep: null, used: true, trusted: false }]);
  if (points.some((p) => !p.used)) entries.push(['not used', { sweep: null, used: false, trusted: true }]);
  return (
    <ul class="legend" aria-label="Signs in the plot">
      {entries.map(([words, sample]) => (
        <li key={words}>
          <svg width="14" height="14" viewBox="0 0 14 14" aria-hidden="true">
            <g
              class="plot-mark"
              data-sweep={sample.sweep ?? undefined}
              data-open={!sample.trusted || undefined}
              data-unused={!sample.used || undefined}
            >
              <path class="shape" d={markerPath(sample as CurrentPoint, 7, 7)} />
            </g>
          </svg>
          {words}
        </li>
      ))}
      {curveName === null ? null : (
        <li>
          <svg width="22" height="14" viewBox="0 0 22 14" aria-hidden="true">
            <path class="fit-line" d="M1 7H21" />
          </svg>
          {curveName}
        </li>
      )}
    </ul>
  );
}
