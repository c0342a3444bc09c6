import { seededRandom } from '../../src/numerics/random.ts';
import type { Frame } from '../../src/recording/recording.ts';

/** What a drawn stretch shows; lengths in pixels, angles anticlockwise as seen, in degrees. */
export interface Drawing {
  readonly width?: number;
  readonly height?: number;
  readonly frames?: number;
  readonly rate_Hz?: number;
  readonly length_px?: number;
  readonly thickness_px?: number;
  /** Grey of the two halves, and of the table at a place. */
  readonly tones?: readonly [number, number];
  readonly ground?: (x: number, y: number) => number;
  readonly rest_deg?: number;
  readonly amplitude_deg?: number;
  readonly frequency_Hz?: number;
  readonly phase_rad?: number;
  /** Pendulum motion, pixels, at 1.7 times the twist's frequency. */
  readonly swing_px?: number;
  /** Width of the blur of every edge. */
  readonly soft_px?: number;
  readonly noise?: number;
  readonly seed?: number;
  /** Brightness at a time: gain and offset. */
  readonly light?: (time_s: number) => { readonly gain: number; readonly offset: number };
  /** Painted over everything: grey at a place and time, null where the picture is seen. */
  readonly over?: (x: number, y: number, time_s: number) => number | null;
  /** How much the plane is squeezed downwards. */
  readonly squash?: number;
  /** Exposure as a share of the time between frames, drawn as the mean over moments within it. */
  readonly exposure?: number;
  /** Frames left out, by number. */
  readonly dropped?: (frame: number) => boolean;
}

/** Drawn frames with the truth of each: angle in degrees and the bar's middle in pixels. */
export interface Drawn {
  readonly frames: Frame[];
  readonly truth: { readonly angle_deg: number; readonly x_px: number; readonly y_px: number }[];
}

/** Draws a two-toned bar turning over a table. */
export function drawBar(drawing: Drawing = {}): Drawn {
  const {
    width = 200,
    height = 150,
    frames: count = 120,
    rate_Hz = 30,
    length_px = 140,
    thickness_px = 16,
    tones = [60, 120],
    ground = () => 180,
    rest_deg = 20,
    amplitude_deg = 6,
    frequency_Hz = 0.9,
    phase_rad = 0.4,
    swing_px = 0,
    soft_px = 1.5,
    noise = 2,
    seed = 1,
    light = () => ({ gain: 1, offset: 0 }),
    over = () => null,
    squash = 1,
    exposure = 0,
    dropped = () => false,
  } = drawing;
  const random = seededRandom(seed);
  const table = Float64Array.from({ length: width * height }, (_, i) => ground(i % width, Math.floor(i / width)));
  const result: Drawn = { frames: [], truth: [] };
  const poseAt = (time_s: number) => {
    const phase = 2 * Math.PI * frequency_Hz * time_s + phase_rad;
    const angle_deg = rest_deg + amplitude_deg * Math.cos(phase);
    const swing = swing_px * Math.sin(1.7 * phase);
    return { angle_deg, x_px: width / 2 + 0.3 + swing, y_px: height / 2 - 0.2 + 0.4 * swing };
  };
  const moments = exposure > 0 ? 5 : 1;
  for (let index = 0; index < count; index++) {
    const time_s = index / rate_Hz;
    if (dropped(index)) {
      for (let i = 0; i < width * height; i++) random.gaussian();
      continue;
    }
    const sum = new Float64Array(width * height);
    for (let m = 0; m < moments; m++) {
      const moment_s = time_s + (((m + 0.5) / moments - 0.5) * exposure) / rate_Hz;
      const pose = poseAt(moment_s);
      const a = (-pose.angle_deg * Math.PI) / 180;
      const c = Math.cos(a);
      const s = Math.sin(a);
      for (let y = 0; y < height; y++) {
        for (let x = 0; x < width; x++) {
          const dx = x - pose.x_px;
          const dy = (y - pose.y_px) / squash;
          const u = c * dx + s * dy;
          const v = c * dy - s * dx;
          const inside = Math.min(length_px / 2 - Math.abs(u), thickness_px / 2 - Math.abs(v));
          const cover = Math.min(1, Math.max(0, inside / soft_px + 0.5));
          const right = Math.min(1, Math.max(0, u / soft_px + 0.5));
          const grey = tones[0] + right * (tones[1] - tones[0]);
          const at = y * width + x;
          sum[at]! += (table[at]! + cover * (grey - table[at]!)) / moments;
        }
      }
    }
    const { gain, offset } = light(time_s);
    const grey = new Uint8Array(width * height);
    for (let i = 0; i < grey.length; i++) {
      const painted = over(i % width, Math.floor(i / width), time_s) ?? sum[i]!;
      grey[i] = Math.max(0, Math.min(255, Math.round(gain * painted + offset + noise * random.gaussian())));
    }
    result.frames.push({ index, time_s, width_px: width, height_px: height, grey });
    result.truth.push(poseAt(time_s));
  }
  return result;
}

/** The frames one by one, as a decoder would give them. */
export async function* asStream(frames: readonly Frame[]): AsyncGenerator<Frame> {
  for (const frame of frames) yield { ...frame, grey: frame.grey.slice() };
}
