import { addUp, type BarLayers, type Grid, type PlacedPicture, separate } from './layers.ts';
import type { Motion } from './motion.ts';
import { valueAt } from './picture.ts';

/** The averaged picture of whatever moves as the places say. */
export interface MovingLayer {
  /** Its weights count only what varies where it stands and is steady in the bar's frame. */
  readonly layers: BarLayers;
  /** Share of the motion's energy that the places explain: 0 for places that all are the same. */
  readonly explained: number;
}

/** Pictures at which the motion's energy is looked up: it changes slowly. */
const LOOKS = 5;

/**
 * Averages the pictures in the bar's frame and keeps what belongs to the moving bar: grey that varies in the picture but
 * not in the bar's frame. Static texture, however strong, varies in the bar's frame or nowhere, and counts nothing.
 */
export function movingLayer(pictures: readonly PlacedPicture[], grid: Grid, motion: Motion): MovingLayer {
  const layers = separate(pictures, grid, null, null, motion.noise);
  const { columns, halfU, halfV, squash, weight, variance } = layers;
  const energyAt = energyLookup(pictures, squash, motion);
  let sum = 0;
  let kept = 0;
  for (let at = 0; at < weight.length; at++) {
    if (weight[at] === 0) continue;
    const energy = energyAt((at % columns) - halfU, Math.floor(at / columns) - halfV);
    const steady = steadyShare(energy, variance[at]!, motion.noise);
    sum += energy;
    kept += energy * steady;
    weight[at] = weight[at]! * steady * steady;
  }
  return { layers, explained: sum > 0 ? kept / sum : 0 };
}

/** The share of the motion's energy that the places explain, as `movingLayer` gives it, from every `stride`-th row and column. */
export function energyExplained(
  pictures: readonly PlacedPicture[],
  grid: Grid,
  motion: Motion,
  stride: number,
): number {
  const { halfU, halfV, squash } = grid;
  const { columns, rows, n, seen, seen2 } = addUp(pictures, grid, null, stride);
  const variance = new Float32Array(columns * rows).fill(-1);
  for (let at = 0; at < variance.length; at++) {
    const k = n[at]!;
    if (k > 0.5 * pictures.length) variance[at] = Math.max(0, seen2[at]! / k - (seen[at]! / k) ** 2);
  }
  const energyAt = energyLookup(pictures, squash, motion);
  let all = 0;
  let kept = 0;
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      if (variance[row * columns + column]! < 0) continue;
      const energy = energyAt(stride * column - halfU, stride * row - halfV);
      all += energy;
      kept += energy * steadyShare(energy, meanAround(variance, columns, rows, column, row), motion.noise);
    }
  }
  return all > 0 ? kept / all : 0;
}

/** The motion's energy at a place of the bar's frame, averaged over where some of the pictures show it. */
function energyLookup(
  pictures: readonly PlacedPicture[],
  squash: number,
  motion: Motion,
): (u: number, v: number) => number {
  const looks = Array.from({ length: Math.min(LOOKS, pictures.length) }, (_, i) => {
    const { place } = pictures[Math.floor(((i + 0.5) * pictures.length) / Math.min(LOOKS, pictures.length))]!;
    return { ...place, c: Math.cos(place.turn), s: Math.sin(place.turn) };
  });
  return (u, v) => {
    let energy = 0;
    for (const { x_px, y_px, c, s } of looks) {
      energy += valueAt(motion.energy, x_px + c * u - s * v, y_px + squash * (s * u + c * v)) / looks.length;
    }
    return energy;
  };
}

/** The share of the energy at a place that is gone in the bar's frame. */
function steadyShare(energy: number, variance: number, noise: number): number {
  return energy > 0 ? Math.max(0, energy - Math.max(0, variance - noise)) / energy : 0;
}

/** Mean over three by three of the values that are known (not negative). */
function meanAround(values: Float32Array, columns: number, rows: number, column: number, row: number): number {
  let sum = 0;
  let n = 0;
  for (let r = Math.max(0, row - 1); r <= Math.min(rows - 1, row + 1); r++) {
    for (let c = Math.max(0, column - 1); c <= Math.min(columns - 1, column + 1); c++) {
      const value = values[r * columns + c]!;
      if (value < 0) continue;
      sum += value;
      n++;
    }
  }
  return n > 0 ? sum / n : 0;
}
