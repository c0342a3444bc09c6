import { type Random, randomFrom } from './random.ts';

/** Encoded picture before noise: brightness at full size and two colour differences at half size, in 8-bit video levels (16 to 235). */
export interface Encoded {
  readonly width_px: number;
  readonly height_px: number;
  readonly y: Float32Array;
  readonly u: Float32Array;
  readonly v: Float32Array;
}

const GAMMA = 1 / 2.2;
const CURVE = Float32Array.from({ length: 1400 }, (_, i) => (i / 1024) ** (2 * GAMMA));

/** Encoded value of linear light: power 1 / 2.2, so that a change of exposure only scales it. */
function encode(light: number): number {
  const f = Math.sqrt(Math.max(0, light)) * 1024;
  if (f >= 1398) return CURVE[1398]!;
  const i = f | 0;
  return CURVE[i]! + (f - i) * (CURVE[i + 1]! - CURVE[i]!);
}

/** An empty encoded picture; width and height are even. */
export function blankEncoded(width_px: number, height_px: number): Encoded {
  const half = (width_px / 2) * (height_px / 2);
  return {
    width_px,
    height_px,
    y: new Float32Array(width_px * height_px),
    u: new Float32Array(half),
    v: new Float32Array(half),
  };
}

/**
 * Encodes a rectangle of linear light (row by row, three values a pixel, `stride` pixels a row, its first pixel at `x0`,
 * `y0` of the picture, both even) into the picture: BT.709 brightness and colour differences, colour averaged over 2 x 2.
 */
export function encodeInto(
  encoded: Encoded,
  light: Float32Array,
  offset: number,
  stride: number,
  x0: number,
  y0: number,
  width: number,
  height: number,
): void {
  const half = encoded.width_px / 2;
  for (let y = 0; y < height; y += 2) {
    for (let x = 0; x < width; x += 2) {
      let cu = 0;
      let cv = 0;
      for (let k = 0; k < 4; k++) {
        const px = x + (k & 1);
        const py = y + (k >> 1);
        const at = 3 * (offset + py * stride + px);
        const r = encode(light[at]!);
        const g = encode(light[at + 1]!);
        const b = encode(light[at + 2]!);
        const bright = 0.2126 * r + 0.7152 * g + 0.0722 * b;
        encoded.y[(y0 + py) * encoded.width_px + x0 + px] = 219 * bright;
        cu += b - bright;
        cv += r - bright;
      }
      const at = ((y0 + y) >> 1) * half + ((x0 + x) >> 1);
      encoded.u[at] = (224 / 1.8556 / 4) * cu;
      encoded.v[at] = (224 / 1.5748 / 4) * cv;
    }
  }
}

const TABLE = 1 << 20;

/** A table of normal noise, each value slightly like its neighbours as a phone's own smoothing leaves it; standard deviation 1. */
export function noiseTable(random: Random): Float32Array {
  const white = Float32Array.from({ length: TABLE + 2 }, () => random.normal());
  const table = new Float32Array(TABLE);
  const norm = 1 / Math.hypot(1, 0.35, 0.35);
  for (let i = 0; i < TABLE; i++) table[i] = norm * (white[i + 1]! + 0.35 * (white[i]! + white[i + 2]!));
  return table;
}

/** What changes from frame to frame in the sensor: gains (of encoded values) of each line and column, noise and its seed. */
export interface Taking {
  readonly rowGain: Float32Array;
  readonly columnGain: Float32Array | null;
  /** Standard deviation in grey levels of 255. */
  readonly noise: number;
  readonly table: Float32Array;
  readonly seed: number;
}

function plane(
  values: Float32Array,
  width: number,
  height: number,
  base: number,
  noise: number,
  scale: number,
  every: number,
  taking: Taking,
  random: Random,
  out: Uint8ClampedArray | Uint16Array,
): void {
  const top = scale * 255;
  const { table, rowGain, columnGain } = taking;
  for (let y = 0; y < height; y++) {
    const gain = rowGain[y * every]! * scale;
    let at = Math.floor(random.uniform() * TABLE);
    const from = y * width;
    for (let x = 0; x < width; x++) {
      const lit = columnGain === null ? gain : gain * columnGain[x * every]!;
      const value = base * scale + values[from + x]! * lit + noise * scale * table[at]!;
      at = (at + 1) & (TABLE - 1);
      out[from + x] = scale === 1 ? value : Math.min(top, Math.max(0, Math.round(value)));
    }
  }
}

/** Takes an encoded picture into the planes of a frame (yuv420p, 8 or 10 bits), adding gains and noise. */
export function takeFrame(
  encoded: Encoded,
  taking: Taking,
  tenBits: boolean,
): readonly (Uint8ClampedArray | Uint16Array)[] {
  const { width_px: w, height_px: h } = encoded;
  const random = randomFrom(taking.seed);
  const scale = tenBits ? 4 : 1;
  const make = (length: number): Uint8ClampedArray | Uint16Array =>
    tenBits ? new Uint16Array(length) : new Uint8ClampedArray(length);
  const planes = [make(w * h), make((w * h) / 4), make((w * h) / 4)] as const;
  plane(encoded.y, w, h, 16, taking.noise * (219 / 255), scale, 1, taking, random, planes[0]);
  plane(encoded.u, w / 2, h / 2, 128, taking.noise * 0.4, scale, 2, taking, random, planes[1]);
  plane(encoded.v, w / 2, h / 2, 128, taking.noise * 0.4, scale, 2, taking, random, planes[2]);
  return planes;
}
