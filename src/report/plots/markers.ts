import { element } from './svg.ts';

/** Shapes that differ without colour. */
export type Marker = 'circle' | 'up' | 'down' | 'square' | 'cross';

/** A marker centred at (x, y); open ones are filled with `fill`, usually the background. */
export function marker(
  shape: Marker,
  x: number,
  y: number,
  paint: { readonly stroke: string; readonly fill: string; readonly size?: number },
): string {
  const r = paint.size ?? 4.5;
  const common = { fill: paint.fill, stroke: paint.stroke, 'stroke-width': 1.4 };
  switch (shape) {
    case 'circle':
      return element('circle', { cx: x, cy: y, r, ...common });
    case 'square':
      return element('rect', { x: x - r * 0.9, y: y - r * 0.9, width: 1.8 * r, height: 1.8 * r, ...common });
    case 'up':
      return element('path', { d: triangle(x, y, r, -1), 'stroke-linejoin': 'round', ...common });
    case 'down':
      return element('path', { d: triangle(x, y, r, 1), 'stroke-linejoin': 'round', ...common });
    case 'cross':
      return element('path', { d: cross(x, y, r * 0.9), ...common, fill: 'none', 'stroke-width': 1.8 });
    default:
      return shape satisfies never;
  }
}

function triangle(x: number, y: number, r: number, way: 1 | -1): string {
  const tip = y + way * r * 1.2;
  const base = y - way * r * 0.8;
  return `M${cut(x)} ${cut(tip)}L${cut(x + r * 1.15)} ${cut(base)}L${cut(x - r * 1.15)} ${cut(base)}Z`;
}

function cross(x: number, y: number, r: number): string {
  return `M${cut(x - r)} ${cut(y - r)}L${cut(x + r)} ${cut(y + r)}M${cut(x - r)} ${cut(y + r)}L${cut(x + r)} ${cut(y - r)}`;
}

function cut(value: number): string {
  return String(Math.round(value * 100) / 100);
}
