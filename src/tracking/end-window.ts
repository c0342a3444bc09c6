import type { Motion } from './motion.ts';
import type { Picture } from './picture.ts';
import { correlate, type Patch } from './vision.ts';

/** A window about a bar's end, and where it is found in every picture (its centre, pixels) with what correlation. */
export interface EndWindow {
  readonly patch: Patch;
  readonly x_px: readonly number[];
  readonly y_px: readonly number[];
  readonly correlation: readonly number[];
}

/** Rows up and down that the window may shift. */
const ROWS = 2;
/** Heights of the windows tried, as shares of the height of what moves. */
const SIZES = [0.3, 0.45, 0.65, 0.9];

/**
 * Finds the bar's near end among what moves in a side view: of windows of several sizes put all over it in one picture,
 * each looked for in all the others along its rows, the one that moves farthest while keeping its picture best. Whatever
 * hangs still (the fibre's hook) doesn't move, the far end moves less and passes behind the near one, and windows over
 * several of these don't keep their picture.
 */
export function findEndWindow(
  pictures: readonly Picture<Uint8Array>[],
  motion: Motion,
  likely: (x_px: number) => number,
): EndWindow | null {
  const { width, height } = pictures[0]!;
  const box = boundsOf(motion.energy);
  if (box === null) return null;
  let best: EndWindow | null = null;
  let most = 0;
  for (const share of SIZES) {
    const size = Math.max(6, Math.round(share * box.height));
    const step = Math.max(2, Math.round(size / 4));
    for (let top = box.top - step; top + size <= box.top + box.height + step; top += step) {
      for (let left = box.left - step; left + size <= box.left + box.width + step; left += step) {
        const patch = { left, top, width: size, height: size };
        if (left < 0 || top < ROWS || left + size > width || top + size + ROWS > height) continue;
        if (!holdsMotion(motion.energy, patch)) continue;
        const window = follow(pictures, motion.middle, patch);
        const worth = worthOf(window, motion.phase) * likely(meanOf(window.x_px)) * Math.sqrt(size);
        if (worth > most) {
          most = worth;
          best = window;
        }
      }
    }
  }
  return best;
}

function follow(pictures: readonly Picture<Uint8Array>[], reference: number, patch: Patch): EndWindow {
  const { width } = pictures[0]!;
  const strip = { left: 0, top: patch.top - ROWS, width, height: patch.height + 2 * ROWS };
  const columns = width - patch.width + 1;
  const maps = correlate(pictures[reference]!, patch, pictures, strip);
  const x_px: number[] = [];
  const y_px: number[] = [];
  const correlation: number[] = [];
  for (const map of maps) {
    let at = 0;
    for (let i = 1; i < map.length; i++) if (map[i]! > map[at]!) at = i;
    x_px.push((at % columns) + (patch.width - 1) / 2);
    y_px.push(Math.floor(at / columns) - ROWS + patch.top + (patch.height - 1) / 2);
    correlation.push(map[at]!);
  }
  return { patch, x_px, y_px, correlation };
}

/** How far a window moves with the motion as a whole, as far as it keeps its picture. */
function worthOf({ x_px, correlation }: EndWindow, phase: readonly number[]): number {
  const kept = [...correlation].sort((a, b) => a - b)[Math.floor(correlation.length * 0.25)]!;
  if (kept < 0.6) return 0;
  const mean = meanOf(x_px);
  const middle = meanOf(phase);
  let xx = 0;
  let xp = 0;
  let pp = 0;
  for (const [t, x] of x_px.entries()) {
    xx += (x - mean) ** 2;
    xp += (x - mean) * (phase[t]! - middle);
    pp += (phase[t]! - middle) ** 2;
  }
  const agreement = xx > 0 && pp > 0 ? (xp * xp) / (xx * pp) : 0;
  return Math.sqrt(xx / x_px.length) * agreement ** 2 * ((kept - 0.5) / 0.5) ** 2;
}

function meanOf(values: readonly number[]): number {
  return values.reduce((a, b) => a + b, 0) / values.length;
}

function boundsOf(energy: Picture): Patch | null {
  const { width, height, data } = energy;
  let left = width;
  let right = -1;
  let top = height;
  let bottom = -1;
  for (let at = 0; at < data.length; at++) {
    if (data[at] === 0) continue;
    const x = at % width;
    const y = (at - x) / width;
    left = Math.min(left, x);
    right = Math.max(right, x);
    top = Math.min(top, y);
    bottom = Math.max(bottom, y);
  }
  return right < left ? null : { left, top, width: right - left + 1, height: bottom - top + 1 };
}

/** Whether something moves in a good part of the window. */
function holdsMotion(energy: Picture, patch: Patch): boolean {
  let moving = 0;
  for (let row = 0; row < patch.height; row++) {
    for (let column = 0; column < patch.width; column++) {
      if (energy.data[(patch.top + row) * energy.width + patch.left + column]! > 0) moving++;
    }
  }
  return moving > 0.25 * patch.width * patch.height;
}
