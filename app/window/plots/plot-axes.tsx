import type { Scale } from '../../../src/report/plots/scale.ts';

interface PlotAxesProps {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
  readonly x: Scale;
  readonly y: Scale;
  readonly yLabel: string;
  /** Left out: the marks of x stay unwritten, another panel below carries them. */
  readonly xLabel?: string;
}

/** Grid, frame, marks and labels of one panel of a plot. */
export function PlotAxes({ left, right, top, bottom, x, y, xLabel, yLabel }: PlotAxesProps) {
  const inside = (at: number | null, from: number, to: number): at is number =>
    at !== null && at >= from - 0.5 && at <= to + 0.5;
  return (
    // biome-ignore lint/a11y/noAriaHiddenOnFocusable: lines and their labels can’t take the keyboard.
    <g class="plot-axes" aria-hidden="true">
      {x.ticks.map(({ value, text }) => {
        const at = x.place(value);
        return inside(at, left, right) ? (
          <g key={value}>
            <line class="grid" x1={at} x2={at} y1={top} y2={bottom} />
            {xLabel === undefined ? null : (
              <text x={at} y={bottom + 14} text-anchor="middle">
                {text}
              </text>
            )}
          </g>
        ) : null;
      })}
      {y.ticks.map(({ value, text }) => {
        const at = y.place(value);
        return inside(at, top, bottom) ? (
          <g key={value}>
            <line class="grid" x1={left} x2={right} y1={at} y2={at} />
            <text x={left - 5} y={at + 4} text-anchor="end">
              {text}
            </text>
          </g>
        ) : null;
      })}
      <rect class="frame" x={left} y={top} width={right - left} height={bottom - top} />
      <text class="axis-label" transform={`translate(11 ${(top + bottom) / 2}) rotate(-90)`} text-anchor="middle">
        {yLabel}
      </text>
      {xLabel === undefined ? null : (
        <text class="axis-label" x={(left + right) / 2} y={bottom + 30} text-anchor="middle">
          {xLabel}
        </text>
      )}
    </g>
  );
}
