import type { Picture } from './picture.ts';
import { emptyPicture, valueAt } from './picture.ts';
import type { Placement } from './placement.ts';

/** One picture with the place at which the bar was found in it. */
export interface PlacedPicture {
  readonly picture: Picture<Uint8Array>;
  readonly place: Placement;
}

/** The bar's own picture in its own frame: a grid of `columns` by `rows`, (u, v) = (column - halfU, row - halfV). */
export interface BarLayers {
  readonly halfU: number;
  readonly halfV: number;
  readonly columns: number;
  readonly rows: number;
  readonly squash: number;
  /** Mean of what is seen at each place of the bar's frame, at the bar's brightness (gain 1, offset 0). */
  readonly mean: Float32Array;
  /** Mean of the background at that place, where a background is known. */
  readonly ground: Float32Array;
  /** What is seen is `bar + see * background`, with this variance of the rest. */
  readonly bar: Float32Array;
  readonly see: Float32Array;
  readonly variance: Float32Array;
  /** Variance of what is seen, background included. */
  readonly raw: Float32Array;
  /** One over the expected variance of a residual; 0 where nothing is known. */
  readonly weight: Float32Array;
  /** 1 where enough pictures show the place, else 0. */
  readonly known: Uint8Array;
  /** Variance of the sensor's noise in one picture, and how many were averaged. */
  readonly noise: number;
  readonly pictures: number;
  readonly reach_px: number;
}

/** Where the bar's outline lies in its own frame, pixels. */
export interface Outline {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

/** A share of 1 inside the outline, 0 outside, with a slope `soft_px` wide between. */
export function coverOf(outline: Outline, u: number, v: number, soft_px: number): number {
  const inside = Math.min(u - outline.left, outline.right - u, v - outline.top, outline.bottom - v);
  return Math.min(1, Math.max(0, inside / soft_px + 0.5));
}

/** The size of a bar's frame: its half width and height, pixels, and how much the view squeezes its plane downwards. */
export interface Grid {
  readonly halfU: number;
  readonly halfV: number;
  readonly squash: number;
}

/** Sums over pictures at the places of a bar's frame: of what is seen, and of the background there where one is known. */
export interface PlaceSums {
  readonly columns: number;
  readonly rows: number;
  readonly n: Float32Array;
  readonly seen: Float64Array;
  readonly seen2: Float64Array;
  readonly under: Float64Array;
  readonly under2: Float64Array;
  readonly both: Float64Array;
}

/** Adds up every `stride`-th row and column of the bar's frame, (u, v) = stride (column, row) - (halfU, halfV). */
export function addUp(
  pictures: readonly PlacedPicture[],
  grid: Grid,
  background: Picture | null,
  stride: number,
): PlaceSums {
  const { halfU, halfV, squash } = grid;
  const columns = Math.floor((2 * halfU) / stride) + 1;
  const rows = Math.floor((2 * halfV) / stride) + 1;
  const size = columns * rows;
  const n = new Float32Array(size);
  const s1 = new Float64Array(size);
  const s2 = new Float64Array(size);
  const known = background === null ? 0 : size;
  const b1 = new Float64Array(known);
  const b2 = new Float64Array(known);
  const sb = new Float64Array(known);
  for (const { picture, place } of pictures) {
    const { width, height, data } = picture;
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    const scale = 1 / place.gain;
    const { offset } = place;
    const stepX = stride * c;
    const stepY = stride * squash * s;
    for (let row = 0; row < rows; row++) {
      const v = stride * row - halfV;
      let x = place.x_px - c * halfU - s * v;
      let y = place.y_px + squash * (-s * halfU + c * v);
      for (let at = row * columns; at < (row + 1) * columns; at++, x += stepX, y += stepY) {
        if (!(x >= 0 && y >= 0 && x < width - 1 && y < height - 1)) continue;
        const left = x | 0;
        const top = y | 0;
        const fx = x - left;
        const fy = y - top;
        const p = top * width + left;
        const i0 = data[p]!;
        const i1 = data[p + width]!;
        const upper = i0 + fx * (data[p + 1]! - i0);
        const seen = (upper + fy * (i1 + fx * (data[p + width + 1]! - i1) - upper) - offset) * scale;
        n[at] = n[at]! + 1;
        s1[at] = s1[at]! + seen;
        s2[at] = s2[at]! + seen * seen;
        if (background !== null) {
          const g = background.data;
          const g0 = g[p]!;
          const g1 = g[p + width]!;
          const gu = g0 + fx * (g[p + 1]! - g0);
          const under = gu + fy * (g1 + fx * (g[p + width + 1]! - g1) - gu);
          b1[at] = b1[at]! + under;
          b2[at] = b2[at]! + under * under;
          sb[at] = sb[at]! + seen * under;
        }
      }
    }
  }
  return { columns, rows, n, seen: s1, seen2: s2, under: b1, under2: b2, both: sb };
}

/**
 * Averages what is seen in the bar's frame and splits it into what belongs to the bar and what shines through from a
 * static background: at every place the grey values of all pictures are regressed on the background's, pulled towards
 * `seeExpected` where the background is too even to tell.
 */
export function separate(
  pictures: readonly PlacedPicture[],
  grid: Grid,
  background: Picture | null,
  seeExpected: Float32Array | null,
  noiseFloor: number,
): BarLayers {
  const { halfU, halfV, squash } = grid;
  const { columns, rows, n, ...sums } = addUp(pictures, grid, background, 1);
  const size = columns * rows;
  const mean = new Float32Array(size);
  const ground = new Float32Array(size);
  const seen = new Float32Array(size);
  const cov = new Float32Array(size);
  const spread = new Float32Array(size);
  for (let at = 0; at < size; at++) {
    const k = n[at]!;
    if (k === 0) continue;
    const m = sums.seen[at]! / k;
    mean[at] = m;
    seen[at] = Math.max(0, sums.seen2[at]! / k - m ** 2);
    if (background === null) continue;
    const b = sums.under[at]! / k;
    ground[at] = b;
    cov[at] = sums.both[at]! / k - m * b;
    spread[at] = Math.max(0, sums.under2[at]! / k - b ** 2);
  }
  const open = background === null || seeExpected === null ? null : openBand(seeExpected, columns, rows);
  const bar = new Float32Array(size);
  const see = new Float32Array(size);
  const rest = new Float32Array(size);
  // Where the background varies by less than the noise it tells little of what shines through.
  const pull = noiseFloor * 2;
  for (let at = 0; at < size; at++) {
    const expected = seeExpected?.[at] ?? 0;
    const beta = open?.[at] ? Math.min(1, Math.max(0, (cov[at]! + pull * expected) / (spread[at]! + pull))) : expected;
    see[at] = beta;
    bar[at] = mean[at]! - beta * ground[at]!;
    rest[at] = Math.max(0, seen[at]! - 2 * beta * cov[at]! + beta * beta * spread[at]!);
  }
  const variance = smooth(rest, columns, rows);
  const raw = background === null ? variance : smooth(seen, columns, rows);
  const enough = 0.5 * pictures.length;
  // An array of numbers of one kind is sorted many times faster than one of anything.
  const filled = variance.filter((_, at) => n[at]! > enough).sort();
  const noise = Math.max(0.05, filled[Math.floor(filled.length * 0.2)] ?? 0.05);
  const weight = new Float32Array(size);
  const known = new Uint8Array(size);
  for (let at = 0; at < size; at++) {
    if (n[at]! <= enough) continue;
    weight[at] = 1 / (noise + variance[at]!);
    known[at] = 1;
  }
  return {
    halfU,
    halfV,
    columns,
    rows,
    squash,
    mean,
    ground,
    bar,
    see,
    variance,
    raw,
    weight,
    known,
    noise,
    pictures: pictures.length,
    reach_px: Math.hypot(halfU, halfV),
  };
}

/** Places within two pixels of the expected outline: only there is it open whose grey is seen. */
function openBand(see: Float32Array, columns: number, rows: number): Uint8Array {
  const open = new Uint8Array(see.length);
  for (let row = 2; row < rows - 2; row++) {
    for (let column = 2; column < columns - 2; column++) {
      const at = row * columns + column;
      const around = see[at - 2]! + see[at + 2]! + see[at - 2 * columns]! + see[at + 2 * columns]!;
      open[at] = around > 0 && around < 4 ? 1 : 0;
    }
  }
  return open;
}

/** Mean over three by three. */
function smooth(from: Float32Array, columns: number, rows: number): Float32Array {
  const to = new Float32Array(from.length);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      let sum = 0;
      let n = 0;
      for (let r = Math.max(0, row - 1); r <= Math.min(rows - 1, row + 1); r++) {
        for (let c = Math.max(0, column - 1); c <= Math.min(columns - 1, column + 1); c++) {
          sum += from[r * columns + c]!;
          n++;
        }
      }
      to[row * columns + column] = sum / n;
    }
  }
  return to;
}

/**
 * The static background: at every pixel the mean over the pictures in which the bar (its outline widened by `margin_px`)
 * doesn't cover it; where it always does, the grey is filled in from around.
 */
export function uncover(
  pictures: readonly PlacedPicture[],
  outline: Outline,
  squash: number,
  margin_px: number,
): Picture {
  const first = pictures[0]!.picture;
  const { width, height } = first;
  const result = emptyPicture(width, height);
  const count = new Float32Array(width * height);
  const sum = result.data;
  const left = outline.left - margin_px;
  const right = outline.right + margin_px;
  const top = outline.top - margin_px;
  const bottom = outline.bottom + margin_px;
  for (const { picture, place } of pictures) {
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    const scale = 1 / place.gain;
    const shift = -place.offset * scale;
    const { data } = picture;
    for (let y = 0; y < height; y++) {
      const dy = (y - place.y_px) / squash;
      let u = -c * place.x_px + s * dy;
      let v = s * place.x_px + c * dy;
      for (let at = y * width; at < (y + 1) * width; at++, u += c, v -= s) {
        if (u > left && u < right && v > top && v < bottom) continue;
        sum[at] = sum[at]! + data[at]! * scale + shift;
        count[at] = count[at]! + 1;
      }
    }
  }
  const known = new Uint8Array(width * height);
  for (let at = 0; at < sum.length; at++) {
    if (count[at]! > 0) {
      sum[at] = sum[at]! / count[at]!;
      known[at] = 1;
    }
  }
  fillIn(result, known, 8);
  return result;
}

/** Fills unknown pixels from known neighbours, ring by ring, so many rings deep: farther in the bar always covers them. */
function fillIn(picture: Picture, known: Uint8Array, rings: number): void {
  const { width, height, data } = picture;
  let unknown: number[] = [];
  for (let at = 0; at < known.length; at++) if (known[at] === 0) unknown.push(at);
  for (let ring = 0; ring < rings && unknown.length > 0; ring++) {
    const left: number[] = [];
    const done: number[] = [];
    for (const at of unknown) {
      const x = at % width;
      const y = (at - x) / width;
      let sum = 0;
      let n = 0;
      for (let ny = Math.max(0, y - 1); ny <= Math.min(height - 1, y + 1); ny++) {
        for (let nx = Math.max(0, x - 1); nx <= Math.min(width - 1, x + 1); nx++) {
          const to = ny * width + nx;
          if (known[to] !== 1) continue;
          sum += data[to]!;
          n++;
        }
      }
      if (n === 0) left.push(at);
      else {
        data[at] = sum / n;
        done.push(at);
      }
    }
    if (done.length === 0) return;
    for (const at of done) known[at] = 1;
    unknown = left;
  }
}

/** What is expected to shine through: nothing inside the outline, everything outside it. */
export function seeThrough(outline: Outline, grid: { readonly halfU: number; readonly halfV: number }): Float32Array {
  const columns = 2 * grid.halfU + 1;
  const rows = 2 * grid.halfV + 1;
  const see = new Float32Array(columns * rows);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      see[row * columns + column] = 1 - coverOf(outline, column - grid.halfU, row - grid.halfV, 2);
    }
  }
  return see;
}

/** The grey of a layer at a place of the bar's frame. */
export function layerAt(layers: BarLayers, layer: Float32Array, u: number, v: number): number {
  return valueAt({ width: layers.columns, height: layers.rows, data: layer }, u + layers.halfU, v + layers.halfV);
}
