import type { Board } from './bench.ts';
import { layeredNoise, smoothNoise } from './random.ts';

/** Writes the reflectance (linear, red green blue) of one point of a surface, metres. */
export type Paint = (x_m: number, y_m: number, out: Float64Array) => void;

function set(out: Float64Array, red: number, green: number, blue: number): void {
  out[0] = red;
  out[1] = green;
  out[2] = blue;
}

function plankedWood(seed: number): Paint {
  const width = 0.086;
  return (x, y, out) => {
    const row = Math.floor(y / width + 0.37);
    const inRow = y / width + 0.37 - row;
    const shift = smoothNoise(row * 7.3, 0.5, seed) * 3;
    const tint = smoothNoise(row * 3.1, 4.5, seed + 5);
    const bend = 0.006 * (layeredNoise(x * 9 + shift * 11, y * 16 + row * 5, seed + 1, 3) - 0.5);
    const knotX = (smoothNoise(row * 5.7, 9.1, seed) - 0.5) * 0.7;
    const knotY = (row + 0.25 + 0.5 * smoothNoise(row * 2.9, 3.3, seed) - 0.37) * width;
    const knot = Math.hypot((x - knotX) * 0.55, y - knotY);
    const around = Math.exp(-knot / 0.012);
    const ring = (y + bend + 0.3 * around * (knot - 0.01)) * 170 + shift * 9 + around * knot * 900;
    const band = ring - Math.floor(ring);
    const late = band * band * band;
    const fibre = layeredNoise(x * 22 + shift, y * 900, seed + 2, 2) - 0.5;
    const pores = smoothNoise(x * 60, y * 2600, seed + 3);
    const patch = layeredNoise(x * 5, y * 9, seed + 4, 3) - 0.5;
    let light =
      (0.86 + 0.2 * tint) *
      (1 - 0.2 * late + 0.22 * fibre + 0.22 * patch - (pores > 0.82 ? 0.1 : 0)) *
      (1 - 0.55 * around * around);
    const edge = Math.min(inRow, 1 - inRow) * width;
    light *= 1 - 0.8 * Math.exp(-((edge / 0.0007) ** 2)) + 0.06 * Math.exp(-(((edge - 0.0018) / 0.0008) ** 2));
    set(out, 0.47 * light, 0.285 * light ** 1.12, 0.14 * light ** 1.3);
  };
}

function paper(seed: number, colour: readonly [number, number, number]): Paint {
  return (x, y, out) => {
    const light =
      0.97 +
      0.05 * (layeredNoise(x * 12, y * 12, seed, 3) - 0.5) +
      0.06 * (layeredNoise(x * 1900, y * 1900, seed + 1, 2) - 0.5);
    set(out, colour[0] * light, colour[1] * light, colour[2] * light);
  };
}

/** Coverage of the nearest of evenly spaced lines of a given width. */
function line(position: number, spacing: number, width: number): number {
  const off = Math.abs(position - spacing * Math.round(position / spacing));
  return off < width / 2 ? 1 : 0;
}

function squaredPaper(seed: number): Paint {
  const sheet = paper(seed, [0.72, 0.72, 0.68]);
  return (x, y, out) => {
    sheet(x, y, out);
    const turnedX = 0.985 * x + 0.173 * y + 0.0013;
    const turnedY = -0.173 * x + 0.985 * y + 0.0021;
    const ink = Math.max(
      0.45 * Math.max(line(turnedX, 0.005, 0.00025), line(turnedY, 0.005, 0.00025)),
      0.7 * Math.max(line(turnedX, 0.025, 0.0004), line(turnedY, 0.025, 0.0004)),
    );
    set(out, out[0]! * (1 - 0.75 * ink), out[1]! * (1 - 0.5 * ink), out[2]! * (1 - 0.2 * ink));
  };
}

function drawingPaper(seed: number): Paint {
  const sheet = paper(seed, [0.66, 0.65, 0.6]);
  return (x, y, out) => {
    sheet(x, y, out);
    const stroke =
      Math.abs(y - 0.31 * x - 0.021) < 0.00018 ||
      Math.abs(y + 1.7 * x - 0.06) < 0.0003 ||
      Math.abs(x + 0.44 * y + 0.047) < 0.00022;
    if (stroke) set(out, out[0]! * 0.6, out[1]! * 0.6, out[2]! * 0.62);
  };
}

function mat(seed: number, colour: readonly [number, number, number]): Paint {
  return (x, y, out) => {
    const light =
      0.9 +
      0.5 * (layeredNoise(x * 700, y * 700, seed, 3) - 0.5) +
      0.3 * (layeredNoise(x * 14, y * 14, seed + 1, 3) - 0.5);
    const dust = smoothNoise(x * 1300, y * 1300, seed + 2) > 0.985 ? 1.8 : 1;
    const ruled = 1 + 0.6 * Math.max(line(x, 0.01, 0.0003), line(y, 0.01, 0.0003));
    set(out, colour[0] * light * dust * ruled, colour[1] * light * dust * ruled, colour[2] * light * dust * ruled);
  };
}

function metal(seed: number): Paint {
  return (x, y, out) => {
    const brushed = layeredNoise(x * 20, y * 2400, seed, 3) - 0.5;
    const cloud = layeredNoise(x * 8, y * 8, seed + 1, 3) - 0.5;
    const scratch = smoothNoise(x * 5 + 40 * y, (y - 0.4 * x) * 1500, seed + 2) > 0.94 ? 0.12 : 0;
    const light = 0.3 * (1 + 0.35 * brushed + 0.3 * cloud) + scratch;
    set(out, light * 0.97, light, light * 1.03);
  };
}

function stone(seed: number): Paint {
  return (x, y, out) => {
    const grain = layeredNoise(x * 450, y * 450, seed, 4);
    const vein = Math.abs(layeredNoise(x * 16, y * 16, seed + 1, 4) - 0.5);
    const light = 0.16 + 0.3 * grain + (vein < 0.02 ? 0.15 : 0);
    set(out, light, light * 0.97, light * 0.94);
  };
}

/** How a board is painted. */
export function boardPaint(board: Board, seed: number): Paint {
  switch (board) {
    case 'planed_wood':
      return plankedWood(seed);
    case 'squared_paper':
      return squaredPaper(seed);
    case 'drawing_paper':
      return drawingPaper(seed);
    case 'dark_mat':
      return mat(seed, [0.02, 0.06, 0.045]);
    case 'black_mat':
      return mat(seed, [0.018, 0.018, 0.019]);
    case 'metal':
      return metal(seed);
    case 'stone':
      return stone(seed);
    default: {
      const never: never = board;
      throw new TypeError(`unknown board ${String(never)}`);
    }
  }
}

/** Lays a round graduated card (a mark each 5 degrees, longer ones each 10 and 30) over another paint, middle at the origin. */
export function graduatedCard(below: Paint, radius_m: number, turn_rad: number, seed: number): Paint {
  const sheet = paper(seed + 70, [0.78, 0.755, 0.69]);
  return (x, y, out) => {
    const r = Math.hypot(x, y);
    if (r > radius_m) {
      below(x, y, out);
      const rim = r - radius_m;
      if (rim < 0.003) for (let i = 0; i < 3; i++) out[i]! *= 0.62 + 0.38 * (rim / 0.003);
      return;
    }
    sheet(x, y, out);
    const angle_deg = ((Math.atan2(y, x) - turn_rad) * 180) / Math.PI;
    const nearest = 5 * Math.round(angle_deg / 5);
    const off_m = Math.abs(angle_deg - nearest) * (Math.PI / 180) * r;
    const steps = Math.abs(nearest);
    const length = steps % 30 === 0 ? 0.2 : steps % 10 === 0 ? 0.11 : 0.065;
    const share = r / radius_m;
    let ink = 0;
    if (share > 0.95 - length && share < 0.95 && off_m < (steps % 30 === 0 ? 0.0003 : 0.0002)) ink = 0.75;
    if (Math.abs(share - 0.95) * radius_m < 0.00022 || Math.abs(share - 0.72) * radius_m < 0.00014) ink = 0.7;
    if (steps % 90 === 0 && off_m < 0.00016 && share < 0.95) ink = Math.max(ink, 0.5);
    set(out, out[0]! * (1 - ink), out[1]! * (1 - 0.97 * ink), out[2]! * (1 - 0.85 * ink));
  };
}
