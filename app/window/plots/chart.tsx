import { useEffect, useRef } from 'preact/hooks';
import uPlot from 'uplot';
import { fixedText } from '../numbers/quantity-text.ts';
import { colours } from '../state/colours.ts';

interface ChartProps {
  /** What a screen reader says. */
  readonly label: string;
  readonly height: number;
  /** Aligned columns, x first. */
  readonly data: uPlot.AlignedData;
  /** Made anew when `of` changes or the colours turn. */
  readonly options: () => Omit<uPlot.Options, 'width' | 'height'>;
  readonly of: string;
}

/** A plot of long columns that fits the width it is given. */
export function Chart({ label, height, data, options, of }: ChartProps) {
  const place = useRef<HTMLDivElement>(null);
  const plot = useRef<uPlot | null>(null);
  const palette = colours.value;
  const latest = useRef(data);
  latest.current = data;

  useEffect(() => {
    const element = place.current;
    if (!element) return;
    const observer = new ResizeObserver(() =>
      plot.current?.setSize({ width: Math.max(element.clientWidth, 50), height }),
    );
    // A task of its own for each plot: several at once would hold the window up.
    const making = setTimeout(() => {
      const size = { width: Math.max(element.clientWidth, 50), height };
      plot.current = new uPlot({ ...options(), ...size }, latest.current, element);
      observer.observe(element);
    });
    return () => {
      clearTimeout(making);
      observer.disconnect();
      plot.current?.destroy();
      plot.current = null;
    };
  }, [palette, of, height]);

  useEffect(() => {
    if (plot.current && plot.current.data !== data) plot.current.setData(data);
  }, [data]);

  return <div ref={place} class="chart" role="img" aria-label={label} style={{ height: `${height}px` }} />;
}

const FONT = '11px "Segoe UI", Cantarell, Ubuntu, "Noto Sans", "Liberation Sans", Arial, system-ui, sans-serif';

/** A mark with as many decimals as the step to its neighbour needs, and a true minus sign. */
function tickText(value: number, neighbour: number): string {
  const step = Math.abs(value - neighbour);
  const decimals = step > 0 ? Math.min(6, Math.max(0, -Math.floor(Math.log10(step) + 1e-9))) : 0;
  return fixedText(value, decimals);
}

/** An axis as all plots of the window have it. */
export function axis(more: Partial<uPlot.Axis>): uPlot.Axis {
  const c = colours.peek();
  return {
    stroke: c.quiet,
    font: FONT,
    labelFont: FONT,
    labelSize: 14,
    labelGap: 0,
    gap: 3,
    grid: { stroke: c.line, width: 1 },
    ticks: { stroke: c.line, width: 1, size: 4 },
    values: (_plot, splits) => splits.map((value, i) => tickText(value, splits[i === 0 ? 1 : i - 1] ?? value)),
    ...more,
  };
}
