import type { BarLayers, Outline, PlacedPicture } from './layers.ts';
import type { Picture } from './picture.ts';
import { valueAt } from './picture.ts';
import type { BarPoints } from './points.ts';
import { NEITHER, quarterOf, quartersOf } from './quarters.ts';
import { solveSymmetric } from './symmetric.ts';

/** Turn, shift along the bar, gain, offset, a shift across the bar for each quarter of it, and a taper. */
const PARAMETERS = 9;

/**
 * Points that know how the edges of each quarter of the bar slide as it turns. An edge between two greys is seen where the
 * shading makes it, and on a round bar in the room's light that place moves across the bar with its direction; seen at
 * an angle, the outline of a round bar also widens or narrows, and its far end shrinks. With halves of different
 * contrast either would be taken for a turn of a few per cent more or less. Within one quarter the slide is the same all
 * along, so a fit with a shift of its own for every quarter tells both apart; what it finds over the sample is drawn to 0
 * as far as chance could have made it.
 */
export function withSlides(
  points: BarPoints,
  pictures: readonly PlacedPicture[],
  background: Picture,
  layers: BarLayers,
  outline: Outline,
): BarPoints {
  const quarters = quartersOf(layers, outline);
  const quarter = Uint8Array.from({ length: points.count }, (_, i) => quarterOf(quarters, points.u[i]!, points.v[i]!));
  const taper = Float32Array.from(quarter, (q, i) =>
    q === NEITHER ? 0 : ((q >= 2 ? 1 : -1) * (points.u[i]! - quarters.tone)) / quarters.half,
  );
  const turns: number[] = [];
  const shifts: number[][] = [[], [], [], [], []];
  for (const placed of pictures) {
    const free = fitFreely(points, placed, background, quarter, taper);
    if (free === null) continue;
    turns.push(placed.place.turn + free[0]!);
    const common = (free[4]! + free[5]! + free[6]! + free[7]!) / 4;
    for (let q = 0; q < 4; q++) shifts[q]!.push(free[4 + q]! - common);
    shifts[4]!.push(free[8]!);
  }
  if (turns.length < 8) return points;
  const slideTurn = turns.reduce((a, b) => a + b, 0) / turns.length;
  const rates = shifts.map((shift) => rateOf(turns, shift, slideTurn));
  const slide = Float32Array.from(
    quarter,
    (q, i) => points.slide[i]! + (q === NEITHER ? 0 : rates[q]! + rates[4]! * taper[i]!),
  );
  return { ...points, slide, slideTurn };
}

/** Slope of the shifts against the turns, drawn to 0 by the share of its square that its variance makes up. */
function rateOf(turns: readonly number[], shifts: readonly number[], middle: number): number {
  const n = turns.length;
  const mean = shifts.reduce((a, b) => a + b, 0) / n;
  let tt = 0;
  let ts = 0;
  for (const [i, turn] of turns.entries()) {
    tt += (turn - middle) ** 2;
    ts += (turn - middle) * (shifts[i]! - mean);
  }
  const rate = ts / tt;
  let rest = 0;
  for (const [i, turn] of turns.entries()) rest += (shifts[i]! - mean - rate * (turn - middle)) ** 2;
  const variance = rest / (n - 2) / tt;
  return rate * Math.max(0, 1 - (2 * variance) / (rate * rate));
}

function fitFreely(
  points: BarPoints,
  { picture, place }: PlacedPicture,
  background: Picture,
  quarter: Uint8Array,
  taper: Float32Array,
): Float64Array | null {
  const normal = new Float64Array(PARAMETERS * PARAMETERS);
  const step = new Float64Array(PARAMETERS);
  const row = new Float64Array(PARAMETERS);
  const c = Math.cos(place.turn);
  const s = Math.sin(place.turn);
  const turned = place.turn - points.slideTurn;
  for (let i = 0; i < points.count; i++) {
    const q = quarter[i]!;
    if (q === NEITHER) continue;
    const u = points.u[i]!;
    const v = points.v[i]! + points.slide[i]! * turned;
    const x = place.x_px + c * u - s * v;
    const y = place.y_px + points.squash * (s * u + c * v);
    if (!(x >= 0 && y >= 0 && x < picture.width - 1 && y < picture.height - 1)) continue;
    const under = valueAt(background, x, y);
    const model = points.bar[i]! + points.see[i]! * under;
    const r = valueAt(picture, x, y) - place.gain * model - place.offset;
    const gu = place.gain * (points.barU[i]! + points.seeU[i]! * under);
    const gv = place.gain * (points.barV[i]! + points.seeV[i]! * under);
    row.fill(0);
    row[0] = v * gu - (u + points.slide[i]!) * gv;
    row[1] = -gu;
    row[2] = model;
    row[3] = 1;
    row[4 + q] = -gv;
    row[8] = -gv * taper[i]!;
    const keep = 1 / (1 + (r * r * points.weight[i]!) / 9);
    const w = points.weight[i]! * keep * keep;
    for (let a = 0; a < PARAMETERS; a++) {
      const wa = w * row[a]!;
      if (wa === 0) continue;
      step[a] = step[a]! + wa * r;
      for (let b = 0; b <= a; b++) normal[a * PARAMETERS + b] = normal[a * PARAMETERS + b]! + wa * row[b]!;
    }
  }
  return solveSymmetric(normal, step, PARAMETERS) ? step : null;
}
