import type { Patch } from './bar.ts';
import type { Colour } from './bench.ts';
import type { Box } from './still.ts';

/** A rounded stroke of the hand: from one point to another with a radius at each, in units of the hand from the tip of the strip. */
interface Limb {
  readonly from: readonly [number, number];
  readonly to: readonly [number, number];
  readonly radius: readonly [number, number];
  readonly colour: Colour;
}

const SKIN: Colour = [0.56, 0.3, 0.2];
const NAIL: Colour = [0.66, 0.42, 0.33];
const SLEEVE: Colour = [0.035, 0.06, 0.11];

// The hand lies along +x of its own frame: strip from the origin, then finger tips, palm, wrist and sleeve.
const LIMBS: readonly Limb[] = [
  { from: [1.95, 0.1], to: [3.9, 0.35], radius: [0.3, 0.4], colour: SKIN },
  { from: [2.7, 0.2], to: [5.5, 0.6], radius: [0.46, 0.62], colour: SLEEVE },
  { from: [1.28, -0.2], to: [1.95, -0.16], radius: [0.125, 0.18], colour: SKIN },
  { from: [1.36, 0.36], to: [1.95, 0.3], radius: [0.115, 0.17], colour: SKIN },
  { from: [0.86, 0.06], to: [1.85, 0.12], radius: [0.12, 0.2], colour: SKIN },
  { from: [0.92, -0.09], to: [1.5, -0.16], radius: [0.115, 0.16], colour: SKIN },
  { from: [0.845, -0.085], to: [0.88, -0.09], radius: [0.06, 0.065], colour: NAIL },
];
const STRIP = { length: 1.15, halfWidth: 0.085, colour: [0.8, 0.79, 0.74] as Colour };
const SHADOW = 0.16;

/** A hand with a paper strip, drawn once: what it adds (three values a pixel), how much of what is behind still shows, and its box about the tip. */
export interface HandPicture {
  readonly box: Box;
  readonly light: Float32Array;
  readonly keep: Float32Array;
}

/** Signed depth inside a limb (positive inside) and its radius there. */
function inside(limb: Limb, x: number, y: number): readonly [number, number] {
  const dx = limb.to[0] - limb.from[0];
  const dy = limb.to[1] - limb.from[1];
  const t = Math.min(1, Math.max(0, ((x - limb.from[0]) * dx + (y - limb.from[1]) * dy) / (dx * dx + dy * dy)));
  const ex = x - limb.from[0] - t * dx;
  const ey = y - limb.from[1] - t * dy;
  const radius = limb.radius[0] + t * (limb.radius[1] - limb.radius[0]);
  return [radius - Math.hypot(ex, ey), radius];
}

/**
 * Draws a hand whose strip has its tip at the origin and whose arm lies in `direction_rad` (y down), `unit_px` being its unit:
 * strip and limbs shaded as round bodies, with a soft shadow beside them.
 */
export function drawHand(direction_rad: number, unit_px: number, lampColour: Colour, strength: number): HandPicture {
  const c = Math.cos(direction_rad);
  const s = Math.sin(direction_rad);
  const corners = [
    [-0.3, -1.1],
    [-0.3, 1.5],
    [6.3, -1.1],
    [6.3, 1.5],
  ] as const;
  const xs = corners.map(([x, y]) => unit_px * (c * x - s * y));
  const ys = corners.map(([x, y]) => unit_px * (s * x + c * y));
  const box = {
    x0: Math.floor(Math.min(...xs)),
    x1: Math.ceil(Math.max(...xs)),
    y0: Math.floor(Math.min(...ys)),
    y1: Math.ceil(Math.max(...ys)),
  };
  const width = box.x1 - box.x0;
  const light = new Float32Array(3 * width * (box.y1 - box.y0));
  const keep = new Float32Array(width * (box.y1 - box.y0)).fill(1);
  const pixel = 1 / unit_px;
  for (let y = box.y0; y < box.y1; y++) {
    for (let x = box.x0; x < box.x1; x++) {
      const hx = (c * x + s * y) / unit_px;
      const hy = (-s * x + c * y) / unit_px;
      if (hx < -0.4 || hx > 6.3 || hy < -1.1 || hy > 1.5) continue;
      const at = (y - box.y0) * width + x - box.x0;
      let dark = 0;
      for (const limb of LIMBS)
        dark = Math.max(dark, Math.min(1, Math.max(0, (inside(limb, hx - 0.1, hy - 0.14)[0] + SHADOW) / (2 * SHADOW))));
      keep[at] = 1 - 0.6 * dark * dark * (3 - 2 * dark);
      const lay = (share: number, colour: Colour, bright: number): void => {
        keep[at]! *= 1 - share;
        for (let i = 0; i < 3; i++) {
          light[3 * at + i] =
            light[3 * at + i]! * (1 - share) + share * colour[i]! * bright * (0.25 + lampColour[i]!) * strength;
        }
      };
      const across = STRIP.halfWidth - Math.abs(hy + 0.02 * hx);
      const strip = Math.min(across, hx, STRIP.length - hx) / pixel + 0.5;
      if (strip > 0) lay(Math.min(1, strip), STRIP.colour, 0.86 + 0.1 * (hy / STRIP.halfWidth));
      for (const limb of LIMBS) {
        const [deep, radius] = inside(limb, hx, hy);
        const share = deep / pixel + 0.5;
        if (share <= 0) continue;
        const round = Math.min(1, Math.max(0, deep / radius));
        lay(Math.min(1, share), limb.colour, 0.35 + 0.5 * Math.sqrt(1 - (1 - round) * (1 - round)));
      }
    }
  }
  return { box, light, keep };
}

/** The part of a frame that a hand with its tip at a whole pixel touches; null where it is outside. */
export function handBox(
  hand: HandPicture,
  tipX: number,
  tipY: number,
  width_px: number,
  height_px: number,
): Box | null {
  const box = {
    x0: Math.max(0, hand.box.x0 + tipX),
    x1: Math.min(width_px, hand.box.x1 + tipX),
    y0: Math.max(0, hand.box.y0 + tipY),
    y1: Math.min(height_px, hand.box.y1 + tipY),
  };
  return box.x0 >= box.x1 || box.y0 >= box.y1 ? null : box;
}

/** Lays a hand with its tip at a whole pixel over a patch. */
export function layHand(patch: Patch, hand: HandPicture, tipX: number, tipY: number): void {
  const { box } = patch;
  const width = hand.box.x1 - hand.box.x0;
  for (let y = Math.max(box.y0, hand.box.y0 + tipY); y < Math.min(box.y1, hand.box.y1 + tipY); y++) {
    for (let x = Math.max(box.x0, hand.box.x0 + tipX); x < Math.min(box.x1, hand.box.x1 + tipX); x++) {
      const from = (y - tipY - hand.box.y0) * width + x - tipX - hand.box.x0;
      const at = 3 * ((y - box.y0) * (box.x1 - box.x0) + x - box.x0);
      for (let i = 0; i < 3; i++)
        patch.light[at + i] = patch.light[at + i]! * hand.keep[from]! + hand.light[3 * from + i]!;
    }
  }
}
