import type { BarLayers, Outline } from './layers.ts';

/**
 * The bar's outline in its own frame, from the averaged picture: its long edges are the outermost lines along the bar
 * that stay sharp in the bar's frame (whatever belongs to the background is smeared there or changes from picture to
 * picture), its ends are where those lines stop. Null where no such lines are found.
 */
export function findOutline(layers: BarLayers): Outline | null {
  const { columns, rows, halfU, halfV, mean, variance, noise } = layers;
  const sharp = new Float32Array(columns * rows);
  const profile = new Float64Array(rows);
  for (let row = 1; row < rows - 1; row++) {
    for (let column = 0; column < columns; column++) {
      const at = row * columns + column;
      if (layers.weight[at] === 0) continue;
      const slope = (mean[at + columns]! - mean[at - columns]!) / 2;
      const q = (slope * slope) / (noise + variance[at]!);
      // A single very sharp spot must not outweigh a line.
      sharp[at] = q / (1 + q / 400);
      const u = (column - halfU) / halfU;
      profile[row] = profile[row]! + sharp[at]! * u * u;
    }
  }
  const edges = outermost(profile);
  if (edges === null) return null;
  const [top, bottom] = edges;
  const along = new Float64Array(columns);
  for (let column = 0; column < columns; column++) {
    let sum = 0;
    for (const edge of [top, bottom]) {
      let most = 0;
      for (let row = Math.max(0, edge - 2); row <= Math.min(rows - 1, edge + 2); row++) {
        most = Math.max(most, sharp[row * columns + column]!);
      }
      sum += most;
    }
    along[column] = sum;
  }
  const soft = running(along, 1);
  const inner = [...soft].sort((a, b) => a - b);
  const level = 0.2 * (inner[Math.floor(inner.length * 0.6)] ?? 0);
  const enough = (i: number): boolean => soft[i]! > level && soft[i]! > 1;
  let left = 0;
  while (left < columns - 3 && !(enough(left) && enough(left + 1) && enough(left + 2))) left++;
  let right = columns - 1;
  while (right > 2 && !(enough(right) && enough(right - 1) && enough(right - 2))) right--;
  if (right - left < bottom - top) return null;
  return { left: left - halfU, right: right - halfU, top: top - halfV, bottom: bottom - halfV };
}

/** First and last peak of a profile that reach a fifth of its highest; null where they are one and the same. */
function outermost(profile: Float64Array): readonly [number, number] | null {
  const highest = Math.max(...profile);
  if (!(highest > 0)) return null;
  const level = 0.2 * highest;
  const isPeak = (i: number): boolean =>
    profile[i]! >= level && profile[i]! >= (profile[i - 1] ?? 0) && profile[i]! >= (profile[i + 1] ?? 0);
  let first = 0;
  while (first < profile.length && !isPeak(first)) first++;
  let last = profile.length - 1;
  while (last >= 0 && !isPeak(last)) last--;
  return last > first ? [first, last] : null;
}

/** Running mean over 2 * half + 1 values. */
function running(values: Float64Array, half: number): Float64Array {
  const out = new Float64Array(values.length);
  for (let i = 0; i < values.length; i++) {
    let sum = 0;
    let n = 0;
    for (let k = Math.max(0, i - half); k <= Math.min(values.length - 1, i + half); k++) {
      sum += values[k]!;
      n++;
    }
    out[i] = sum / n;
  }
  return out;
}
