import type { Picture } from './picture.ts';
import { emptyPicture } from './picture.ts';
import { blur, patches } from './vision.ts';

/** What moves in a sample of pictures. */
export interface Motion {
  /** Each picture's brightness: grey = gain * common picture + offset. */
  readonly gain: number[];
  readonly offset: number[];
  /** Temporal variance in excess of the noise's, 0 where nothing stands out. */
  readonly energy: Picture;
  readonly noise: number;
  /** Centre of what moves, its long axis (radians, y down) and how far it reaches along and across, pixels. */
  readonly x_px: number;
  readonly y_px: number;
  readonly axis_rad: number;
  readonly along_px: number;
  readonly across_px: number;
  /** Index of the picture in which the bar stands nearest the middle of its motion. */
  readonly middle: number;
  /** A number for every picture that rises or falls with the bar's motion: its likeness to the picture at one extreme. */
  readonly phase: number[];
  /** The same, two-sided and about in proportion to the bar's turn from its middle, the largest usual size being 1. */
  readonly swing: number[];
}

/**
 * Finds what moves in pictures taken at different times of one stretch, after evening out their brightness.
 * Null where nothing stands out of the noise. `squash` as in `Placement`: directions are those of the bar's plane.
 */
export function findMotion(pictures: readonly Picture<Uint8Array>[], squash: number): Motion | null {
  const { width, height } = pictures[0]!;
  const size = width * height;
  const gain = pictures.map(() => 1);
  const offset = pictures.map(() => 0);
  const common = emptyPicture(width, height);
  const spread = emptyPicture(width, height);
  // The first look, for the brightness alone, takes every third picture.
  const every = (_: unknown, t: number): boolean => t % 3 === 0;
  middleOf(pictures.filter(every), gain.filter(every), offset.filter(every), common.data, spread.data);
  for (let round = 0; round < 2; round++) {
    const typical = quantile(spread.data, 0.2) + 0.3;
    for (const [t, picture] of pictures.entries()) {
      const fit = brightness(picture.data, common.data, spread.data, typical);
      gain[t] = fit.gain;
      offset[t] = fit.offset;
    }
    if (round === 0) middleOf(pictures, gain, offset, common.data, spread.data);
  }
  const soft = blur(spread, 1).data;
  const noise = Math.max(0.05, quantile(soft, 0.2));
  const mask = { width, height, data: new Uint8Array(size) };
  for (let at = 0; at < size; at++) mask.data[at] = soft[at]! > 4 * noise + 0.5 ? 1 : 0;
  const { label, area } = patches(mask);
  const heat = new Float64Array(area.length);
  for (let at = 0; at < size; at++) heat[label[at]!] = heat[label[at]!]! + (label[at] === 0 ? 0 : soft[at]!);
  const hottest = Math.max(0, ...heat);
  if (hottest === 0) return null;
  const energy = emptyPicture(width, height);
  let mass = 0;
  let mx = 0;
  let my = 0;
  for (let at = 0; at < size; at++) {
    const number = label[at]!;
    if (number === 0 || heat[number]! < 0.03 * hottest || area[number]! < 6) continue;
    const e = soft[at]! - noise;
    energy.data[at] = e;
    mass += e;
    mx += e * (at % width);
    my += e * Math.floor(at / width);
  }
  if (mass === 0) return null;
  const x_px = mx / mass;
  const y_px = my / mass;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let at = 0; at < size; at++) {
    const e = energy.data[at]!;
    if (e === 0) continue;
    const dx = (at % width) - x_px;
    const dy = (Math.floor(at / width) - y_px) / squash;
    xx += e * dx * dx;
    xy += e * dx * dy;
    yy += e * dy * dy;
  }
  const axis_rad = 0.5 * Math.atan2(2 * xy, xx - yy);
  const c = Math.cos(axis_rad);
  const s = Math.sin(axis_rad);
  let along_px = 0;
  let across_px = 0;
  for (let at = 0; at < size; at++) {
    if (energy.data[at] === 0) continue;
    const dx = (at % width) - x_px;
    const dy = (Math.floor(at / width) - y_px) / squash;
    along_px = Math.max(along_px, Math.abs(c * dx + s * dy));
    across_px = Math.max(across_px, Math.abs(c * dy - s * dx));
  }
  const { phase, swing } = phases(pictures, gain, offset, common, energy);
  let middle = 0;
  let least = Number.POSITIVE_INFINITY;
  for (const [t, picture] of pictures.entries()) {
    let sum = 0;
    for (let at = 0; at < size; at++) {
      if (energy.data[at] === 0) continue;
      sum += Math.abs((picture.data[at]! - offset[t]!) / gain[t]! - common.data[at]!);
    }
    if (sum < least) {
      least = sum;
      middle = t;
    }
  }
  return { gain, offset, energy, noise, x_px, y_px, axis_rad, along_px, across_px, middle, phase, swing };
}

/**
 * Projections of every picture's difference from the common one on that of a picture near one extreme, and on that of one
 * near the other. What a bar covers and uncovers when it turns are strips along its edges, as wide as it has turned, on
 * one side for one sense and on the other for the other: a strip's overlap with the widest one grows in proportion.
 */
function phases(
  pictures: readonly Picture<Uint8Array>[],
  gain: readonly number[],
  offset: readonly number[],
  common: Picture,
  energy: Picture,
): { phase: number[]; swing: number[] } {
  const places: number[] = [];
  for (let at = 0; at < energy.data.length; at++) if (energy.data[at]! > 0) places.push(at);
  const differences = pictures.map((picture, t) =>
    Float32Array.from(places, (at) => (picture.data[at]! - offset[t]!) / gain[t]! - common.data[at]!),
  );
  const dot = (a: Float32Array, b: Float32Array): number => a.reduce((sum, x, i) => sum + x * b[i]!, 0);
  const sizes = differences.map((d) => dot(d, d));
  // Not the very largest, which may be a hand's.
  const order = sizes.map((_, t) => t).sort((a, b) => sizes[b]! - sizes[a]!);
  const one = order[Math.floor(order.length / 8)]!;
  const phase = differences.map((d) => dot(d, differences[one]!));
  const opposite = order.slice(Math.floor(order.length / 8)).find((t) => phase[t]! < 0.2 * sizes[one]!) ?? one;
  const other = differences.map((d) => dot(d, differences[opposite]!));
  const swing = phase.map((p, t) => Math.max(0, p) / sizes[one]! - Math.max(0, other[t]!) / sizes[opposite]!);
  const usual = swing.map(Math.abs).sort((a, b) => a - b)[Math.floor(0.9 * swing.length)]! || 1;
  return { phase, swing: swing.map((x) => Math.max(-1.5, Math.min(1.5, x / usual))) };
}

/** Median over time of the evened pictures, and the variance about it with the farthest tenth left out. */
function middleOf(
  pictures: readonly Picture<Uint8Array>[],
  gain: readonly number[],
  offset: readonly number[],
  common: Float32Array,
  spread: Float32Array,
): void {
  const n = pictures.length;
  const column = new Float32Array(n);
  const drop = Math.floor(n / 20);
  const scale = gain.map((g) => 1 / g);
  for (let at = 0; at < common.length; at++) {
    for (let t = 0; t < n; t++) {
      const value = (pictures[t]!.data[at]! - offset[t]!) * scale[t]!;
      let slot = t;
      while (slot > 0 && column[slot - 1]! > value) {
        column[slot] = column[slot - 1]!;
        slot--;
      }
      column[slot] = value;
    }
    common[at] = (column[n >> 1]! + column[(n - 1) >> 1]!) / 2;
    let sum = 0;
    let squares = 0;
    for (let t = drop; t < n - drop; t++) {
      sum += column[t]!;
      squares += column[t]! * column[t]!;
    }
    const kept = n - 2 * drop;
    spread[at] = Math.max(0, squares / kept - (sum / kept) ** 2);
  }
}

/** Least-squares gain and offset of a picture against the common one, places that change over time counting little. */
function brightness(
  data: Uint8Array,
  common: Float32Array,
  spread: Float32Array,
  typical: number,
): { gain: number; offset: number } {
  let w = 0;
  let x = 0;
  let y = 0;
  let xx = 0;
  let xy = 0;
  for (let at = 0; at < data.length; at++) {
    const k = 1 / (typical + spread[at]!) ** 2;
    w += k;
    x += k * common[at]!;
    y += k * data[at]!;
    xx += k * common[at]! * common[at]!;
    xy += k * common[at]! * data[at]!;
  }
  const mx = x / w;
  const my = y / w;
  // Where the picture is even, gain and offset can't be told apart: the gain is drawn to 1 by a pseudo-variance of 25.
  const gain = (xy / w - mx * my + 25) / (xx / w - mx * mx + 25);
  return { gain, offset: my - gain * mx };
}

/** The value below which the share `q` of the values lies (of a sample of at most some ten thousand). */
export function quantile(values: Float32Array, q: number): number {
  const stride = Math.max(1, Math.floor(values.length / 10_000));
  const sample = new Float32Array(Math.ceil(values.length / stride));
  for (let i = 0; i < sample.length; i++) sample[i] = values[i * stride]!;
  sample.sort();
  return sample[Math.min(sample.length - 1, Math.floor(q * sample.length))]!;
}
