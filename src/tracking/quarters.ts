import type { BarLayers, Outline } from './layers.ts';
import { layerAt } from './layers.ts';

/** Share of the bar's length about the change of tone that is in neither half. */
const BETWEEN = 0.07;

/** The quarters of a bar: halves by the change of tone along it, upper and lower by its middle line. */
export interface Quarters {
  /** u of the change of tone, half the bar's length, v of the middle line, pixels. */
  readonly tone: number;
  readonly half: number;
  readonly line: number;
}

/** Finds the quarters of a bar whose outline is known. */
export function quartersOf(layers: BarLayers, outline: Outline): Quarters {
  const middle = (outline.left + outline.right) / 2;
  const half = (outline.right - outline.left) / 2;
  const line = (outline.top + outline.bottom) / 2;
  const depth = 0.6 * (line - outline.top);
  const greys: number[] = [];
  const from = Math.round(middle - 0.7 * half);
  const to = Math.round(middle + 0.7 * half);
  for (let u = from; u <= to; u++) {
    let sum = 0;
    let n = 0;
    for (let v = Math.ceil(line - depth); v <= line + depth; v++, n++) sum += layerAt(layers, layers.mean, u, v);
    greys.push(sum / Math.max(1, n));
  }
  // The tone changes where the means on either side, a fifth of the bar apart, differ most.
  const reach = Math.max(2, Math.round(0.2 * half));
  let tone = middle;
  let most = 0;
  for (let i = reach; i < greys.length - reach; i++) {
    let difference = 0;
    for (let k = 1; k <= reach; k++) difference += greys[i + k]! - greys[i - k]!;
    if (Math.abs(difference) > most) {
      most = Math.abs(difference);
      tone = from + i;
    }
  }
  return { tone, half, line };
}

/** Number of the quarter a place belongs to, 0 to 3 (1: beyond the change of tone, 2: below the middle line), or `NEITHER`. */
export function quarterOf({ tone, half, line }: Quarters, u: number, v: number): number {
  if (Math.abs(u - tone) < BETWEEN * 2 * half) return NEITHER;
  return (u > tone ? 1 : 0) + (v > line ? 2 : 0);
}

/** Not in any quarter: about the change of tone. */
export const NEITHER = 255;
