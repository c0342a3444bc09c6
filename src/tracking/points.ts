import type { BarLayers, Outline } from './layers.ts';

/** Points of the bar's own frame at which a picture is compared with the model, as aligned columns. */
export interface BarPoints {
  readonly count: number;
  /** Place along and across the bar, pixels of its own (unforeshortened) frame. */
  readonly u: Float32Array;
  readonly v: Float32Array;
  /** The bar's share of the grey value, and how much of the background shows beside it. */
  readonly bar: Float32Array;
  readonly see: Float32Array;
  /** Slopes of the two along u and v. */
  readonly barU: Float32Array;
  readonly barV: Float32Array;
  readonly seeU: Float32Array;
  readonly seeV: Float32Array;
  /** One over the expected variance of the residual. */
  readonly weight: Float32Array;
  /** What the point tells of the angle (of a body that only shifts: of its sideways place): its share of one over the variance; adds up to 1. */
  readonly knowledge: Float32Array;
  /** How fast the point slides across the bar (towards +v) as the bar turns, pixels per radian from `slideTurn`. */
  readonly slide: Float32Array;
  readonly slideTurn: number;
  /** How much the view squeezes the bar's plane downwards: sin(elevation), 1 for a plan view. */
  readonly squash: number;
  /** Whether the body the points belong to turns in the picture, or only shifts. */
  readonly turns: boolean;
  /** Distance of the farthest points from the origin, pixels. */
  readonly reach_px: number;
}

/** Half width of the band about the outline whose edges are trusted, pixels. */
const BAND_PX = 3;

/**
 * Whether a slope of grey at a place belongs to the bar as a body: its outline, or paint that runs across it. Streaks
 * along a round bar are reflections, which slide over it as it turns; what lies outside is shadow.
 */
function trusted(outline: Outline, u: number, v: number, gu: number, gv: number): boolean {
  const inside = Math.min(u - outline.left, outline.right - u, v - outline.top, outline.bottom - v);
  if (inside < -BAND_PX) return false;
  return inside <= BAND_PX || Math.abs(gu) > 2 * Math.abs(gv);
}

/**
 * Every pixel of the layers as a point, or those of them that tell most of angle and place; once the outline is known,
 * slopes that don't belong to the bar as a body are left out.
 */
export function choosePoints(layers: BarLayers, most: number, outline: Outline | null = null, turns = true): BarPoints {
  const { columns, rows, halfU, halfV, bar, see, weight, known } = layers;
  const size = columns * rows;
  const grad = (from: Float32Array, at: number, stride: number): number =>
    (from[at + stride]! - from[at - stride]!) / 2;
  const turning = new Float32Array(size);
  const along = new Float32Array(size);
  const across = new Float32Array(size);
  let turningSum = 0;
  let alongSum = 0;
  let acrossSum = 0;
  for (let row = 1; row < rows - 1; row++) {
    for (let column = 1; column < columns - 1; column++) {
      const at = row * columns + column;
      const w = weight[at]!;
      // Where a neighbour isn't known, neither is the slope.
      const around = known[at - 1]! & known[at + 1]! & known[at - columns]! & known[at + columns]!;
      if (w === 0 || around === 0) continue;
      const ground = layers.ground[at]!;
      const gu = grad(bar, at, 1) + grad(see, at, 1) * ground;
      const gv = grad(bar, at, columns) + grad(see, at, columns) * ground;
      if (outline !== null && !trusted(outline, column - halfU, row - halfV, gu, gv)) continue;
      const t = (column - halfU) * gv - (row - halfV) * gu;
      turning[at] = w * t * t;
      along[at] = w * gu * gu;
      across[at] = w * gv * gv;
      turningSum += turning[at]!;
      alongSum += along[at]!;
      acrossSum += across[at]!;
    }
  }
  const worth = new Float32Array(size);
  let candidates = 0;
  for (let at = 0; at < size; at++) {
    if (weight[at] === 0) continue;
    const main = turns ? turning[at]! / (turningSum || 1) : along[at]! / (alongSum || 1);
    worth[at] = 2 * main + along[at]! / (alongSum || 1) + across[at]! / (acrossSum || 1);
    if (worth[at]! > 0) candidates++;
  }
  const chosen = mostWorth(worth, candidates, most);
  const count = chosen.length;
  const column = (): Float32Array => new Float32Array(count);
  const points = {
    count,
    u: column(),
    v: column(),
    bar: column(),
    see: column(),
    barU: column(),
    barV: column(),
    seeU: column(),
    seeV: column(),
    weight: column(),
    knowledge: column(),
    slide: column(),
    slideTurn: 0,
    squash: layers.squash,
    turns,
    reach_px: Math.max(1, layers.reach_px),
  };
  let told = 0;
  for (const [i, at] of chosen.entries()) {
    points.u[i] = (at % columns) - halfU;
    points.v[i] = Math.floor(at / columns) - halfV;
    points.bar[i] = bar[at]!;
    points.see[i] = see[at]!;
    points.barU[i] = grad(bar, at, 1);
    points.barV[i] = grad(bar, at, columns);
    points.seeU[i] = grad(see, at, 1);
    points.seeV[i] = grad(see, at, columns);
    points.weight[i] = weight[at]!;
    points.knowledge[i] = turns ? turning[at]! : along[at]!;
    told += points.knowledge[i]!;
  }
  for (let i = 0; i < count; i++) points.knowledge[i] = told > 0 ? points.knowledge[i]! / told : 1 / count;
  return points;
}

/**
 * Indices of the places worth most, in memory order, so that neighbouring points read neighbouring pixels. Four fifths
 * are the most telling ones; the rest is spread over what is left, to fix the brightness and notice a hand.
 */
function mostWorth(worth: Float32Array, candidates: number, most: number): number[] {
  const telling = candidates > most ? Math.round(most * 0.8) : candidates;
  const level = telling > 0 ? worth.slice().sort()[worth.length - telling]! : 0;
  const stride = candidates > most ? (candidates - telling) / (most - telling) : 1;
  const chosen: number[] = [];
  let passed = 0;
  let taken = 0;
  for (let at = 0; at < worth.length; at++) {
    if (worth[at] === 0) continue;
    if (worth[at]! >= level) chosen.push(at);
    else if (passed++ >= taken * stride) {
      chosen.push(at);
      taken++;
    }
  }
  return chosen;
}

/** About `most` of the points, evenly taken: enough to look for the bar coarsely. */
export function thinPoints(points: BarPoints, most: number): BarPoints {
  const stride = Math.max(1, points.count / most);
  const count = Math.floor(points.count / stride);
  const pick = (from: Float32Array): Float32Array =>
    Float32Array.from({ length: count }, (_, i) => from[Math.floor(i * stride)]!);
  return {
    count,
    u: pick(points.u),
    v: pick(points.v),
    bar: pick(points.bar),
    see: pick(points.see),
    barU: pick(points.barU),
    barV: pick(points.barV),
    seeU: pick(points.seeU),
    seeV: pick(points.seeV),
    weight: pick(points.weight),
    knowledge: pick(points.knowledge),
    slide: pick(points.slide),
    slideTurn: points.slideTurn,
    squash: points.squash,
    turns: points.turns,
    reach_px: points.reach_px,
  };
}
