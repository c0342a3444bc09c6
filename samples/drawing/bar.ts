import type { BarLook, Lamp } from './bench.ts';
import type { Camera } from './camera.ts';
import { project } from './camera.ts';
import type { Lighting } from './light.ts';
import type { Place } from './motion.ts';
import type { Box, Still } from './still.ts';

/** Moments of one exposure at which the bar is drawn. */
export const MOMENTS = 8;
const SAMPLES = 16;

/** The bar as a body to be drawn. */
export interface BarBody {
  readonly look: BarLook;
  readonly halfLength_m: number;
  readonly radius_m: number;
}

/** A part of the picture being worked on: linear light of `box`, red, green, blue a pixel. */
export interface Patch {
  readonly box: Box;
  readonly light: Float32Array;
}

/** Share of the lamp seen at the height of the bar, on a square grid about the fibre. */
export interface LampMap {
  readonly half_m: number;
  readonly side: number;
  readonly share: Float32Array;
}

const DITHER = (() => {
  const values = new Float32Array(8192);
  let state = 12345;
  for (let i = 0; i < values.length; i++) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    values[i] = state / 4294967296;
  }
  return values;
})();
// Which moment each of the 16 places within a pixel is drawn at: each moment twice, far apart.
const MOMENT_OF = [0, 4, 2, 6, 5, 1, 7, 3, 3, 7, 1, 5, 6, 2, 4, 0] as const;

function lampShare(map: LampMap, x: number, y: number): number {
  const u = Math.min(map.side - 1.001, Math.max(0, ((x + map.half_m) / (2 * map.half_m)) * (map.side - 1)));
  const v = Math.min(map.side - 1.001, Math.max(0, ((y + map.half_m) / (2 * map.half_m)) * (map.side - 1)));
  const i = Math.floor(u);
  const j = Math.floor(v);
  const at = j * map.side + i;
  const top = map.share[at]! * (1 - u + i) + map.share[at + 1]! * (u - i);
  const bottom = map.share[at + map.side]! * (1 - u + i) + map.share[at + map.side + 1]! * (u - i);
  return top * (1 - v + j) + bottom * (v - j);
}

/** Smallest box of whole pixels around the bar, its shadow and (with a mirroring board) its mirror image, with a margin. */
export function barBox(
  body: BarBody,
  places: readonly Place[],
  camera: Camera,
  lamp: Lamp,
  mirror: boolean,
  margin: number,
): Box {
  let x0 = 1e9;
  let y0 = 1e9;
  let x1 = -1e9;
  let y1 = -1e9;
  const h = body.look.height_m;
  const grow = body.radius_m * 1.3;
  const add = (x: number, y: number, z: number, extra: number): void => {
    for (const ex of [-extra, extra]) {
      for (const ey of [-extra, extra]) {
        const [px, py] = project(camera, [x + ex, y + ey, z]);
        x0 = Math.min(x0, px);
        x1 = Math.max(x1, px);
        y0 = Math.min(y0, py);
        y1 = Math.max(y1, py);
      }
    }
  };
  for (const place of places) {
    for (const end of [-1, 1]) {
      const x = place.along_m + end * body.halfLength_m * Math.cos(place.angle_rad);
      const y = place.across_m + end * body.halfLength_m * Math.sin(place.angle_rad);
      for (const z of [h - body.radius_m, h + body.radius_m]) add(x, y, z, grow);
      if (mirror) for (const z of [-h - body.radius_m, -h + body.radius_m]) add(x, y, z, grow);
      const part = h / (lamp.place_m[2] - h);
      add(x - part * (lamp.place_m[0] - x), y - part * (lamp.place_m[1] - y), 0, grow + 2 * part * lamp.size_m);
    }
  }
  return {
    x0: Math.floor(x0) - margin,
    y0: Math.floor(y0) - margin,
    x1: Math.ceil(x1) + margin + 1,
    y1: Math.ceil(y1) + margin + 1,
  };
}

/** Smooth step from 1 inside to 0 outside over a width. */
function soft(inside: number, width: number): number {
  const s = inside / width + 0.5;
  return s <= 0 ? 0 : s >= 1 ? 1 : s * s * (3 - 2 * s);
}

/** Darkens the board below the bar: the soft shadow that the lamp throws, and a little less light from all around. */
export function drawBarShadow(
  patch: Patch,
  still: Still,
  body: BarBody,
  place: Place,
  camera: Camera,
  lamp: Lamp,
  ambientShare: number,
): void {
  const { box } = patch;
  const h = body.look.height_m;
  const part = h / lamp.place_m[2];
  const width = 2 * lamp.size_m * (h / (lamp.place_m[2] - h)) + 0.0006;
  const cos = Math.cos(place.angle_rad);
  const sin = Math.sin(place.angle_rad);
  const { right, down, forward } = camera;
  const [ox, oy, oz] = camera.place_m;
  for (let y = Math.max(0, box.y0); y < Math.min(still.height_px, box.y1); y++) {
    const b = (y - camera.centreY_px) / camera.focal_px;
    for (let x = Math.max(0, box.x0); x < Math.min(still.width_px, box.x1); x++) {
      const pixel = y * still.width_px + x;
      if (still.onBoard[pixel] === 0) continue;
      const a = (x - camera.centreX_px) / camera.focal_px;
      const t = -oz / (forward[2] + a * right[2] + b * down[2]);
      const px = ox + t * (forward[0] + a * right[0] + b * down[0]);
      const py = oy + t * (forward[1] + a * right[1] + b * down[1]);
      const qx = px + part * (lamp.place_m[0] - px) - place.along_m;
      const qy = py + part * (lamp.place_m[1] - py) - place.across_m;
      const u = Math.abs(cos * qx + sin * qy);
      const v = Math.abs(-sin * qx + cos * qy);
      const lamped = soft(body.halfLength_m - u, width) * soft(body.radius_m - v, width) * (1 - ambientShare);
      const nearX = px - place.along_m;
      const nearY = py - place.across_m;
      const nu = Math.abs(cos * nearX + sin * nearY);
      const nv = Math.abs(-sin * nearX + cos * nearY);
      const around = 0.45 * ambientShare * soft(body.halfLength_m - nu, 3 * h) * soft(body.radius_m - nv, 3 * h);
      const keep = 1 - lamped - around;
      if (keep === 1) continue;
      const at = 3 * ((y - box.y0) * (box.x1 - box.x0) + x - box.x0);
      for (let i = 0; i < 3; i++) patch.light[at + i]! *= keep;
    }
  }
}

/**
 * Draws the bar itself by following rays: 16 jittered rays a pixel, spread over the moments of the exposure of its line.
 * `placesOfLine(line)` gives the bar's place at each of the `MOMENTS` of a line of the stored picture.
 * @param flip -1 draws the mirror image below the board instead, with weight `weight`.
 */
export function drawBar(
  patch: Patch,
  still: Still,
  body: BarBody,
  camera: Camera,
  lighting: Lighting,
  lampMap: LampMap,
  lineOf: (x: number, y: number) => number,
  placesOfLine: (line: number) => readonly Place[],
  flip: 1 | -1,
  weight: number,
  frame: number,
): void {
  const { box } = patch;
  const { look, halfLength_m: half, radius_m: r } = body;
  const z0 = flip * look.height_m;
  const light = new Float64Array(4);
  const { right, down, forward, focal_px } = camera;
  const [ox, oy, oz] = camera.place_m;
  const mid = placesOfLine(lineOf((box.x0 + box.x1) >> 1, (box.y0 + box.y1) >> 1))[MOMENTS / 2]!;
  const ends = [-1, 1].map((end) =>
    project(camera, [
      mid.along_m + end * half * Math.cos(mid.angle_rad),
      mid.across_m + end * half * Math.sin(mid.angle_rad),
      z0,
    ]),
  );
  const [ax, ay] = ends[0]!;
  const [bx, by] = ends[1]!;
  const ex = bx - ax;
  const ey = by - ay;
  const e2 = ex * ex + ey * ey || 1;
  const depth0 = (mid.along_m - ox) * forward[0] + (mid.across_m - oy) * forward[1] + (z0 - oz) * forward[2];
  const reach = (1.5 * r * focal_px) / (depth0 - half) + 4 + 0.04 * Math.sqrt(e2);
  for (let y = Math.max(0, box.y0); y < Math.min(still.height_px, box.y1); y++) {
    for (let x = Math.max(0, box.x0); x < Math.min(still.width_px, box.x1); x++) {
      const along = Math.min(1, Math.max(0, ((x - ax) * ex + (y - ay) * ey) / e2));
      if ((x - ax - along * ex) ** 2 + (y - ay - along * ey) ** 2 > reach * reach) continue;
      const pixel = y * still.width_px + x;
      if (flip === -1 && still.onBoard[pixel] === 0) continue;
      const places = placesOfLine(lineOf(x, y));
      const behind = still.depth[pixel]!;
      let red = 0;
      let green = 0;
      let blue = 0;
      let covered = 0;
      let dither = (Math.imul(pixel, 2654435761) + Math.imul(frame, 40503)) & 8191;
      for (let s = 0; s < SAMPLES; s++) {
        const place = places[MOMENT_OF[s]!]!;
        const cos = Math.cos(place.angle_rad);
        const sin = Math.sin(place.angle_rad);
        const sx = ((s & 3) + DITHER[dither]!) / 4 - 0.5;
        const sy = ((s >> 2) + DITHER[dither ^ 4096]!) / 4 - 0.5;
        dither = (dither + 1) & 8191;
        const a = (x + sx - camera.centreX_px) / focal_px;
        const b = (y + sy - camera.centreY_px) / focal_px;
        const dx = forward[0] + a * right[0] + b * down[0];
        const dy = forward[1] + a * right[1] + b * down[1];
        const dz = forward[2] + a * right[2] + b * down[2];
        // The ray in the bar's own frame: u along it, v across, w up.
        const px = ox - place.along_m;
        const py = oy - place.across_m;
        const ou = cos * px + sin * py;
        const ov = -sin * px + cos * py;
        const ow = oz - z0;
        const du = cos * dx + sin * dy;
        const dv = -sin * dx + cos * dy;
        let distance = -1;
        let nu = 0;
        let nv = 0;
        let nw = 0;
        if (look.shape === 'cylinder') {
          const qa = dv * dv + dz * dz;
          const qb = ov * dv + ow * dz;
          const root = qb * qb - qa * (ov * ov + ow * ow - r * r);
          if (root > 0) {
            const t = (-qb - Math.sqrt(root)) / qa;
            if (Math.abs(ou + t * du) <= half) {
              distance = t;
              nv = (ov + t * dv) / r;
              nw = (ow + t * dz) / r;
            }
          }
          if (distance < 0 && Math.abs(du) > 1e-12) {
            const side = -Math.sign(du);
            const t = (side * half - ou) / du;
            if ((ov + t * dv) ** 2 + (ow + t * dz) ** 2 <= r * r) {
              distance = t;
              nu = side;
            }
          }
        } else {
          let enter = 0;
          let leave = 1e9;
          const tu0 = (-Math.sign(du || 1) * half - ou) / (du || 1e-12);
          const tu1 = (Math.sign(du || 1) * half - ou) / (du || 1e-12);
          const tv0 = (-Math.sign(dv || 1) * r - ov) / (dv || 1e-12);
          const tv1 = (Math.sign(dv || 1) * r - ov) / (dv || 1e-12);
          const tw0 = (-Math.sign(dz || 1) * r - ow) / (dz || 1e-12);
          const tw1 = (Math.sign(dz || 1) * r - ow) / (dz || 1e-12);
          enter = Math.max(tu0, tv0, tw0);
          leave = Math.min(tu1, tv1, tw1);
          if (enter > 0 && enter <= leave) {
            distance = enter;
            if (enter === tu0) nu = -Math.sign(du);
            else if (enter === tv0) nv = -Math.sign(dv);
            else nw = -Math.sign(dz);
          }
        }
        if (distance <= 0 || (flip === 1 && distance > behind)) continue;
        const u = ou + distance * du;
        const wx = ox + distance * dx;
        const wy = oy + distance * dy;
        const wz = flip * (oz + distance * dz);
        const nx = cos * nu - sin * nv;
        const ny = sin * nu + cos * nv;
        const length = Math.sqrt(dx * dx + dy * dy + dz * dz);
        lighting.at(
          wx,
          wy,
          wz,
          nx,
          ny,
          flip * nw,
          -dx / length,
          -dy / length,
          (-flip * dz) / length,
          lampShare(lampMap, wx, wy),
          light,
        );
        const banded = Math.abs(u) < look.band_m;
        const colour = banded ? look.bandColour : u > 0 ? look.ends[0] : look.ends[1];
        const shine = (banded ? 0.8 : look.gloss) * light[3]!;
        red += colour[0] * light[0]! + shine;
        green += colour[1] * light[1]! + shine;
        blue += colour[2] * light[2]! + shine;
        covered++;
      }
      if (covered === 0) continue;
      const at = 3 * ((y - box.y0) * (box.x1 - box.x0) + x - box.x0);
      const keep = 1 - (weight * covered) / SAMPLES;
      patch.light[at] = patch.light[at]! * keep + (weight * red) / SAMPLES;
      patch.light[at + 1] = patch.light[at + 1]! * keep + (weight * green) / SAMPLES;
      patch.light[at + 2] = patch.light[at + 2]! * keep + (weight * blue) / SAMPLES;
    }
  }
}
