import type { Apparatus, BenchLook, Colour } from './bench.ts';
import type { Paint } from './board.ts';
import { METER, meterPaint } from './meter.ts';
import { layeredNoise, smoothNoise } from './random.ts';
import { meetBox, meetRing, type Solid } from './solids.ts';

const WINDING_WIDTH = 0.016;
const FLANGE = 0.0026;

function plain(colour: Colour, texture: number, seed: number): Solid['paint'] {
  return (x, y, z, _hit, out) => {
    const light = 1 + texture * (layeredNoise(x * 160, (y + z) * 160, seed, 3) - 0.5);
    for (let i = 0; i < 3; i++) out[i] = colour[i]! * light;
  };
}

/** Turns of wire side by side: a bright ridge each, slightly uneven. */
function wound(colour: Colour, x0: number, seed: number): Solid['paint'] {
  const pitch = 0.00125;
  return (x, y, z, _hit, out) => {
    const turn = (x - x0) / pitch;
    const across = turn - Math.floor(turn) - 0.5;
    const ridge = Math.sqrt(Math.max(0, 1 - 3.4 * across * across));
    const uneven = 0.85 + 0.3 * smoothNoise(Math.floor(turn) * 3.7, Math.atan2(z, y) * 3, seed);
    for (let i = 0; i < 3; i++) out[i] = colour[i]! * (0.12 + 0.95 * ridge) * uneven;
  };
}

/** The two coils: on each former a winding between two cheeks, centre at the height of the bar. */
export function coilSolids(apparatus: Apparatus, look: BenchLook, seed: number): Solid[] {
  if (look.winding === null) return [];
  const solids: Solid[] = [];
  const { radius_m: r, spacing_m } = apparatus;
  const z0 = look.bar.height_m;
  const cheek: Colour = [0.2, 0.105, 0.045];
  for (const middle of [-spacing_m / 2, spacing_m / 2]) {
    const x0 = middle - WINDING_WIDTH / 2;
    const x1 = middle + WINDING_WIDTH / 2;
    solids.push({
      meet: meetRing(x0, x1, z0, r - 0.006, r + 0.006),
      paint: wound(look.winding, x0, seed + 11),
      gloss: 0.5,
    });
    for (const [a, b] of [
      [x0 - FLANGE, x0],
      [x1, x1 + FLANGE],
    ] as const) {
      solids.push({
        meet: meetRing(a, b, z0, r - 0.0085, r + 0.0095),
        paint: plain(cheek, 0.35, seed + 12),
        gloss: 0.12,
      });
    }
  }
  return solids;
}

/** The current meter as a box whose top shows a reading. */
export function meterSolid(place: NonNullable<BenchLook['meter']>, text: string): Solid {
  const turn = (place.turn_deg * Math.PI) / 180;
  const cos = Math.cos(turn);
  const sin = Math.sin(turn);
  const face = meterPaint(text);
  return {
    meet: meetBox(place.x_m, place.y_m, turn, METER.width_m, METER.depth_m, METER.height_m),
    paint: (x, y, _z, hit, out) => {
      if (hit.nz < 0.5) {
        out[0] = out[1] = out[2] = 0.05;
        return;
      }
      face(cos * (x - place.x_m) + sin * (y - place.y_m), -sin * (x - place.x_m) + cos * (y - place.y_m), out);
    },
    gloss: 0.15,
  };
}

function curvePoint(points: readonly (readonly [number, number])[], t: number): readonly [number, number] {
  const [p0, p1, p2, p3] = points as unknown as readonly [
    readonly [number, number],
    readonly [number, number],
    readonly [number, number],
    readonly [number, number],
  ];
  const s = 1 - t;
  const w = [s * s * s, 3 * s * s * t, 3 * s * t * t, t * t * t] as const;
  return [
    w[0] * p0[0] + w[1] * p1[0] + w[2] * p2[0] + w[3] * p3[0],
    w[0] * p0[1] + w[1] * p1[1] + w[2] * p2[1] + w[3] * p3[1],
  ];
}

/** Lays two cables from the meter to the near coil over a board's paint, as painted tubes with a soft shadow beside them. */
export function cables(below: Paint, place: NonNullable<BenchLook['meter']>, apparatus: Apparatus): Paint {
  const turn = (place.turn_deg * Math.PI) / 180;
  const at = (x: number, y: number): readonly [number, number] => [
    place.x_m + Math.cos(turn) * x - Math.sin(turn) * y,
    place.y_m + Math.sin(turn) * x + Math.cos(turn) * y,
  ];
  const side = Math.sign(place.x_m) * (apparatus.spacing_m / 2);
  const far = Math.sign(place.y_m) * apparatus.radius_m;
  const courses = ([0.009, -0.007] as const).map((y, i) => {
    const start = at(-0.043, y);
    const bend = at(-0.062 - 0.01 * i, y + 0.012 - 0.03 * i);
    const points = [
      start,
      bend,
      [side + 0.045, far * (0.52 + 0.2 * i)],
      [side + 0.02, far * (0.4 + 0.32 * i)],
    ] as const;
    const path: (readonly [number, number])[] = [];
    for (let k = 0; k <= 48; k++) path.push(curvePoint(points, k / 48));
    return path;
  });
  const radius = 0.0019;
  const nearest = (path: readonly (readonly [number, number])[], x: number, y: number): readonly [number, number] => {
    let best = 1;
    let signed = 0;
    for (let k = 0; k + 1 < path.length; k++) {
      const [ax, ay] = path[k]!;
      const [bx, by] = path[k + 1]!;
      const dx = bx - ax;
      const dy = by - ay;
      const t = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)));
      const ex = x - ax - t * dx;
      const ey = y - ay - t * dy;
      const d = Math.hypot(ex, ey);
      if (d < best) {
        best = d;
        signed = ey;
      }
    }
    return [best, signed];
  };
  const colours = [
    [0.02, 0.02, 0.024],
    [0.36, 0.018, 0.014],
  ] as const;
  const reach = courses.map((path) => ({
    x0: Math.min(...path.map((p) => p[0])) - 3 * radius,
    x1: Math.max(...path.map((p) => p[0])) + 3 * radius,
    y0: Math.min(...path.map((p) => p[1])) - 3 * radius,
    y1: Math.max(...path.map((p) => p[1])) + 3 * radius,
  }));
  return (x, y, out) => {
    below(x, y, out);
    for (const [i, path] of courses.entries()) {
      const box = reach[i]!;
      if (x < box.x0 || x > box.x1 || y < box.y0 || y > box.y1) continue;
      const [d, up] = nearest(path, x, y);
      if (d < radius) {
        const slope = up / radius;
        const light = 0.55 + 0.45 * Math.sqrt(1 - (d / radius) ** 2) + 0.5 * Math.max(0, slope) ** 6;
        for (let c = 0; c < 3; c++) out[c] = colours[i]![c]! * light;
      } else if (d < 3 * radius) {
        const shade = 1 - 0.45 * (1 - (d - radius) / (2 * radius)) ** 2 * (up < 0 ? 1 : 0.5);
        for (let c = 0; c < 3; c++) out[c]! *= shade;
      }
    }
  };
}
