import type { Frame } from '../recording/recording.ts';
import { findEndWindow } from './end-window.ts';
import { placed, soundIndices, type TriedPlace } from './first-places.ts';
import { type BarLayers, separate } from './layers.ts';
import { again, type BarModel, evenly, MOST_POINTS, type NoBar, SAMPLE } from './learn-bar.ts';
import { findMirror } from './mirror.ts';
import { findMotion } from './motion.ts';
import { emptyPicture } from './picture.ts';
import { choosePoints } from './points.ts';
import { shrink } from './vision.ts';

/** Where the near end is expected, pixels of the region, and how far about it it may be found; null: anywhere. */
export interface Expected {
  readonly x_px: number;
  readonly spread_px: number;
}

/** Larger sides are shrunk below this for the first look, pixels: windows are looked for at every place. */
const END_SIDE = 90;

/**
 * Learns the bar's near end from the opening frames of a side view: the part of what moves that keeps its picture while
 * it shifts sideways. The bar's flank and its far end shift differently, so they don't.
 */
export function learnEnd(frames: readonly Frame[], expected: Expected | null): BarModel | NoBar {
  const sample = evenly(frames, SAMPLE).map((frame) => ({
    width: frame.width_px,
    height: frame.height_px,
    data: frame.grey,
  }));
  const factor = Math.ceil(Math.max(sample[0]!.width, sample[0]!.height) / END_SIDE);
  const coarse = sample.map((picture) => shrink(picture, factor));
  const motion = findMotion(coarse, 1);
  if (motion === null) return 'still';
  const window = findEndWindow(coarse, motion, likelihood(expected, factor));
  if (window === null) return 'no_likeness';
  // A little wider than the window, so that edges at its rim are inside.
  const half = Math.ceil(window.patch.width * 0.9) + 3;
  const box = { halfU: half, halfV: half, squash: 1 };
  const nothing = emptyPicture(coarse[0]!.width, coarse[0]!.height);
  let tried: TriedPlace[] = coarse.map((_, t) => ({
    place: {
      turn: 0,
      x_px: window.x_px[t]!,
      y_px: window.y_px[t]!,
      gain: motion.gain[t]!,
      offset: motion.offset[t]!,
    },
    agreement: { misfit: 1, share: window.correlation[t]!, odd: 0, outside: 0, sd: 1, lastStep_px: 0 },
  }));
  let layers: BarLayers;
  for (let round = 0; round < 4; round++) {
    if (soundIndices(tried).length < 3) return 'no_likeness';
    layers = separate(placed(coarse, tried), box, null, null, motion.noise);
    tried = again(coarse, nothing, choosePoints(layers, 1500, null, false), tried, [5, 4, 3]);
  }
  tried = tried.map(({ place, agreement }) => ({
    place: { ...place, x_px: (place.x_px + 0.5) * factor - 0.5, y_px: (place.y_px + 0.5) * factor - 0.5 },
    agreement,
  }));
  const grid = { halfU: box.halfU * factor + 2, halfV: box.halfV * factor + 2, squash: 1 };
  const none = emptyPicture(sample[0]!.width, sample[0]!.height);
  for (let round = 0; round < 2; round++) {
    layers = separate(placed(sample, tried), grid, null, null, motion.noise);
    tried = again(sample, none, choosePoints(layers, MOST_POINTS, null, false), tried, [4, 3, 3]);
    if (soundIndices(tried).length < 3) return 'no_likeness';
  }
  layers = separate(placed(sample, tried), grid, null, null, motion.noise);
  const mirror = findMirror(layers);
  if (mirror === null) return 'no_outline';
  const outline = {
    left: mirror.u_px - mirror.half_px,
    right: mirror.u_px + mirror.half_px,
    top: mirror.top,
    bottom: mirror.bottom,
  };
  const points = choosePoints(layers, MOST_POINTS, outline, false);
  tried = again(sample, none, points, tried, [3, 3]);
  const sound = soundIndices(tried).map((i) => tried[i]!);
  if (sound.length < 3) return 'no_likeness';
  const middle = (values: number[]): number => values.sort((a, b) => a - b)[values.length >> 1]!;
  const xs = sound.map(({ place }) => place.x_px);
  return {
    background: none,
    points,
    axis_rad: 0,
    u_axis_rad: mirror.u_u_px,
    middleU_px: mirror.u_px,
    middleV_px: (mirror.top + mirror.bottom) / 2,
    halfLength_px: mirror.half_px,
    explained: 1,
    usualShare: middle(sound.map(({ agreement }) => agreement!.share)),
    usualOdd: middle(sound.map(({ agreement }) => agreement!.odd)),
    usualMisfit: middle(sound.map(({ agreement }) => agreement!.misfit)),
    leastTurn: 0,
    mostTurn: 0,
    edgeLean_px: mirror.lean * mirror.half_px,
    restX_px: xs.reduce((a, b) => a + b, 0) / xs.length + mirror.u_px,
    shift_px: (Math.max(...xs) - Math.min(...xs)) / 2,
    start: sound[0]!.place,
    layers,
    outline,
  };
}

/** How likely the near end stands at a place of the shrunk pictures, 0 to 1. */
function likelihood(expected: Expected | null, factor: number): (x_px: number) => number {
  if (expected === null) return () => 1;
  const middle = (expected.x_px + 0.5) / factor - 0.5;
  return (x_px) => Math.exp(-0.5 * (((x_px - middle) * factor) / expected.spread_px) ** 2);
}
