import type { LampMap } from './bar.ts';
import type { BenchPlan } from './bench.ts';
import { boardPaint, graduatedCard } from './board.ts';
import { type Camera, cameraOf, project } from './camera.ts';
import { cables, coilSolids, meterSolid } from './furniture.ts';
import { blurLight, blurReach } from './lens.ts';
import { type Lighting, lightingOf } from './light.ts';
import { METER, reading } from './meter.ts';
import { randomFrom } from './random.ts';
import { blankEncoded, type Encoded, encodeInto } from './sensor.ts';
import { type Box, blankStill, drawStill, type Still, type StillScene } from './still.ts';

/** The bench set up before the camera: everything that doesn't move, drawn once. */
export interface Studio {
  readonly camera: Camera;
  readonly lighting: Lighting;
  readonly lampMap: LampMap;
  readonly still: Still;
  /** The still after the lens, encoded. */
  readonly encoded: Encoded;
  /** Redraws the meter so that it shows a current; nothing without a meter. */
  readonly show: (current_A: number) => void;
}

function mapLamp(lighting: Lighting, half_m: number, height_m: number, seed: number): LampMap {
  const side = 48;
  const random = randomFrom(seed);
  const share = new Float32Array(side * side);
  for (let j = 0; j < side; j++) {
    for (let i = 0; i < side; i++) {
      const x = (2 * (i / (side - 1)) - 1) * half_m;
      const y = (2 * (j / (side - 1)) - 1) * half_m;
      let seen = 0;
      for (let k = 0; k < 160; k++) seen += lighting.visible(x, y, height_m, random);
      share[j * side + i] = seen / 160;
    }
  }
  return { half_m, side, share };
}

/** Sets up and draws the still part of a bench. */
export function setUpStudio(plan: BenchPlan): Studio {
  const { look, apparatus, camera: cameraPlan, seed } = plan;
  const { width_px: w, height_px: h, blur_px } = cameraPlan;
  const camera = cameraOf(cameraPlan, apparatus.length_m, look.bar.height_m);
  let board = boardPaint(look.board, seed + 2);
  if (look.meter !== null && look.winding !== null) board = cables(board, look.meter, apparatus);
  if (look.cardRadius_m > 0) board = graduatedCard(board, look.cardRadius_m, 0, seed + 3);
  const coils = coilSolids(apparatus, look, seed);
  const solidsShowing = (text: string) => (look.meter === null ? coils : [...coils, meterSolid(look.meter, text)]);
  const lighting = lightingOf(look.lamp, solidsShowing(reading(0)));
  const scene = (text: string): StillScene => ({
    board,
    solids: solidsShowing(text),
    lighting,
    wall_m: cameraPlan.elevation_deg < 45 ? 0.5 : null,
  });
  const still = blankStill(w, h);
  drawStill(still, scene(reading(0)), camera, { x0: 0, y0: 0, x1: w, y1: h }, seed + 4);
  const encoded = blankEncoded(w, h);
  encodeInto(encoded, blurLight(still.light, w, h, blur_px), 0, w, 0, 0, w, h);

  const reach = blurReach(blur_px);
  const display = displayBox(plan, camera, reach + 2);
  const drawn = new Map<string, Float32Array>();
  let shown = reading(0);
  const show = (current_A: number): void => {
    const text = reading(current_A);
    if (display === null || text === shown) return;
    shown = text;
    const { x0, y0, x1, y1 } = display;
    const width = x1 - x0;
    const known = drawn.get(text);
    if (known === undefined) {
      drawStill(still, scene(text), camera, display, seed + 5);
      const copy = new Float32Array(3 * width * (y1 - y0));
      for (let y = y0; y < y1; y++)
        copy.set(still.light.subarray(3 * (y * w + x0), 3 * (y * w + x1)), 3 * (y - y0) * width);
      drawn.set(text, copy);
    } else {
      for (let y = y0; y < y1; y++)
        still.light.set(known.subarray(3 * (y - y0) * width, 3 * (y - y0 + 1) * width), 3 * (y * w + x0));
    }
    const piece = new Float32Array(3 * width * (y1 - y0));
    for (let y = y0; y < y1; y++)
      piece.set(still.light.subarray(3 * (y * w + x0), 3 * (y * w + x1)), 3 * (y - y0) * width);
    const blurred = blurLight(piece, width, y1 - y0, blur_px);
    const skip = reach + (reach % 2);
    encodeInto(
      encoded,
      blurred,
      skip * width + skip,
      width,
      x0 + skip,
      y0 + skip,
      width - 2 * skip,
      y1 - y0 - 2 * skip,
    );
  };
  return {
    camera,
    lighting,
    lampMap: mapLamp(lighting, 0.75 * apparatus.length_m, look.bar.height_m, seed + 6),
    still,
    encoded,
    show,
  };
}

/** The part of the picture that the meter's display takes, grown by a margin, even, and cut to the frame; null where it is not seen. */
function displayBox(plan: BenchPlan, camera: Camera, margin: number): Box | null {
  const place = plan.look.meter;
  if (place === null) return null;
  const turn = (place.turn_deg * Math.PI) / 180;
  const corners = [-1, 1].flatMap((i) =>
    [-1, 1].map((j) => {
      const x = (i * METER.displayWidth_m) / 2;
      const y = METER.displayY_m + (j * METER.displayDepth_m) / 2;
      return project(camera, [
        place.x_m + Math.cos(turn) * x - Math.sin(turn) * y,
        place.y_m + Math.sin(turn) * x + Math.cos(turn) * y,
        METER.height_m,
      ]);
    }),
  );
  const even = (value: number): number => value - (((value % 2) + 2) % 2);
  const xs = corners.map((corner) => corner[0]);
  const ys = corners.map((corner) => corner[1]);
  const box = {
    x0: even(Math.max(0, Math.floor(Math.min(...xs)) - margin)),
    y0: even(Math.max(0, Math.floor(Math.min(...ys)) - margin)),
    x1: even(Math.min(plan.camera.width_px, Math.ceil(Math.max(...xs)) + margin)),
    y1: even(Math.min(plan.camera.height_px, Math.ceil(Math.max(...ys)) + margin)),
  };
  return box.x1 - box.x0 < 4 * margin || box.y1 - box.y0 < 4 * margin ? null : box;
}
