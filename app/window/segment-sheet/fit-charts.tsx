import { useMemo } from 'preact/hooks';
import type uPlot from 'uplot';
import type { FitCurves } from '../../contract.ts';
import { axis, Chart } from '../plots/chart.tsx';
import { colours } from '../state/colours.ts';

const GUTTER = 46;
const upright = (unit: string) => axis({ side: 3, size: GUTTER, space: 22, label: unit });

const quiet: Partial<uPlot.Options> = {
  legend: { show: false },
  cursor: { show: false },
  select: { show: false, left: 0, top: 0, width: 0, height: 0 },
  padding: [6, 6, 0, 0],
};

/** Poses with the fit over them, and the residuals below on the same time axis. */
export function FitChart({ curves, id }: { curves: FitCurves; id: string }) {
  const unit = curves.unit === 'deg' ? '°' : 'px';
  const upper = useMemo<uPlot.AlignedData>(() => {
    const used = Array.from(curves.angle, (y, i) => (curves.used[i] ? y : null));
    const left = Array.from(curves.angle, (y, i) => (curves.used[i] ? null : y));
    return [curves.time_s, used, left, curves.fitted ?? new Array(curves.time_s.length).fill(null)];
  }, [curves]);
  const lower = useMemo<uPlot.AlignedData>(
    () => [
      curves.time_s,
      Array.from(curves.time_s, (_, i) => (curves.residual && curves.used[i] ? (curves.residual[i] ?? null) : null)),
    ],
    [curves],
  );
  return (
    <>
      <Chart
        label={`Segment ${id}: angle of the bar against time with the fit`}
        height={132}
        data={upper}
        of={`${id} ${unit}`}
        options={() => {
          const c = colours.peek();
          return {
            ...quiet,
            scales: { x: { time: false } },
            axes: [axis({ side: 2, size: 6, values: () => [], ticks: { show: false } }), upright(`angle / ${unit}`)],
            series: [
              {},
              { paths: noLine, points: { show: true, size: 3, width: 0, fill: c.data, stroke: c.data } },
              { paths: noLine, points: { show: true, size: 4, width: 1, fill: c.panel, stroke: c.quiet } },
              { stroke: c.fit, width: 1.25, points: { show: false } },
            ],
          };
        }}
      />
      <Chart
        label={`Segment ${id}: residuals against time`}
        height={84}
        data={lower}
        of={`${id} ${unit} residual`}
        options={() => {
          const c = colours.peek();
          return {
            ...quiet,
            scales: { x: { time: false } },
            axes: [axis({ side: 2, size: 32, label: 'time / s', space: 48 }), upright(`resid. / ${unit}`)],
            series: [{}, { paths: noLine, points: { show: true, size: 2.5, width: 0, fill: c.data, stroke: c.data } }],
          };
        }}
      />
    </>
  );
}

const noLine: uPlot.Series.PathBuilder = () => null;

/** Amplitude spectrum of the poses and of the residuals, on a logarithmic scale upwards. */
export function SpectrumChart({ curves, id }: { curves: FitCurves; id: string }) {
  const { spectrum } = curves;
  const unit = curves.unit === 'deg' ? '°' : 'px';
  const data = useMemo<uPlot.AlignedData>(() => {
    if (!spectrum) return [[], []];
    const positive = (column: Float64Array | null) => Array.from(column ?? [], (y) => (y > 0 ? y : null));
    return [spectrum.frequency_Hz, positive(spectrum.amplitude), positive(spectrum.residualAmplitude)];
  }, [spectrum]);
  if (!spectrum) return null;
  return (
    <Chart
      label={`Segment ${id}: amplitude spectrum of the angle and of the residuals`}
      height={108}
      data={data}
      of={`${id} ${unit} spectrum`}
      options={() => {
        const c = colours.peek();
        return {
          ...quiet,
          scales: { x: { time: false }, y: { distr: 3 } },
          axes: [
            axis({ side: 2, size: 32, label: 'frequency / Hz', space: 48 }),
            axis({ side: 3, size: GUTTER, space: 18, label: `amplitude / ${unit}`, values: powers }),
          ],
          series: [
            {},
            { stroke: c.data, width: 1.25, points: { show: false } },
            { stroke: c.fit, width: 1, dash: [4, 3], points: { show: false } },
          ],
        };
      }}
    />
  );
}

const RAISED = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** Powers of ten written as powers, others left unwritten. */
function powers(_plot: uPlot, splits: number[]): (string | null)[] {
  return splits.map((value) => {
    const power = Math.log10(value);
    if (!(value > 0) || Math.abs(power - Math.round(power)) > 1e-6) return null;
    const n = Math.round(power);
    return `10${n < 0 ? '⁻' : ''}${[...String(Math.abs(n))].map((d) => RAISED[Number(d)]).join('')}`;
  });
}
