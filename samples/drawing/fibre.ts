import type { Patch } from './bar.ts';
import type { Colour } from './bench.ts';
import { type Camera, project } from './camera.ts';
import type { Place } from './motion.ts';

const WIDTH_m = 0.00016;
const KNOT_m = 0.0011;
/** How far above the bar the fibre is drawn. */
export const SHOWN_m = 0.3;

/** Draws the knot on the stirrup and the fibre that rises from it; seen from straight above only the knot shows. */
export function drawFibre(patch: Patch, camera: Camera, place: Place, from_m: number, lampColour: Colour): void {
  const { box } = patch;
  const [x0, y0] = project(camera, [place.along_m, place.across_m, from_m]);
  const [x1, y1] = project(camera, [0, 0, from_m + SHOWN_m]);
  const dx = x1 - x0;
  const dy = y1 - y0;
  const length2 = dx * dx + dy * dy;
  const scale =
    camera.focal_px /
    ((place.along_m - camera.place_m[0]) * camera.forward[0] +
      (place.across_m - camera.place_m[1]) * camera.forward[1] +
      (from_m - camera.place_m[2]) * camera.forward[2]);
  const width = WIDTH_m * scale;
  const knot = KNOT_m * scale;
  const shines = length2 > 100;
  for (let y = box.y0; y < box.y1; y++) {
    for (let x = box.x0; x < box.x1; x++) {
      const fromKnot = Math.hypot(x - x0, y - y0);
      let share = Math.min(1, Math.max(0, knot + 0.5 - fromKnot));
      if (shines && y <= Math.max(y0, y1)) {
        const t = ((x - x0) * dx + (y - y0) * dy) / length2;
        const off = Math.abs((x - x0) * dy - (y - y0) * dx) / Math.sqrt(length2);
        if (t > 0 && t < 1) share = Math.max(share, Math.min(1, width) * Math.min(1, Math.max(0, 1 - off)));
      }
      if (share === 0) continue;
      const at = 3 * ((y - box.y0) * (box.x1 - box.x0) + x - box.x0);
      for (let i = 0; i < 3; i++)
        patch.light[at + i] = patch.light[at + i]! * (1 - share) + share * 0.1 * lampColour[i]!;
    }
  }
}
