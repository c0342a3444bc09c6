import { type Brightness, brightnessOf } from './brightness.ts';
import type { BarModel } from './learn-bar.ts';
import type { Picture } from './picture.ts';
import type { Agreement, Placement } from './placement.ts';
import type { BarPoints } from './points.ts';
import { thinPoints } from './points.ts';
import { register } from './register.ts';
import { disagreement, searchShift, searchTurn } from './search.ts';
import type { Refusal } from './trace.ts';

/** What one frame gave. Angle in radians, anticlockwise as seen; middle in pixels of the region; `sd` of the angle, of an end of its place. */
export type Fix =
  | {
      readonly ok: true;
      readonly angle: number;
      readonly x_px: number;
      readonly y_px: number;
      readonly sd: number;
    }
  | { readonly ok: false; readonly reason: Refusal };

/** Points used to look for the bar before it is registered. */
const SCOUTS = 150;
/** Residuals beyond so many expected standard deviations count as disagreement, however large. */
const TOLERANCE = 6;

/** Follows the bar from frame to frame, each frame once and in order of time. */
export class Follower {
  readonly #model: BarModel;
  readonly #scouts: BarPoints;
  #last: Placement;
  #time_s: number | null = null;
  #rate = 0;
  #rateX = 0;
  #rateY = 0;
  #misses = 0;
  #brightness: Brightness | null = null;

  constructor(model: BarModel) {
    this.#model = model;
    this.#scouts = thinPoints(model.points, SCOUTS);
    this.#last = { ...model.start };
  }

  /** Finds the bar in the next frame's region. */
  next(picture: Picture<Uint8Array>, time_s: number): Fix {
    const { background, points } = this.#model;
    const brightness = brightnessOf(picture);
    const place = this.#look(picture, time_s, brightness);
    let agreement = register(picture, background, points, place, [4, 3]);
    // Two steps are enough from a good prediction; more only where the last one was still long.
    for (let more = 0; more < 3 && agreement !== null && agreement.lastStep_px > 0.03; more++) {
      agreement = register(picture, background, points, place, [3]);
    }
    const reason = agreement === null ? 'no_fit' : refusalOf(agreement, this.#model);
    if (agreement === null || reason !== null) {
      this.#misses++;
      return { ok: false, reason: reason ?? 'no_fit' };
    }
    if (this.#time_s !== null && this.#misses === 0 && time_s > this.#time_s) {
      const passed_s = time_s - this.#time_s;
      this.#rate = (place.turn - this.#last.turn) / passed_s;
      this.#rateX = (place.x_px - this.#last.x_px) / passed_s;
      this.#rateY = (place.y_px - this.#last.y_px) / passed_s;
    } else {
      this.#rate = 0;
      this.#rateX = 0;
      this.#rateY = 0;
    }
    this.#misses = 0;
    this.#time_s = time_s;
    this.#last = place;
    this.#brightness = brightness;
    const { axis_rad, middleU_px: u, middleV_px: v } = this.#model;
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    return {
      ok: true,
      angle: -(place.turn + axis_rad),
      x_px: place.x_px + c * u - s * v,
      y_px: place.y_px + points.squash * (s * u + c * v),
      sd: agreement.sd * Math.sqrt(agreement.misfit),
    };
  }

  /**
   * A placement near the bar's. Light may have changed since the last one: of its brightness as it was and as the
   * picture's mean and contrast make it, the one that agrees better with the picture is taken.
   */
  #look(picture: Picture<Uint8Array>, time_s: number, now: Brightness): Placement {
    const before = this.#brightness;
    const same = this.#lookWith(picture, time_s, this.#last);
    if (before === null || before.spread < 1 || now.spread < 1) return same;
    const ratio = now.spread / before.spread;
    if (Math.abs(ratio - 1) < 0.01 && Math.abs(now.mean - before.mean) < 1) return same;
    const gain = this.#last.gain * ratio;
    const offset = now.mean - ratio * (before.mean - this.#last.offset);
    const other = this.#lookWith(picture, time_s, { ...this.#last, gain, offset });
    return this.#disagreement(picture, other) < this.#disagreement(picture, same) ? other : same;
  }

  #disagreement(picture: Picture<Uint8Array>, place: Placement): number {
    return disagreement(picture, this.#model.background, this.#scouts, place, place.turn, TOLERANCE);
  }

  /** A placement near the bar's: looked for about the expected place, or everywhere after a gap. */
  #lookWith(picture: Picture<Uint8Array>, time_s: number, from: Placement): Placement {
    const scouts = this.#scouts;
    const { background, leastTurn, mostTurn } = this.#model;
    const place = { ...from };
    if (!scouts.turns) return this.#lookSideways(picture, time_s, place);
    const step = 2 / scouts.reach_px;
    const swing = mostTurn - leastTurn;
    if (this.#time_s === null || this.#misses > 0) {
      const wide = Math.max(0.1, swing);
      const range = { from: leastTurn - wide, to: mostTurn + wide, step, tolerance: TOLERANCE };
      const reach = 0.1 * scouts.reach_px;
      const shift = { across: reach, along: reach, step: 1.5, tolerance: TOLERANCE };
      place.turn = searchTurn(picture, background, scouts, place, range).turn;
      searchShift(picture, background, scouts, place, shift);
      const near = { ...range, from: place.turn - 4 * step, to: place.turn + 4 * step };
      place.turn = searchTurn(picture, background, scouts, place, near).turn;
      searchShift(picture, background, scouts, place, { ...shift, across: 4, along: 4 });
      return place;
    }
    const ahead_s = time_s - this.#time_s;
    const turning = this.#rate * ahead_s;
    if (Math.abs(turning) < swing) place.turn += turning;
    place.x_px += clamp(this.#rateX * ahead_s, 0.1 * scouts.reach_px);
    place.y_px += clamp(this.#rateY * ahead_s, 0.1 * scouts.reach_px);
    const spread = Math.max(2 * step, Math.abs(turning));
    const range = { from: place.turn - spread, to: place.turn + spread, step, tolerance: TOLERANCE };
    place.turn = searchTurn(picture, background, scouts, place, range).turn;
    return place;
  }

  /** The same for a body that only shifts. */
  #lookSideways(picture: Picture<Uint8Array>, time_s: number, place: Placement): Placement {
    const { background, shift_px } = this.#model;
    if (this.#time_s === null || this.#misses > 0) {
      const wide = { across: 3, along: 2 * shift_px + 6, step: 1.5, tolerance: TOLERANCE };
      searchShift(picture, background, this.#scouts, place, wide);
      return place;
    }
    const ahead_s = time_s - this.#time_s;
    const ahead_px = clamp(this.#rateX * ahead_s, shift_px);
    place.x_px += ahead_px;
    const near = { across: 0, along: Math.max(3, Math.abs(ahead_px)), step: 1.5, tolerance: TOLERANCE };
    searchShift(picture, background, this.#scouts, place, near);
    return place;
  }
}

/** Shares of what is usual below which, or above which, a frame isn't to be trusted. */
const LEAST_SHARE = 0.55;
const MOST_ODD = 0.25;
const MOST_OUTSIDE = 0.3;

/** Why a frame's fix isn't to be trusted, judged by what is usual of the stretch; null: it is. */
function refusalOf(agreement: Agreement, usual: BarModel): Refusal | null {
  if (agreement.outside > MOST_OUTSIDE) return 'left_region';
  if (agreement.share < LEAST_SHARE * usual.usualShare || agreement.odd > usual.usualOdd + MOST_ODD) return 'hidden';
  if (agreement.misfit > 4 * usual.usualMisfit + 1) return 'blurred';
  return agreement.lastStep_px > 0.5 ? 'no_fit' : null;
}

function clamp(value: number, limit: number): number {
  return Math.min(limit, Math.max(-limit, value));
}
