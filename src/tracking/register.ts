import type { Picture } from './picture.ts';
import type { Agreement, Placement } from './placement.ts';
import type { BarPoints } from './points.ts';
import { diagonalOfInverse, solveSymmetric } from './symmetric.ts';

const PARAMETERS = 5;

/**
 * Gauss-Newton registration of the two-layer model (bar over background) against a picture, with redescending weights
 * (Geman and McClure 1987). Changes `place`; null where the points don't determine it.
 *
 * @param tolerances one entry per iteration: residuals beyond so many expected standard deviations lose their weight
 */
export function register(
  picture: Picture<Uint8Array>,
  background: Picture,
  points: BarPoints,
  place: Placement,
  tolerances: readonly number[],
): Agreement | null {
  const { width, height, data } = picture;
  const ground = background.data;
  const { count, u, v, bar, see, barU, barV, seeU, seeV, weight, knowledge, slide, squash } = points;
  const normal = new Float64Array(PARAMETERS * PARAMETERS);
  const step = new Float64Array(PARAMETERS);
  const right = width - 1;
  const bottom = height - 1;
  let lastStep_px = 0;
  let misfit = 0;
  let odd = 0;
  let share = 0;
  let outside = 0;
  for (const tolerance of tolerances) {
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    const { gain, offset } = place;
    const limit = 1 / (tolerance * tolerance);
    const turned = place.turn - points.slideTurn;
    let h00 = 0;
    let h10 = 0;
    let h11 = 0;
    let h20 = 0;
    let h21 = 0;
    let h22 = 0;
    let h30 = 0;
    let h31 = 0;
    let h32 = 0;
    let h33 = 0;
    let h40 = 0;
    let h41 = 0;
    let h42 = 0;
    let h43 = 0;
    let h44 = 0;
    let b0 = 0;
    let b1 = 0;
    let b2 = 0;
    let b3 = 0;
    let b4 = 0;
    let squares = 0;
    let weights = 0;
    let unfit = 0;
    let within = 0;
    share = 0;
    outside = 0;
    for (let i = 0; i < count; i++) {
      const pu = u[i]!;
      const pv = v[i]! + slide[i]! * turned;
      const x = place.x_px + c * pu - s * pv;
      const y = place.y_px + squash * (s * pu + c * pv);
      const w0 = weight[i]!;
      if (!(x >= 0 && y >= 0 && x < right && y < bottom)) {
        outside += knowledge[i]!;
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
      let under = 0;
      if (see[i]! !== 0 || seeU[i]! !== 0 || seeV[i]! !== 0) {
        const g0 = ground[at]!;
        const g1 = ground[below]!;
        const groundUpper = g0 + fx * (ground[at + 1]! - g0);
        under = groundUpper + fy * (g1 + fx * (ground[below + 1]! - g1) - groundUpper);
      }
      const model = bar[i]! + see[i]! * under;
      const r = seen - gain * model - offset;
      const gu = gain * (barU[i]! + seeU[i]! * under);
      const gv = gain * (barV[i]! + seeV[i]! * under);
      const jt = pv * gu - (pu + slide[i]!) * gv;
      const e = r * r * w0;
      const keep = 1 / (1 + e * limit);
      const w = w0 * keep * keep;
      squares += e * keep * keep;
      weights += keep * keep;
      unfit += 1 - keep;
      within++;
      share += keep * keep * knowledge[i]!;
      const wt = w * jt;
      const wu = -w * gu;
      const wv = -w * gv;
      const wm = w * model;
      h00 += wt * jt;
      h10 += wu * jt;
      h11 -= wu * gu;
      h20 += wv * jt;
      h21 -= wv * gu;
      h22 -= wv * gv;
      h30 += wm * jt;
      h31 -= wm * gu;
      h32 -= wm * gv;
      h33 += wm * model;
      h40 += wt;
      h41 += wu;
      h42 += wv;
      h43 += wm;
      h44 += w;
      b0 += wt * r;
      b1 += wu * r;
      b2 += wv * r;
      b3 += wm * r;
      b4 += w * r;
    }
    if (!points.turns) {
      h00 = 1;
      h10 = 0;
      h20 = 0;
      h30 = 0;
      h40 = 0;
      b0 = 0;
    }
    normal.set([
      h00,
      0,
      0,
      0,
      0,
      h10,
      h11,
      0,
      0,
      0,
      h20,
      h21,
      h22,
      0,
      0,
      h30,
      h31,
      h32,
      h33,
      0,
      h40,
      h41,
      h42,
      h43,
      h44,
    ]);
    step.set([b0, b1, b2, b3, b4]);
    if (!solveSymmetric(normal, step, PARAMETERS)) return null;
    const turn = place.turn + step[0]!;
    const cn = Math.cos(turn);
    const sn = Math.sin(turn);
    place.turn = turn;
    place.x_px += cn * step[1]! - sn * step[2]!;
    place.y_px += squash * (sn * step[1]! + cn * step[2]!);
    place.gain += step[3]!;
    place.offset += step[4]!;
    lastStep_px = Math.hypot(Math.abs(step[0]!) * points.reach_px, step[1]!, step[2]!);
    odd = within > 0 ? unfit / within : 1;
    misfit = weights > 0 ? squares / weights : Number.POSITIVE_INFINITY;
    if (!Number.isFinite(turn) || !(place.gain > 0)) return null;
  }
  const sd = Math.sqrt(diagonalOfInverse(normal, PARAMETERS, points.turns ? 0 : 1));
  return { misfit, share, odd, outside, sd, lastStep_px };
}
