import type { Picture } from './picture.ts';
import type { Placement } from './placement.ts';
import type { BarPoints } from './points.ts';

/** Mean robust disagreement between picture and model at a place: 0 perfect, 1 nothing fits. */
export function disagreement(
  picture: Picture<Uint8Array>,
  background: Picture,
  points: BarPoints,
  place: Placement,
  turn: number,
  tolerance: number,
): number {
  const { width, height, data } = picture;
  const ground = background.data;
  const { count, u, v, bar, see, weight, slide, squash } = points;
  const c = Math.cos(turn);
  const s = Math.sin(turn);
  const turned = turn - points.slideTurn;
  const limit = 1 / (tolerance * tolerance);
  let sum = 0;
  let n = 0;
  for (let i = 0; i < count; i++) {
    const pv = v[i]! + slide[i]! * turned;
    const x = place.x_px + c * u[i]! - s * pv;
    const y = place.y_px + squash * (s * u[i]! + c * pv);
    if (!(x >= 0 && y >= 0 && x < width - 1 && y < height - 1)) {
      // Outside the picture nothing can be said: half a disagreement, so that hiding there doesn't pay.
      sum += 0.5;
      n++;
      continue;
    }
    const left = x | 0;
    const top = y | 0;
    const fx = x - left;
    const fy = y - top;
    const at = top * width + left;
    const below = at + width;
    const i0 = data[at]!;
    const i1 = data[below]!;
    const upper = i0 + fx * (data[at + 1]! - i0);
    const seen = upper + fy * (i1 + fx * (data[below + 1]! - i1) - upper);
    const under = see[i]! === 0 ? 0 : ground[fy > 0.5 ? below + (fx > 0.5 ? 1 : 0) : at + (fx > 0.5 ? 1 : 0)]!;
    const r = seen - place.gain * (bar[i]! + see[i]! * under) - place.offset;
    const e = r * r * weight[i]! * limit;
    sum += e / (1 + e);
    n++;
  }
  return n > 0 ? sum / n : 1;
}

/** The turn between `from` and `to` at which points and picture disagree least; `place` gives everything but the turn. */
export function searchTurn(
  picture: Picture<Uint8Array>,
  background: Picture,
  points: BarPoints,
  place: Placement,
  range: { readonly from: number; readonly to: number; readonly step: number; readonly tolerance: number },
): { readonly turn: number; readonly disagreement: number } {
  let best = place.turn;
  let least = Number.POSITIVE_INFINITY;
  const steps = Math.max(0, Math.ceil((range.to - range.from) / range.step));
  for (let i = 0; i <= steps; i++) {
    const turn = range.from + i * range.step;
    const found = disagreement(picture, background, points, place, turn, range.tolerance);
    if (found < least) {
      least = found;
      best = turn;
    }
  }
  return { turn: best, disagreement: least };
}

/** Moves `place` across the bar, then along it, at most so many pixels, to where points and picture disagree least. */
export function searchShift(
  picture: Picture<Uint8Array>,
  background: Picture,
  points: BarPoints,
  place: Placement,
  range: {
    readonly across: number;
    readonly along: number;
    readonly step: number;
    readonly tolerance: number;
  },
): void {
  const c = Math.cos(place.turn);
  const s = Math.sin(place.turn);
  const { squash } = points;
  const tried = { ...place };
  for (const [du, dv, reach] of [
    [-s, c, range.across],
    [c, s, range.along],
  ] as const) {
    const { x_px, y_px } = place;
    let least = Number.POSITIVE_INFINITY;
    const steps = Math.ceil(reach / range.step);
    for (let i = -steps; i <= steps; i++) {
      tried.x_px = x_px + i * range.step * du;
      tried.y_px = y_px + i * range.step * dv * squash;
      const found = disagreement(picture, background, points, tried, place.turn, range.tolerance);
      if (found < least) {
        least = found;
        place.x_px = tried.x_px;
        place.y_px = tried.y_px;
      }
    }
  }
}
