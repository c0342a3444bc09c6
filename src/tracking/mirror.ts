import type { BarLayers } from './layers.ts';

/** The upright line about which a bar's end is symmetric, in its own frame, pixels. */
export interface Mirror {
  readonly u_px: number;
  /** Its standard uncertainty. */
  readonly u_u_px: number;
  /** Distance of the end's left and right edges from the line. */
  readonly half_px: number;
  /** Share of what tells the sideways place that lies on the right of the line, less that on the left: -1 to 1. */
  readonly lean: number;
  readonly top: number;
  readonly bottom: number;
}

/**
 * Finds the middle of a bar's end between its left and right edges: the upright line about which upright edges that keep
 * their picture pair off best. Which way the grey changes across them doesn't matter. Null where no edges pair.
 */
export function findMirror(layers: BarLayers): Mirror | null {
  const { columns, rows, halfU, halfV, mean, variance, noise, weight } = layers;
  const sharp = new Float32Array(columns * rows);
  for (let row = 0; row < rows; row++) {
    for (let column = 1; column < columns - 1; column++) {
      const at = row * columns + column;
      if (weight[at] === 0) continue;
      const slope = (mean[at + 1]! - mean[at - 1]!) / 2;
      const q = (slope * slope) / (noise + variance[at]!);
      sharp[at] = q < 0.3 ? 0 : q / (1 + q / 100);
    }
  }
  // Twice the line's column, so that it may lie between two columns.
  const score = new Float64Array(2 * columns);
  for (let twice = 8; twice < 2 * columns - 8; twice++) score[twice] = pairing(sharp, columns, rows, twice, null);
  let best = 0;
  for (let twice = 0; twice < score.length; twice++) if (score[twice]! > score[best]!) best = twice;
  if (!(score[best]! > 0)) return null;
  const left = score[best - 1] ?? 0;
  const right = score[best + 1] ?? 0;
  const curve = left - 2 * score[best]! + right;
  const fine = curve < 0 ? (0.5 * (left - right)) / curve : 0;
  const distances = new Float64Array(columns);
  pairing(sharp, columns, rows, best, distances);
  // The outermost distance at which a good part of the edges pair; a round end's edges pair at all smaller ones too.
  const level = 0.2 * Math.max(...distances);
  let half = columns - 1;
  while (half > 0 && !(distances[half]! >= level)) half--;
  const u_px = (best + Math.max(-0.5, Math.min(0.5, fine))) / 2 - halfU;
  const spanned = rowsOf(sharp, columns, rows, best, half);
  return {
    u_px,
    u_u_px: 0.2 + 0.04 * half,
    half_px: half,
    lean: leanOf(layers, best, half),
    top: spanned.first - halfV,
    bottom: spanned.last - halfV,
  };
}

/** How well edges pair off about the line at column twice / 2; adds what each distance gives to `distances`. */
function pairing(
  sharp: Float32Array,
  columns: number,
  rows: number,
  twice: number,
  distances: Float64Array | null,
): number {
  let sum = 0;
  for (let right = Math.floor(twice / 2) + 3; right < columns; right++) {
    const left = twice - right;
    if (left < 0) break;
    let here = 0;
    for (let row = 0; row < rows; row++) {
      here += Math.sqrt(sharp[row * columns + left]! * sharp[row * columns + right]!);
    }
    sum += here;
    if (distances !== null) {
      const at = Math.round(right - twice / 2);
      distances[at] = distances[at]! + here;
    }
  }
  return sum;
}

/** First and last row that hold an edge no farther than `half` from the line at column twice / 2. */
function rowsOf(
  sharp: Float32Array,
  columns: number,
  rows: number,
  twice: number,
  half: number,
): { first: number; last: number } {
  let first = rows - 1;
  let last = 0;
  const from = Math.max(0, Math.floor(twice / 2 - half - 1));
  const to = Math.min(columns - 1, Math.ceil(twice / 2 + half + 1));
  for (let row = 0; row < rows; row++) {
    let most = 0;
    for (let column = from; column <= to; column++) most = Math.max(most, sharp[row * columns + column]!);
    if (most < 8) continue;
    first = Math.min(first, row);
    last = Math.max(last, row);
  }
  return first < last ? { first, last } : { first: 0, last: rows - 1 };
}

/** By how much the edges right of the line outweigh those left of it. */
function leanOf(layers: BarLayers, twice: number, half: number): number {
  const { columns, rows, mean, weight } = layers;
  const sides = [0, 0];
  for (let row = 0; row < rows; row++) {
    for (let column = 1; column < columns - 1; column++) {
      const distance = column - twice / 2;
      if (Math.abs(distance) > half + 3) continue;
      const at = row * columns + column;
      const slope = (mean[at + 1]! - mean[at - 1]!) / 2;
      const side = distance > 0 ? 1 : 0;
      sides[side] = sides[side]! + slope * slope * weight[at]!;
    }
  }
  const sum = sides[0]! + sides[1]!;
  return sum > 0 ? (sides[1]! - sides[0]!) / sum : 0;
}
