import type { TriedPlace } from './first-places.ts';
import type { Outline } from './layers.ts';
import { type Picture, valueAt } from './picture.ts';

/** Farthest that a bar is shifted along itself, pixels, and rounds of shifting all to their mean. */
const REACH = 10;
const ROUNDS = 3;

/**
 * Shifts the places along the bar so that its ends and its change of tone fall together. Long edges tell nothing of the
 * place along the bar, and while a pendulum swing smears the ends, neither does the averaged picture; the grey along the
 * bar's middle, picture by picture, does.
 */
export function alignAlong(
  pictures: readonly Picture<Uint8Array>[],
  tried: readonly TriedPlace[],
  outline: Outline,
  squash: number,
): TriedPlace[] {
  const from = Math.floor(outline.left) - REACH - 4;
  const length = Math.ceil(outline.right) + REACH + 4 - from;
  const inset = 0.2 * (outline.bottom - outline.top);
  const greys = tried.map(({ place }, t) => {
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    return Float64Array.from({ length }, (_, i) => {
      let sum = 0;
      let n = 0;
      for (let v = outline.top + inset; v <= outline.bottom - inset; v++, n++) {
        const u = from + i;
        sum += valueAt(pictures[t]!, place.x_px + c * u - s * v, place.y_px + squash * (s * u + c * v));
      }
      return (sum / Math.max(1, n) - place.offset) / place.gain;
    });
  });
  const shifts = greys.map(() => 0);
  for (let round = 0; round < ROUNDS; round++) {
    const mean = meanAt(greys, shifts, length);
    for (const [t, grey] of greys.entries()) shifts[t] = bestShift(grey, mean, length);
    const middle = [...shifts].sort((a, b) => a - b)[shifts.length >> 1]!;
    for (let t = 0; t < shifts.length; t++) shifts[t] = shifts[t]! - middle;
  }
  return tried.map(({ place, agreement }, t) => ({
    place: {
      ...place,
      x_px: place.x_px + Math.cos(place.turn) * shifts[t]!,
      y_px: place.y_px + squash * Math.sin(place.turn) * shifts[t]!,
    },
    agreement,
  }));
}

function at(grey: Float64Array, place: number): number {
  const i = Math.min(grey.length - 2, Math.max(0, Math.floor(place)));
  return grey[i]! + (place - i) * (grey[i + 1]! - grey[i]!);
}

function meanAt(greys: readonly Float64Array[], shifts: readonly number[], length: number): Float64Array {
  return Float64Array.from({ length }, (_, i) => {
    let sum = 0;
    for (const [t, grey] of greys.entries()) sum += at(grey, i + shifts[t]!);
    return sum / greys.length;
  });
}

/** The shift at which a bar's greys differ least from the mean ones, to a fraction of a pixel. */
function bestShift(grey: Float64Array, mean: Float64Array, length: number): number {
  const differences = Array.from({ length: 2 * REACH + 1 }, (_, k) => {
    let sum = 0;
    for (let i = REACH; i < length - REACH; i++) sum += (grey[i + k - REACH]! - mean[i]!) ** 2;
    return sum;
  });
  const best = differences.indexOf(Math.min(...differences));
  const before = differences[best - 1];
  const after = differences[best + 1];
  if (before === undefined || after === undefined) return 0;
  const curve = before - 2 * differences[best]! + after;
  return best - REACH + (curve > 0 ? (0.5 * (before - after)) / curve : 0);
}
