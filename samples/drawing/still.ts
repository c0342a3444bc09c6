import type { Paint } from './board.ts';
import type { Camera } from './camera.ts';
import { rayThrough } from './camera.ts';
import type { Lighting } from './light.ts';
import { layeredNoise, randomFrom } from './random.ts';
import { emptyHit, type Solid } from './solids.ts';

/** The bench without bar and hand, before the lens: linear light row by row (red, green, blue a pixel). */
export interface Still {
  readonly width_px: number;
  readonly height_px: number;
  readonly light: Float32Array;
  /** 1 where the middle of the pixel shows the board. */
  readonly onBoard: Uint8Array;
  /** Distance along the line of sight (in units of depth) of what the middle of the pixel shows. */
  readonly depth: Float32Array;
}

/** What is drawn. `wall_m` is how far behind the fibre a wall stands, null for none (seen from above). */
export interface StillScene {
  readonly board: Paint;
  readonly solids: readonly Solid[];
  readonly lighting: Lighting;
  readonly wall_m: number | null;
}

/** A part of the picture, whole pixels: x0 <= x < x1, y0 <= y < y1. */
export interface Box {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
}

/** Samples a side for each pixel. */
const SIDE = 4;
const FEW = 10;
const MANY = 90;

/** An empty still of a size. */
export function blankStill(width_px: number, height_px: number): Still {
  const pixels = width_px * height_px;
  return {
    width_px,
    height_px,
    light: new Float32Array(3 * pixels),
    onBoard: new Uint8Array(pixels),
    depth: new Float32Array(pixels),
  };
}

/** Draws the part `box` of a still by following rays to the board, the solids and the wall, 16 jittered rays a pixel. */
export function drawStill(still: Still, scene: StillScene, camera: Camera, box: Box, seed: number): void {
  const { board, solids, lighting, wall_m } = scene;
  const random = randomFrom(seed);
  const ray = new Float64Array(3);
  const colour = new Float64Array(3);
  const light = new Float64Array(4);
  const hit = emptyHit();
  const best = emptyHit();
  const [ox, oy, oz] = camera.place_m;
  const flat = Math.hypot(camera.forward[0], camera.forward[1]) || 1;
  const ahead = [camera.forward[0] / flat, camera.forward[1] / flat] as const;

  const lampSeen = (x: number, y: number, z: number, rays: number): number => {
    let seen = 0;
    for (let k = 0; k < rays; k++) seen += lighting.visible(x, y, z, random);
    return seen;
  };
  // Share of the lamp that the middle of a pixel sees, with more rays where some are stopped; the board's shadows are soft anyway.
  let pixelLit = 1;
  const lookUp = (x: number, y: number): number => {
    const first = lampSeen(x, y, 1e-4, FEW);
    return first === 0 || first === FEW ? first / FEW : (first + lampSeen(x, y, 1e-4, MANY)) / (FEW + MANY);
  };

  /** Follows one ray: fills `colour` with the light seen, returns depth, negative where it isn't the board. */
  const follow = (x_px: number, y_px: number): number => {
    rayThrough(camera, x_px, y_px, ray);
    const [dx, dy, dz] = ray as unknown as [number, number, number];
    const length = Math.hypot(dx, dy, dz);
    let distance = dz < -1e-9 ? -oz / dz : 1e3;
    let solid: Solid | null = null;
    for (const candidate of solids) {
      if (candidate.meet(ox, oy, oz, dx, dy, dz, hit) && hit.distance < distance) {
        distance = hit.distance;
        Object.assign(best, hit);
        solid = candidate;
      }
    }
    if (solid === null && wall_m !== null) {
      const slope = dx * ahead[0] + dy * ahead[1];
      const toWall = (wall_m - (ox * ahead[0] + oy * ahead[1])) / slope;
      if (slope > 0 && toWall < distance) {
        const along = (oy + toWall * dy) * ahead[0] - (ox + toWall * dx) * ahead[1];
        const up = oz + toWall * dz;
        const shade = 0.75 + 0.5 * (layeredNoise(along * 9, up * 9, seed + 31, 4) - 0.5);
        const place = along / 0.11;
        const plank = Math.abs(place - Math.floor(place) - 0.5) > 0.49 ? 0.5 : 1;
        lighting.at(
          ahead[0] * wall_m,
          ahead[1] * wall_m,
          up,
          -ahead[0],
          -ahead[1],
          0,
          -ahead[0],
          -ahead[1],
          0,
          1,
          light,
        );
        for (let i = 0; i < 3; i++) colour[i] = light[i]! * shade * plank * (i === 0 ? 0.32 : i === 1 ? 0.27 : 0.22);
        return -toWall;
      }
    }
    const x = ox + distance * dx;
    const y = oy + distance * dy;
    const z = oz + distance * dz;
    if (solid === null) {
      board(x, y, colour);
      lighting.at(x, y, 0, 0, 0, 1, -dx / length, -dy / length, -dz / length, pixelLit, light);
      for (let i = 0; i < 3; i++) colour[i]! *= light[i]!;
      return distance;
    }
    solid.paint(x, y, z, best, colour);
    const { nx, ny, nz } = best;
    const lit = lighting.visible(x + 2e-5 * nx, y + 2e-5 * ny, z + 2e-5 * nz, random);
    lighting.at(x, y, z, nx, ny, nz, -dx / length, -dy / length, -dz / length, lit, light);
    for (let i = 0; i < 3; i++) colour[i] = colour[i]! * light[i]! + 0.5 * solid.gloss * light[3]!;
    return -distance;
  };

  for (let y = box.y0; y < box.y1; y++) {
    for (let x = box.x0; x < box.x1; x++) {
      rayThrough(camera, x, y, ray);
      if (ray[2]! < -1e-9) {
        const t = -oz / ray[2]!;
        if (t < 3) pixelLit = lookUp(ox + t * ray[0]!, oy + t * ray[1]!);
      }
      let red = 0;
      let green = 0;
      let blue = 0;
      for (let s = 0; s < SIDE * SIDE; s++) {
        const sx = ((s % SIDE) + random.uniform()) / SIDE - 0.5;
        const sy = (Math.floor(s / SIDE) + random.uniform()) / SIDE - 0.5;
        follow(x + sx, y + sy);
        red += colour[0]!;
        green += colour[1]!;
        blue += colour[2]!;
      }
      const pixel = y * still.width_px + x;
      still.light[3 * pixel] = red / (SIDE * SIDE);
      still.light[3 * pixel + 1] = green / (SIDE * SIDE);
      still.light[3 * pixel + 2] = blue / (SIDE * SIDE);
      const depth = follow(x, y);
      still.onBoard[pixel] = depth > 0 ? 1 : 0;
      still.depth[pixel] = Math.abs(depth);
    }
  }
}
