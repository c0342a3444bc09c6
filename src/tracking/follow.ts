import type { BarModel } from './learn-bar.ts';
import type { Picture } from './picture.ts';
import type { BarPoints } from './points.ts';
import { thinPoints } from './points.ts';
import type { Placement } from './register.ts';
import { register } from './register.ts';
import { searchTurn } from './search.ts';
import type { Refusal } from './trace.ts';

/** What one frame gave. Angle in radians, anticlockwise as seen; middle in pixels of the region. */
export type Fix =
  | {
      readonly ok: true;
      readonly angle: number;
      readonly x_px: number;
      readonly y_px: number;
      readonly sd_rad: number;
    }
  | { readonly ok: false; readonly reason: Refusal };

/** Points used to look for the bar before it is registered. */
const SCOUTS = 150;

/** Follows the bar from frame to frame, each frame once and in order of time. */
export class Follower {
  readonly #model: BarModel;
  readonly #scouts: BarPoints;
  #last: Placement;
  #time_s: number | null = null;
  #rate = 0;
  #misses = 0;

  constructor(model: BarModel) {
    this.#model = model;
    this.#scouts = thinPoints(model.points, SCOUTS);
    this.#last = { ...model.start };
  }

  /** Finds the bar in the next frame's region. */
  next(picture: Picture<Uint8Array>, time_s: number): Fix {
    const { background, points, usualShare, usualMisfit } = this.#model;
    const place = this.#look(picture, time_s);
    const agreement = register(picture, background, points, place, [4, 3, 3]);
    let reason: Refusal | null = null;
    if (agreement === null) reason = 'no_fit';
    else if (agreement.outside > 0.3) reason = 'left_region';
    else if (agreement.share < 0.75 * usualShare) reason = 'hidden';
    else if (agreement.misfit > 4 * usualMisfit + 1) reason = 'blurred';
    else if (agreement.lastStep_px > 0.5) reason = 'no_fit';
    if (agreement === null || reason !== null) {
      this.#misses++;
      return { ok: false, reason: reason ?? 'no_fit' };
    }
    if (this.#time_s !== null && this.#misses === 0 && time_s > this.#time_s) {
      this.#rate = (place.turn - this.#last.turn) / (time_s - this.#time_s);
    } else this.#rate = 0;
    this.#misses = 0;
    this.#time_s = time_s;
    this.#last = place;
    const { axis_rad, middleU_px: u, middleV_px: v } = this.#model;
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    return {
      ok: true,
      angle: -(place.turn + axis_rad),
      x_px: place.x_px + c * u - s * v,
      y_px: place.y_px + points.squash * (s * u + c * v),
      sd_rad: agreement.sd_rad * Math.sqrt(agreement.misfit),
    };
  }

  /** A placement near the bar's: looked for about the expected turn, or everywhere after a gap. */
  #look(picture: Picture<Uint8Array>, time_s: number): Placement {
    const { background, leastTurn, mostTurn } = this.#model;
    const step = 2 / this.#scouts.reach_px;
    const swing = mostTurn - leastTurn;
    const place = { ...this.#last };
    let from: number;
    let to: number;
    if (this.#time_s === null || this.#misses > 0) {
      from = leastTurn - Math.max(0.1, swing);
      to = mostTurn + Math.max(0.1, swing);
    } else {
      const ahead = this.#rate * (time_s - this.#time_s);
      place.turn += Math.abs(ahead) < swing ? ahead : 0;
      const spread = Math.max(3 * step, Math.abs(ahead));
      from = place.turn - spread;
      to = place.turn + spread;
    }
    place.turn = searchTurn(picture, background, this.#scouts, place, { from, to, step, tolerance: 6 }).turn;
    return place;
  }
}
