import type { BarLayers, Outline } from './layers.ts';

/** Squared slope over variance that counts half as much as any more would. */
const MUCH = 60;

/**
 * The bar's outline in its own frame, from the averaged picture: its long edges are the outermost lines along the bar
 * that stay sharp in the bar's frame (whatever belongs to the background is smeared there or changes from picture to
 * picture), its ends are where those lines stop. Null where no such lines are found.
 */
export function findOutline(layers: BarLayers): Outline | null {
  const { columns, rows, halfU, halfV, mean, raw, noise } = layers;
  const sharp = new Float32Array(columns * rows);
  const profile = new Float64Array(rows);
  for (let row = 1; row < rows - 1; row++) {
    for (let column = 0; column < columns; column++) {
      const at = row * columns + column;
      const { weight } = layers;
      if (weight[at] === 0 || weight[at + columns] === 0 || weight[at - columns] === 0) continue;
      const slope = (mean[at + columns]! - mean[at - columns]!) / 2;
      const q = (slope * slope) / (noise + raw[at]!);
      // A very sharp line must not make a less sharp one disappear: what counts is its length.
      sharp[at] = q / (1 + q / MUCH);
      const u = (column - halfU) / halfU;
      profile[row] = profile[row]! + sharp[at]! * u * u;
    }
  }
  const bare = texturedRows(layers);
  for (let row = 0; row < bare.first; row++) profile[row] = 0;
  for (let row = bare.last + 1; row < rows; row++) profile[row] = 0;
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
  // Averaged noise alone, the strongest of five rows at two edges, stays below this.
  const chance = 4 / layers.pictures;
  const enough = (i: number): boolean => soft[i]! > level && soft[i]! > chance;
  let left = 0;
  while (left < columns - 3 && !(enough(left) && enough(left + 1) && enough(left + 2))) left++;
  let right = columns - 1;
  while (right > 2 && !(enough(right) && enough(right - 1) && enough(right - 2))) right--;
  if (right - left < bottom - top) return null;
  const ends = endEdges(layers, left, right, top, bottom);
  return { left: ends.left - halfU, right: ends.right - halfU, top: top - halfV, bottom: bottom - halfV };
}

/**
 * First and last row that may belong to the bar: from the rims inwards, rows that vary in the bar's frame as the rims do
 * are a textured background. An even background doesn't vary, and nothing is left out.
 */
function texturedRows(layers: BarLayers): { first: number; last: number } {
  const { columns, rows, halfU, raw, noise, weight } = layers;
  const usual = Array.from({ length: rows }, (_, row) => {
    const values: number[] = [];
    for (let column = 0; column < columns; column++) {
      const at = row * columns + column;
      // Near the pivot nothing moves.
      if (weight[at] !== 0 && Math.abs(column - halfU) > 0.3 * halfU) values.push(raw[at]!);
    }
    return values.sort((a, b) => a - b)[values.length >> 1] ?? Number.POSITIVE_INFINITY;
  });
  const inwards = (from: number, step: 1 | -1): number => {
    const rim = [0, 1, 2, 3].map((k) => usual[from + k * step] ?? 0).filter(Number.isFinite);
    const level = Math.max(6 * noise, 0.2 * Math.max(0, ...rim));
    let row = from;
    while (row >= 0 && row < rows && usual[row]! > level) row += step;
    return row < 0 || row >= rows ? from : row - 2 * step;
  };
  return { first: inwards(0, 1), last: inwards(rows - 1, -1) };
}

/** Share of the bar's length about where the long edges stop in which its end edge is looked for. */
const END_REACH = 0.12;

/** The bar's ends: near where the long edges stop, the outermost steep lines across it; where there are none, there. */
function endEdges(
  layers: BarLayers,
  left: number,
  right: number,
  top: number,
  bottom: number,
): { left: number; right: number } {
  const { columns, mean, raw, noise, weight } = layers;
  const inset = Math.floor((bottom - top) / 5);
  const steep = new Float64Array(columns);
  for (let column = 1; column < columns - 1; column++) {
    for (let row = top + inset; row <= bottom - inset; row++) {
      const at = row * columns + column;
      if (weight[at] === 0 || weight[at + 1] === 0 || weight[at - 1] === 0) continue;
      const slope = (mean[at + 1]! - mean[at - 1]!) / 2;
      const q = (slope * slope) / (noise + raw[at]!);
      steep[column] = steep[column]! + q / (1 + q / MUCH);
    }
  }
  const reach = Math.ceil(END_REACH * (right - left));
  const enough = 3 * (bottom - top - 2 * inset + 1);
  const find = (around: number, outwards: 1 | -1): number => {
    let highest = 0;
    for (let k = -reach; k <= reach; k++) highest = Math.max(highest, steep[around + k] ?? 0);
    if (highest < enough) return around;
    for (let k = reach; k >= -reach; k--) {
      const at = around + k * outwards;
      const here = steep[at] ?? 0;
      if (here >= 0.4 * highest && here >= (steep[at - 1] ?? 0) && here >= (steep[at + 1] ?? 0)) return at;
    }
    return around;
  };
  return { left: find(left, -1), right: find(right, 1) };
}

/**
 * By how much the bar's frame has to be turned (radians, towards +v) so that its u direction runs along the bar: the turn
 * at which the sharp lines, projected along u, pile up most steeply.
 */
export function straightenBy(layers: BarLayers): number {
  const { columns, rows, halfU, halfV, mean, raw, noise, weight } = layers;
  const us: number[] = [];
  const vs: number[] = [];
  const qs: number[] = [];
  for (let row = 1; row < rows - 1; row++) {
    for (let column = 1; column < columns - 1; column++) {
      const at = row * columns + column;
      if (weight[at] === 0 || weight[at + columns] === 0 || weight[at - columns] === 0) continue;
      const gv = (mean[at + columns]! - mean[at - columns]!) / 2;
      const gu = (mean[at + 1]! - mean[at - 1]!) / 2;
      const q = (gv * gv) / (noise + raw[at]!);
      if (q < 2 || Math.abs(gu) > Math.abs(gv)) continue;
      us.push(column - halfU);
      vs.push(row - halfV);
      qs.push((q / (1 + q / MUCH)) * Math.min(1, ((column - halfU) / halfU) ** 2));
    }
  }
  const pileUp = (turn: number): number => {
    const bins = new Float64Array(4 * (halfU + halfV) + 4);
    const c = Math.cos(turn);
    const s = Math.sin(turn);
    for (let i = 0; i < us.length; i++) {
      const place = c * vs[i]! - s * us[i]! + 2 * (halfU + halfV);
      const bin = Math.floor(place);
      bins[bin] = bins[bin]! + qs[i]! * (1 - place + bin);
      bins[bin + 1] = bins[bin + 1]! + qs[i]! * (place - bin);
    }
    return bins.reduce((sum, b) => sum + b * b, 0);
  };
  let best = 0;
  let most = 0;
  const step = 0.5 / halfU;
  for (let i = -Math.ceil(WIDEST_LEAN / step); i * step <= WIDEST_LEAN; i++) {
    const found = pileUp(i * step);
    if (found > most) {
      most = found;
      best = i * step;
    }
  }
  return best;
}

/** Farthest that the first guess of the bar's direction is taken to be off, radians. */
const WIDEST_LEAN = 0.5;

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
  if (last <= first) return null;
  // A line that keeps close outside a much sharper one is the rim of the bar's shadow.
  const near = Math.floor(0.25 * (last - first));
  const sharper = (from: number, step: 1 | -1): number => {
    for (let k = near; k > 0; k--) {
      const at = from + k * step;
      if (isPeak(at) && profile[at]! > 3 * profile[from]!) return at;
    }
    return from;
  };
  return [sharper(first, 1), sharper(last, -1)];
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
