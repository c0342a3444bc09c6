import type { PlacedPicture } from './layers.ts';
import { separate } from './layers.ts';
import type { Motion } from './motion.ts';
import { energyExplained, movingLayer } from './moving-layer.ts';
import type { Picture } from './picture.ts';
import { emptyPicture, valueAt } from './picture.ts';
import { pivotOf } from './pivot.ts';
import type { Agreement, Placement } from './placement.ts';
import { choosePoints, thinPoints } from './points.ts';
import { register } from './register.ts';
import { searchShift, searchTurn } from './search.ts';

/** A placement with what is known of its worth; null where the picture didn't agree with the bar at all. */
export interface TriedPlace {
  readonly place: Placement;
  readonly agreement: Agreement | null;
}

/** Farthest turn from the sample's middle that is ever looked for, radians. */
const WIDEST_TURN = 1.2;

/** Turns at the edge of the motion that are tried, radians, on both sides. */
const SPANS = [0.006, 0.01, 0.015, 0.022, 0.033, 0.05, 0.075, 0.11, 0.16, 0.23, 0.33, 0.48, 0.7];
/** Places that explain this share of the motion are good enough not to look for others. */
const GOOD = 0.8;

/**
 * First placements of the bar in a sample of pictures before anything is known of it but where the picture moves. Two
 * ways, of which the one that explains more of the motion is kept: turns in proportion to how far each picture differs
 * from the common one; and a search of all pictures for what one of them shows.
 */
export function firstPlaces(pictures: readonly Picture<Uint8Array>[], motion: Motion, squash: number): TriedPlace[] {
  const grid = {
    halfU: Math.ceil(motion.along_px * 1.1 + 3),
    halfV: Math.ceil(motion.across_px * 1.1 + 3),
    squash,
  };
  const byswing = settle(pictures, placesBySwing(pictures, motion, grid), grid, motion);
  if (byswing.explained > GOOD) return byswing.tried;
  const searched = settle(pictures, placesBySearch(pictures, motion, squash), grid, motion);
  return searched.explained > byswing.explained ? searched.tried : byswing.tried;
}

interface Grid {
  readonly halfU: number;
  readonly halfV: number;
  readonly squash: number;
}

/** Registers all pictures twice with what the places show to be the moving bar. */
function settle(
  pictures: readonly Picture<Uint8Array>[],
  from: readonly TriedPlace[],
  grid: Grid,
  motion: Motion,
): { tried: TriedPlace[]; explained: number } {
  const nothing = emptyPicture(pictures[0]!.width, pictures[0]!.height);
  let tried = [...from];
  for (let round = 0; round < 3; round++) {
    const { layers, explained } = movingLayer(placed(pictures, tried), grid, motion);
    if (round === 2 || explained === 0) return { tried, explained };
    const points = choosePoints(layers, 1000);
    tried = tried.map(({ place: before }, t) => {
      const place = { ...before };
      const agreement = register(pictures[t]!, nothing, points, place, [8, 6, 5, 4]);
      return { place: agreement === null ? before : place, agreement };
    });
    if (soundIndices(tried).length < 3) return { tried, explained: 0 };
  }
  return { tried, explained: 0 };
}

/** Turns in proportion to the motion's swing, with the span that explains most of the motion. */
function placesBySwing(pictures: readonly Picture<Uint8Array>[], motion: Motion, grid: Grid): TriedPlace[] {
  const placesFor = (span: number): TriedPlace[] =>
    pictures.map((_, t) => ({
      place: {
        turn: motion.axis_rad + span * motion.swing[t]!,
        x_px: motion.x_px,
        y_px: motion.y_px,
        gain: motion.gain[t]!,
        offset: motion.offset[t]!,
      },
      agreement: { misfit: 1, share: 1, odd: 0, outside: 0, sd: 1, lastStep_px: 0 },
    }));
  // Every third picture is enough to tell.
  const few = (span: number) => placed(pictures, placesFor(span)).filter((_, t) => t % 3 === 0);
  const bestOf = (spans: readonly number[], stride: number): number => {
    let best = 0;
    let most = -1;
    for (const span of spans) {
      const explained = energyExplained(few(span), grid, motion, stride);
      if (explained > most) {
        most = explained;
        best = span;
      }
    }
    return best;
  };
  const rough = bestOf(
    SPANS.flatMap((size) => [size, -size]),
    2,
  );
  const best = bestOf([rough, rough * 0.83, rough * 1.2], 1);
  return placesFor(best);
}

/**
 * One picture serves as the bar's likeness; the others are searched for the same pattern turned about the centre of
 * motion, then about the pivot found from that.
 */
function placesBySearch(pictures: readonly Picture<Uint8Array>[], motion: Motion, squash: number): TriedPlace[] {
  const { width, height } = pictures[0]!;
  const nothing = emptyPicture(width, height);
  const middle = motion.middle;
  let centre = { x: motion.x_px, y: motion.y_px };
  let tried: TriedPlace[] = [];
  for (let round = 0; round < 3; round++) {
    const reference: PlacedPicture = {
      picture: pictures[middle]!,
      place: {
        turn: motion.axis_rad,
        x_px: centre.x,
        y_px: centre.y,
        gain: motion.gain[middle]!,
        offset: motion.offset[middle]!,
      },
    };
    const grid = {
      halfU: Math.ceil(motion.along_px + 2 + Math.hypot(centre.x - motion.x_px, centre.y - motion.y_px)),
      halfV: Math.ceil(motion.across_px + 2),
      squash,
    };
    const layers = separate([reference], grid, null, null, motion.noise);
    // Only what moves counts, and it may differ from the likeness by a good part of its own movement.
    const c = Math.cos(motion.axis_rad);
    const s = Math.sin(motion.axis_rad);
    for (let at = 0; at < layers.weight.length; at++) {
      const u = (at % layers.columns) - grid.halfU;
      const v = Math.floor(at / layers.columns) - grid.halfV;
      const energy = valueAt(motion.energy, centre.x + c * u - s * v, centre.y + squash * (s * u + c * v));
      layers.weight[at] = layers.weight[at] !== 0 && energy > 0 ? 1 / (4 * motion.noise + 0.1 * energy) : 0;
    }
    const points = choosePoints(layers, 1000);
    const few = thinPoints(points, 250);
    const step = Math.max(0.01, 2 / points.reach_px);
    const widest = Math.min(WIDEST_TURN, 0.1 + 1.5 * Math.atan2(motion.across_px, motion.along_px));
    const range = { from: motion.axis_rad - widest, to: motion.axis_rad + widest, step, tolerance: 3 };
    tried = pictures.map((picture, t) => {
      const place = { ...reference.place, gain: motion.gain[t]!, offset: motion.offset[t]! };
      if (t !== middle) {
        place.turn = searchTurn(picture, nothing, few, place, range).turn;
        const reach = 0.15 * points.reach_px;
        searchShift(picture, nothing, few, place, { across: reach, along: reach, step: 1.5, tolerance: 3 });
        const near = { ...range, from: place.turn - 3 * step, to: place.turn + 3 * step };
        place.turn = searchTurn(picture, nothing, few, place, near).turn;
      }
      return { place, agreement: register(picture, nothing, points, place, [6, 6, 4, 4, 3, 3]) };
    });
    const pivot = pivotOf(soundOf(tried), squash, {
      u_px: 0,
      v_px: 0,
      sdU_px: 0.5 * motion.along_px,
      sdV_px: 0.02 * motion.along_px,
    });
    const moved = Math.hypot(pivot.u_px, pivot.v_px);
    const from = tried[middle]!.place;
    centre = {
      x: from.x_px + Math.cos(from.turn) * pivot.u_px - Math.sin(from.turn) * pivot.v_px,
      y: from.y_px + squash * (Math.sin(from.turn) * pivot.u_px + Math.cos(from.turn) * pivot.v_px),
    };
    if (moved < 0.03 * points.reach_px) break;
  }
  return tried;
}

/** The sound ones among the pictures, with their places. */
export function placed(pictures: readonly Picture<Uint8Array>[], tried: readonly TriedPlace[]): PlacedPicture[] {
  return soundIndices(tried).map((i) => ({ picture: pictures[i]!, place: tried[i]!.place }));
}

/** The placements that agree with the bar about as well as most do. */
export function soundOf(tried: readonly TriedPlace[]): Placement[] {
  return soundIndices(tried).map((i) => tried[i]!.place);
}

/** Indices of the placements that agree with the bar about as well as most do. */
export function soundIndices(tried: readonly TriedPlace[]): number[] {
  const agreed = tried.flatMap(({ agreement }) => (agreement === null ? [] : [agreement]));
  if (agreed.length === 0) return [];
  const middle = (of: (a: Agreement) => number): number => agreed.map(of).sort((a, b) => a - b)[agreed.length >> 1]!;
  const share = middle((a) => a.share);
  // A hand over the bar in a few pictures must not teach that a hand is usual.
  const misfit = 3 * middle((a) => a.misfit) + 0.1;
  const indices: number[] = [];
  for (const [i, { agreement: a }] of tried.entries()) {
    if (a !== null && a.share > 0.6 * share && a.misfit < misfit && a.lastStep_px < 1) indices.push(i);
  }
  return indices;
}
