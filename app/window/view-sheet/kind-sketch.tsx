import type { ViewKind } from '../session-edits/view-edits.ts';

interface KindSketchProps {
  readonly kind: ViewKind;
  readonly elevation_deg?: number;
  readonly facing_deg?: number | null;
  /** The angle that the sketch shows was dragged to, whole degrees. */
  onDrag?(angle_deg: number): void;
}

const rad = (deg: number) => (deg * Math.PI) / 180;

/** Handlers that turn a drag on a sketch into an angle; `angle` gets the place from the middle, y downwards, in the sketch's units. */
function dragging(
  middle: readonly [number, number],
  viewWidth: number,
  angle: (dx: number, dy: number) => number,
  onDrag: ((angle_deg: number) => void) | undefined,
) {
  if (!onDrag) return {};
  const to = (event: PointerEvent & { currentTarget: SVGSVGElement }) => {
    const box = event.currentTarget.getBoundingClientRect();
    const scale = viewWidth / Math.max(box.width, 1);
    onDrag(
      Math.round(angle((event.clientX - box.left) * scale - middle[0], (event.clientY - box.top) * scale - middle[1])),
    );
  };
  return {
    'data-drag': true,
    onPointerDown(event: PointerEvent & { currentTarget: SVGSVGElement }) {
      event.currentTarget.setPointerCapture(event.pointerId);
      to(event);
    },
    onPointerMove(event: PointerEvent & { currentTarget: SVGSVGElement }) {
      if (event.currentTarget.hasPointerCapture(event.pointerId)) to(event);
    },
  };
}

const inDegrees = (angle: number) => (angle * 180) / Math.PI;
const clamp = (value: number, least: number, most: number) => Math.min(Math.max(value, least), most);

/** A drawing that explains how the camera looks at the bar, with the angle that is asked for. */
export function KindSketch({ kind, elevation_deg = 45, facing_deg = 0, onDrag }: KindSketchProps) {
  switch (kind) {
    case 'plan':
      return (
        <svg
          class="sketch"
          viewBox="0 0 220 96"
          role="img"
          aria-label="Camera straight above the bar, looking along the fibre"
        >
          <line class="thin" x1="20" x2="200" y1="80" y2="80" />
          <line class="fibre" x1="80" x2="80" y1="30" y2="66" />
          <rect class="bar" x="50" y="66" width="60" height="7" rx="1" />
          <Camera x={80} y={17} turn={90} />
          <text x="96" y="20">
            camera along the fibre
          </text>
          <text x="26" y="92">
            bench
          </text>
        </svg>
      );
    case 'oblique': {
      const [cx, cy, r] = [70, 74, 62];
      const x = cx + r * Math.cos(rad(elevation_deg));
      const y = cy - r * Math.sin(rad(elevation_deg));
      const a = 26;
      return (
        <svg
          class="sketch"
          viewBox="0 0 220 96"
          role="img"
          aria-label={`Camera ${elevation_deg} degrees above the bench`}
          {...dragging([cx, cy], 220, (dx, dy) => clamp(inDegrees(Math.atan2(-dy, dx)), 10, 85), onDrag)}
        >
          <line class="thin" x1="20" x2="200" y1={cy + 5} y2={cy + 5} />
          <line class="fibre" x1={cx} x2={cx} y1="14" y2={cy - 6} />
          <rect class="bar" x={cx - 24} y={cy - 6} width="48" height="7" rx="1" />
          <line class="dashed" x1={cx} y1={cy} x2={cx + 100} y2={cy} />
          <line class="dashed" x1={cx} y1={cy} x2={x} y2={y} />
          <path
            class="angle"
            d={`M${cx + a} ${cy}A${a} ${a} 0 0 0 ${cx + a * Math.cos(rad(elevation_deg))} ${cy - a * Math.sin(rad(elevation_deg))}`}
          />
          <Camera x={x} y={y} turn={180 - elevation_deg} />
          <text x={cx + a + 5} y={cy - 7}>
            elevation {elevation_deg}°
          </text>
        </svg>
      );
    }
    case 'side': {
      const f = facing_deg ?? 0;
      const [cx, cy, r] = [110, 44, 30];
      const dx = r * Math.sin(rad(f));
      const dy = r * Math.cos(rad(f));
      return (
        <svg
          class="sketch"
          viewBox="0 0 220 118"
          role="img"
          aria-label={`From above: bar at rest ${f} degrees from the line of sight`}
          {...dragging([cx, cy], 220, (dx, dy) => clamp(inDegrees(Math.atan2(dx, dy)), -90, 90), onDrag)}
        >
          <line class="dashed" x1={cx} y1={cy} x2={cx} y2="94" />
          <line class="bar-line" x1={cx - dx} y1={cy - dy} x2={cx + dx} y2={cy + dy} />
          <circle class="fibre-dot" cx={cx} cy={cy} r="2.500" />
          <circle class="near-end" cx={cx + dx} cy={cy + dy} r="4" />
          <path
            class="angle"
            d={`M${cx} ${cy + 22}A22 22 0 0 ${f >= 0 ? 0 : 1} ${cx + 22 * Math.sin(rad(f))} ${cy + 22 * Math.cos(rad(f))}`}
          />
          <Camera x={cx} y={104} turn={-90} />
          <text x="6" y="14">
            seen from above
          </text>
          <text x={cx + dx + (f >= 0 ? 8 : -8)} y={cy + dy + 4} text-anchor={f >= 0 ? 'start' : 'end'}>
            near end
          </text>
          <text x={cx - 8} y="84" text-anchor="end">
            facing {facing_deg === null ? '?' : `${String(f).replace('-', '−')}°`}
          </text>
        </svg>
      );
    }
    default:
      return kind satisfies never;
  }
}

/** A phone looking to the left, turned clockwise by so many degrees. */
function Camera({ x, y, turn }: { x: number; y: number; turn: number }) {
  return (
    <g class="camera" transform={`translate(${x} ${y}) rotate(${turn})`}>
      <rect x="-3" y="-9" width="7" height="18" rx="1.500" />
      <path d="M4 -3.500 9 -6V6L4 3.500Z" />
    </g>
  );
}
