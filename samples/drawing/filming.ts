import { type BarBody, barBox, drawBar, drawBarShadow, MOMENTS, type Patch } from './bar.ts';
import type { BenchPlan } from './bench.ts';
import { type Camera, project, warpAt, warped } from './camera.ts';
import { drawFibre, SHOWN_m } from './fibre.ts';
import { drawHand, handBox, layHand } from './hand.ts';
import { blurLight, blurReach, warpStill } from './lens.ts';
import { type Place, placeAt } from './motion.ts';
import { randomFrom } from './random.ts';
import { lineDelay_s, lineReader, type Run } from './run.ts';
import type { Schedule } from './schedule.ts';
import { blankEncoded, type Encoded, encodeInto, noiseTable, takeFrame } from './sensor.ts';
import type { Box, Still } from './still.ts';
import { setUpStudio } from './studio.ts';

/** The planes of one frame as stored (yuv420p, 8 or 10 bits), rotation for display not yet applied. */
export type Planes = readonly (Uint8ClampedArray | Uint16Array)[];

const HAND_TRAVEL = 0.2;
const HAND_DIRECTION_rad = 0.95;

/** Whole pixel at which the tip of the hand's strip is at a moment, or null when the hand is away. */
function tipAt(
  plan: BenchPlan,
  schedule: Schedule,
  camera: Camera,
  place: Place,
  time_s: number,
): readonly [number, number] | null {
  if (!plan.look.hand) return null;
  const travel = HAND_TRAVEL * plan.gap_s;
  for (const step of schedule.steps) {
    for (const contact of step.contacts) {
      if (time_s < contact.start_s - travel || time_s > contact.end_s + travel) continue;
      const here = Math.min(
        1,
        (time_s - contact.start_s + travel) / travel,
        (contact.end_s + travel - time_s) / travel,
      );
      const away = (1 - here) ** 2 * 0.85 * Math.hypot(plan.camera.width_px, plan.camera.height_px);
      const half = 0.46 * plan.apparatus.length_m;
      const ends = [-1, 1].map((end) =>
        project(camera, [
          place.along_m + end * half * Math.cos(place.angle_rad),
          place.across_m + end * half * Math.sin(place.angle_rad),
          plan.look.bar.height_m,
        ]),
      );
      const [cos, sin] = [Math.cos(HAND_DIRECTION_rad), Math.sin(HAND_DIRECTION_rad)];
      const reach = (end: readonly [number, number]): number => cos * end[0] + sin * end[1];
      const [x, y] = reach(ends[0]!) > reach(ends[1]!) ? ends[0]! : ends[1]!;
      return [Math.round(x + away * cos - 4), Math.round(y + away * sin + 2)];
    }
  }
  return null;
}

const evenBox = (box: Box, width: number, height: number): Box => ({
  x0: 2 * Math.floor(Math.max(0, box.x0) / 2),
  y0: 2 * Math.floor(Math.max(0, box.y0) / 2),
  x1: Math.min(width, 2 * Math.ceil(box.x1 / 2)),
  y1: Math.min(height, 2 * Math.ceil(box.y1 / 2)),
});

function cut(still: Still, box: Box): Patch {
  const width = box.x1 - box.x0;
  const light = new Float32Array(3 * width * (box.y1 - box.y0));
  for (let y = box.y0; y < box.y1; y++) {
    light.set(
      still.light.subarray(3 * (y * still.width_px + box.x0), 3 * (y * still.width_px + box.x1)),
      3 * (y - box.y0) * width,
    );
  }
  return { box, light };
}

function passingGain(plan: BenchPlan, time_s: number): Float32Array | null {
  const depth = plan.look.passingShadow;
  if (depth === 0) return null;
  const w = plan.camera.width_px;
  const middle = (((time_s / 11) % 1) * 1.8 - 0.4) * w;
  const width = 0.16 * w;
  return Float32Array.from(
    { length: w },
    (_, x) => (1 - depth * Math.exp(-(((x - middle) / width) ** 2))) ** (1 / 2.2),
  );
}

function turned(planes: Planes, plan: BenchPlan): Planes {
  const { rotation_deg } = plan.file;
  if (rotation_deg === 0) return planes;
  return planes.map((source, index) => {
    const w = plan.camera.width_px / (index === 0 ? 1 : 2);
    const h = plan.camera.height_px / (index === 0 ? 1 : 2);
    const out = source.slice();
    const storedWidth = rotation_deg === 180 ? w : h;
    for (let y = 0; y < h; y++) {
      for (let x = 0; x < w; x++) {
        const sx = rotation_deg === 180 ? w - 1 - x : rotation_deg === 90 ? y : h - 1 - y;
        const sy = rotation_deg === 180 ? h - 1 - y : rotation_deg === 90 ? w - 1 - x : x;
        out[sy * storedWidth + sx] = source[y * w + x]!;
      }
    }
    return out;
  });
}

/** What a frame is drawn without, for checks: everything is there by default. */
export interface FilmOptions {
  /** Frame numbers to draw, ascending; all where left out. */
  readonly frames?: readonly number[];
  /** Leaves out noise, gain changes and flicker. */
  readonly clean?: boolean;
}

/** Films a run: yields the planes of each frame in turn. */
export function* film(
  run: Run,
  options: FilmOptions = {},
): Generator<{ readonly frame: number; readonly planes: Planes }> {
  const { plan, schedule, motion, times } = run;
  const { look, apparatus, sensor, camera: cameraPlan } = plan;
  const { width_px: w, height_px: h, blur_px } = cameraPlan;
  const studio = setUpStudio(plan);
  const { lines, lineOf } = lineReader(plan);
  const body: BarBody = { look: look.bar, halfLength_m: apparatus.length_m / 2, radius_m: apparatus.diameter_m / 2 };
  const table = noiseTable(randomFrom(plan.seed + 7));
  const work: Encoded = blankEncoded(w, h);
  const margin = blurReach(blur_px) + 2;
  const lampLight = look.lamp.strength;
  const ambientShare = look.lamp.ambient[1] / (look.lamp.ambient[1] + lampLight * look.lamp.colour[1]);
  const hand = drawHand(HAND_DIRECTION_rad, Math.max(cameraPlan.barLength_px, 0.12 * w), look.lamp.colour, lampLight);
  let currentIndex = 0;
  const frames = options.frames ?? Array.from(times.ticks.keys());
  for (const frame of frames) {
    const time = times.time_s[frame]!;
    while (currentIndex < schedule.currents.length && schedule.currents[currentIndex]!.time_s <= time) {
      studio.show(schedule.currents[currentIndex]!.shown_A);
      currentIndex++;
    }
    const places = new Map<number, Place[]>();
    const placesOfLine = (line: number): Place[] => {
      let known = places.get(line);
      if (known === undefined) {
        const middle = time + lineDelay_s(plan, line, lines);
        known = Array.from({ length: MOMENTS }, (_, k) =>
          placeAt(motion, middle + sensor.exposure_s * ((k + 0.5) / MOMENTS - 0.5)),
        );
        places.set(line, known);
      }
      return known;
    };
    const warp = warpAt(cameraPlan, time);
    const still = warp === null ? studio.still : warpStill(studio.still, warp);
    const camera = warp === null ? studio.camera : warped(studio.camera, warp, w, h);
    if (warp === null) {
      work.y.set(studio.encoded.y);
      work.u.set(studio.encoded.u);
      work.v.set(studio.encoded.v);
    } else {
      encodeInto(work, blurLight(still.light, w, h, blur_px), 0, w, 0, 0, w, h);
    }
    const axisLine = lineOf(Math.round(camera.centreX_px), Math.round(camera.centreY_px));
    const now = placesOfLine(axisLine)[MOMENTS / 2]!;
    const around = [0, axisLine, lines - 1].flatMap((line) => [
      placesOfLine(line)[0]!,
      placesOfLine(line)[MOMENTS - 1]!,
    ]);
    let box = barBox(body, around, camera, look.lamp, look.mirror > 0, margin);
    if (cameraPlan.elevation_deg < 80) {
      // Seen from the side the fibre shows: the box reaches up along it.
      const [fx, fy] = project(camera, [0, 0, look.bar.height_m + SHOWN_m]);
      box = {
        x0: Math.min(box.x0, Math.floor(fx) - 3),
        x1: Math.max(box.x1, Math.ceil(fx) + 4),
        y0: Math.min(box.y0, Math.floor(fy)),
        y1: box.y1,
      };
    }
    const tip = tipAt(plan, schedule, camera, now, time);
    const touched = tip === null ? null : handBox(hand, tip[0], tip[1], w, h);
    if (touched !== null) {
      box = {
        x0: Math.min(box.x0, touched.x0),
        y0: Math.min(box.y0, touched.y0),
        x1: Math.max(box.x1, touched.x1),
        y1: Math.max(box.y1, touched.y1),
      };
    }
    box = evenBox(box, w, h);
    if (box.x1 > box.x0 && box.y1 > box.y0) {
      const patch = cut(still, box);
      drawBarShadow(patch, still, body, now, camera, look.lamp, ambientShare);
      if (look.mirror > 0)
        drawBar(
          patch,
          still,
          body,
          camera,
          studio.lighting,
          studio.lampMap,
          lineOf,
          placesOfLine,
          -1,
          look.mirror,
          frame,
        );
      drawBar(patch, still, body, camera, studio.lighting, studio.lampMap, lineOf, placesOfLine, 1, 1, frame);
      drawFibre(patch, camera, now, look.bar.height_m + body.radius_m, look.lamp.colour);
      if (tip !== null) layHand(patch, hand, tip[0], tip[1]);
      const width = box.x1 - box.x0;
      const height = box.y1 - box.y0;
      const inset = 2 * Math.ceil(blurReach(blur_px) / 2);
      const left = box.x0 === 0 ? 0 : inset;
      const top = box.y0 === 0 ? 0 : inset;
      const right = box.x1 === w ? 0 : inset;
      const bottom = box.y1 === h ? 0 : inset;
      const blurred = blurLight(patch.light, width, height, blur_px);
      encodeInto(
        work,
        blurred,
        top * width + left,
        width,
        box.x0 + left,
        box.y0 + top,
        width - left - right,
        height - top - bottom,
      );
    }
    const planes = takeFrame(
      work,
      takingOf(run, frame, table, options.clean ?? false, lineOf),
      plan.file.codec === 'hevc10',
    );
    yield { frame, planes: turned(planes, plan) };
  }
}

function takingOf(
  run: Run,
  frame: number,
  table: Float32Array,
  clean: boolean,
  lineOf: (x: number, y: number) => number,
) {
  const { plan, times } = run;
  const { sensor, camera, file } = plan;
  const time = times.time_s[frame]!;
  const upright = file.rotation_deg === 0 || file.rotation_deg === 180;
  const drift = clean ? 1 : 1 + sensor.drift * Math.sin((2 * Math.PI * time) / sensor.driftPeriod_s + 0.4);
  const rowGain = Float32Array.from({ length: camera.height_px }, (_, y) => {
    if (clean || sensor.flicker === 0) return drift ** (1 / 2.2);
    const moment = time + (upright ? lineDelay_s(plan, lineOf(0, y), camera.height_px) : 0);
    return (drift * (1 + sensor.flicker * Math.cos(2 * Math.PI * 100 * moment))) ** (1 / 2.2);
  });
  return {
    rowGain,
    columnGain: clean ? null : passingGain(plan, time),
    noise: clean ? 0 : sensor.noise,
    table,
    seed: plan.seed * 7919 + frame,
  };
}
