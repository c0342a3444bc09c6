import { type BarLayers, type PlacedPicture, separate } from './layers.ts';
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
export function movingLayer(
  pictures: readonly PlacedPicture[],
  grid: { readonly halfU: number; readonly halfV: number; readonly squash: number },
  motion: Motion,
): MovingLayer {
  const layers = separate(pictures, grid, null, null, motion.noise);
  const { columns, halfU, halfV, squash, weight, variance } = layers;
  const looks = Array.from({ length: Math.min(LOOKS, pictures.length) }, (_, i) => {
    const { place } = pictures[Math.floor(((i + 0.5) * pictures.length) / Math.min(LOOKS, pictures.length))]!;
    return { ...place, c: Math.cos(place.turn), s: Math.sin(place.turn) };
  });
  let sum = 0;
  let kept = 0;
  for (let at = 0; at < weight.length; at++) {
    if (weight[at] === 0) continue;
    const u = (at % columns) - halfU;
    const v = Math.floor(at / columns) - halfV;
    let energy = 0;
    for (const { x_px, y_px, c, s } of looks) {
      energy += valueAt(motion.energy, x_px + c * u - s * v, y_px + squash * (s * u + c * v)) / looks.length;
    }
    const steady = energy > 0 ? Math.max(0, energy - Math.max(0, variance[at]! - motion.noise)) / energy : 0;
    sum += energy;
    kept += energy * steady;
    weight[at] = weight[at]! * steady * steady;
  }
  return { layers, explained: sum > 0 ? kept / sum : 0 };
}
