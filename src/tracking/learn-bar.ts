import type { Frame } from '../recording/recording.ts';
import { alignAlong } from './align-along.ts';
import { findAxis } from './axis.ts';
import type { TriedPlace } from './first-places.ts';
import { firstPlaces, placed, soundIndices } from './first-places.ts';
import type { BarLayers, Outline } from './layers.ts';
import { seeThrough, separate, uncover } from './layers.ts';
import { findMotion } from './motion.ts';
import { movingLayer } from './moving-layer.ts';
import { findOutline, straightenBy } from './outline.ts';
import type { Picture } from './picture.ts';
import { emptyPicture } from './picture.ts';
import { pivotOf } from './pivot.ts';
import type { Placement } from './placement.ts';
import type { BarPoints } from './points.ts';
import { choosePoints } from './points.ts';
import { register } from './register.ts';
import { withSlides } from './slides.ts';
import { shrink } from './vision.ts';

/** What is known of the bar and its background after the opening of a stretch. */
export interface BarModel {
  readonly background: Picture;
  readonly points: BarPoints;
  /** Direction of the bar's axis in its own frame, and its standard uncertainty, radians. */
  readonly axis_rad: number;
  readonly u_axis_rad: number;
  /** The bar's middle in its own frame, pixels. */
  readonly middleU_px: number;
  readonly middleV_px: number;
  readonly halfLength_px: number;
  /** Share of what moves in the opening that the bar's turning explains, 0 to 1. */
  readonly explained: number;
  /** What is usual of a sound frame. */
  readonly usualShare: number;
  readonly usualOdd: number;
  readonly usualMisfit: number;
  /** Turns seen, radians, and a placement to start from. */
  readonly leastTurn: number;
  readonly mostTurn: number;
  /** Half of the sideways range seen, pixels. */
  readonly shift_px: number;
  /**
   * Of an end seen from the side: half its width times the lean of its edges' weight to the right; and where it stands on
   * average, pixels of the region.
   */
  readonly edgeLean_px: number;
  readonly restX_px: number;
  readonly start: Placement;
  /** The bar's own picture and its outline; for looking at. */
  readonly layers: BarLayers;
  readonly outline: Outline;
}

/** Why no bar was found: nothing moves, or what moves is no bar that turns. */
export type NoBar = 'still' | 'no_likeness' | 'no_outline';

/** Most points compared per frame. */
export const MOST_POINTS = 1400;
/** Pictures the bar is learnt from. */
export const SAMPLE = 28;
/** Larger sides are shrunk below this for the first look, pixels. */
export const COARSE_SIDE = 140;

/** Learns bar and background from the opening frames of a stretch (all of one size). */
export function learnBar(frames: readonly Frame[], squash: number): BarModel | NoBar {
  const sample = evenly(frames, SAMPLE).map((frame) => ({
    width: frame.width_px,
    height: frame.height_px,
    data: frame.grey,
  }));
  const factor = Math.ceil(Math.max(sample[0]!.width, sample[0]!.height) / COARSE_SIDE);
  const coarse = sample.map((picture) => shrink(picture, factor));
  const motion = findMotion(coarse, squash);
  if (motion === null) return 'still';
  let tried = firstPlaces(coarse, motion, squash);
  if (soundIndices(tried).length < 3) return 'no_likeness';
  const nothing = emptyPicture(coarse[0]!.width, coarse[0]!.height);
  const wide = {
    halfU: Math.ceil(motion.along_px * 1.1 + 3),
    halfV: Math.ceil(motion.across_px * 1.1 + 3),
    squash,
  };
  let layers: BarLayers;
  for (let round = 0; round < 2; round++) {
    layers = movingLayer(placed(coarse, tried), wide, motion).layers;
    tried = again(coarse, nothing, choosePoints(layers, 1500), tried, [5, 4, 3]);
    tried = recentre(tried, squash, motion.along_px);
    if (soundIndices(tried).length < 3) return 'no_likeness';
  }
  const { explained } = movingLayer(placed(coarse, tried), wide, motion);
  const lean = straightenBy(separate(placed(coarse, tried), wide, null, null, motion.noise));
  tried = turned(tried, lean);
  layers = separate(placed(coarse, tried), wide, null, null, motion.noise);
  const rough = findOutline(layers);
  if (rough === null) return 'no_outline';
  tried = tried.map(({ place, agreement }) => ({
    place: { ...place, x_px: (place.x_px + 0.5) * factor - 0.5, y_px: (place.y_px + 0.5) * factor - 0.5 },
    agreement,
  }));
  const margin = 6 + 2 * factor;
  const grid = {
    halfU: Math.ceil(Math.max(-rough.left, rough.right) * factor + margin),
    halfV: Math.ceil(Math.max(-rough.top, rough.bottom) * factor + margin),
    squash,
  };
  layers = separate(placed(sample, tried), grid, null, null, motion.noise);
  let outline = findOutline(layers);
  if (outline === null) return 'no_outline';
  const axis = findAxis(layers, outline);
  if (axis !== null) tried = turned(tried, axis.turn_rad);
  tried = alignAlong(sample, tried, outline, squash);
  layers = separate(placed(sample, tried), grid, null, null, motion.noise);
  outline = findOutline(layers) ?? outline;
  let background = emptyPicture(1, 1);
  let points = choosePoints(layers, MOST_POINTS, outline);
  for (let round = 0; round < 2; round++) {
    background = uncover(placed(sample, tried), outline, squash, 3);
    layers = separate(placed(sample, tried), grid, background, seeThrough(outline, grid), layers.noise);
    points = choosePoints(layers, MOST_POINTS, outline);
    tried = again(sample, background, points, tried, [4, 3, 3]);
    if (soundIndices(tried).length < 3) return 'no_likeness';
    outline = findOutline(layers) ?? outline;
  }
  layers = separate(placed(sample, tried), grid, background, seeThrough(outline, grid), layers.noise);
  points = choosePoints(layers, MOST_POINTS, outline);
  for (let round = 0; round < 2; round++) {
    points = withSlides(points, placed(sample, tried), background, layers, outline);
    tried = again(sample, background, points, tried, [3, 3]);
  }
  return describe(layers, outline, background, points, tried, squash, explained);
}

function describe(
  layers: BarLayers,
  outline: Outline,
  background: Picture,
  points: BarPoints,
  tried: readonly TriedPlace[],
  squash: number,
  explained: number,
): BarModel | NoBar {
  const axis = findAxis(layers, outline);
  if (axis === null) return 'no_outline';
  const sound = soundIndices(tried).map((i) => tried[i]!);
  const places = sound.map(({ place }) => place);
  const length_px = outline.right - outline.left;
  const pivot = pivotOf(places, squash, {
    u_px: (outline.left + outline.right) / 2,
    v_px: axis.v_px,
    sdU_px: 0.02 * length_px,
    sdV_px: 0.3,
  });
  const turns = places.map(({ turn }) => turn);
  const middle = (values: number[]): number => values.sort((a, b) => a - b)[values.length >> 1]!;
  return {
    background,
    points,
    axis_rad: axis.turn_rad,
    u_axis_rad: axis.u_turn_rad,
    middleU_px: pivot.u_px,
    middleV_px: pivot.v_px,
    halfLength_px: length_px / 2,
    explained,
    usualShare: middle(sound.map(({ agreement }) => agreement!.share)),
    usualOdd: middle(sound.map(({ agreement }) => agreement!.odd)),
    usualMisfit: middle(sound.map(({ agreement }) => agreement!.misfit)),
    leastTurn: Math.min(...turns),
    mostTurn: Math.max(...turns),
    shift_px: 0,
    edgeLean_px: 0,
    restX_px: 0,
    start: places[0]!,
    layers,
    outline,
  };
}

/** The places after registering the pictures anew. */
export function again(
  pictures: readonly Picture<Uint8Array>[],
  background: Picture,
  points: BarPoints,
  tried: readonly TriedPlace[],
  tolerances: readonly number[],
): TriedPlace[] {
  return tried.map(({ place: before }, t) => {
    const place = { ...before };
    const agreement = register(pictures[t]!, background, points, place, tolerances);
    return agreement === null ? { place: before, agreement } : { place, agreement };
  });
}

/** Turns the bar's frame towards +v; the bar stays where it is. */
function turned(tried: readonly TriedPlace[], by_rad: number): TriedPlace[] {
  return tried.map(({ place, agreement }) => ({ place: { ...place, turn: place.turn + by_rad }, agreement }));
}

/** Moves the origin of the bar's frame to its pivot. */
function recentre(tried: readonly TriedPlace[], squash: number, reach_px: number): TriedPlace[] {
  const sound = soundIndices(tried).map((i) => tried[i]!.place);
  const pivot = pivotOf(sound, squash, { u_px: 0, v_px: 0, sdU_px: 0.25 * reach_px, sdV_px: 0.02 * reach_px });
  return tried.map(({ place, agreement }) => {
    const c = Math.cos(place.turn);
    const s = Math.sin(place.turn);
    return {
      place: {
        ...place,
        x_px: place.x_px + c * pivot.u_px - s * pivot.v_px,
        y_px: place.y_px + squash * (s * pivot.u_px + c * pivot.v_px),
      },
      agreement,
    };
  });
}

/** At most `most` of the items, evenly spread from first to last. */
export function evenly<T>(items: readonly T[], most: number): T[] {
  if (items.length <= most) return [...items];
  return Array.from({ length: most }, (_, i) => items[Math.round((i * (items.length - 1)) / (most - 1))]!);
}
