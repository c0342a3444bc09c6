import { seededRandom } from '../../src/numerics/random.ts';
import type { Frame } from '../../src/recording/recording.ts';

/** Where the fibre stands and how far the near end reaches in the drawing, pixels. */
export const AXIS_X = 70;
export const HALF_LENGTH = 140;

/**
 * Draws a round bar seen nearly end-on: a far end and a near one that shift against each other, the flank between
 * them, and the fibre's hook hanging still before it. Angles in degrees, positive with the near end to the right.
 */
export function drawEnd(rest_deg: number, amplitude_deg: number, count = 120, seed = 3) {
  const width = 140;
  const height = 100;
  const radius = 15;
  const random = seededRandom(seed);
  const frames: Frame[] = [];
  const truth_deg: number[] = [];
  const clamp = (share: number) => Math.min(1, Math.max(0, share));
  for (let index = 0; index < count; index++) {
    const time_s = index / 30;
    const angle_deg = rest_deg + amplitude_deg * Math.cos(2 * Math.PI * 0.8 * time_s + 0.5);
    const angle = (angle_deg * Math.PI) / 180;
    const near = AXIS_X + HALF_LENGTH * Math.sin(angle);
    const far = AXIS_X - 0.9 * HALF_LENGTH * Math.sin(angle);
    const grey = new Uint8Array(width * height);
    for (let y = 0; y < height; y++) {
      for (let x = 0; x < width; x++) {
        let value = 175;
        // The flank: discs from the far end to the near one, each a little lower and larger.
        for (let k = 0; k < 12; k++) {
          const share = k / 12;
          const r = radius * (0.9 + 0.1 * share);
          const distance = Math.hypot(x - (far + share * (near - far)), y - (40 + 20 * share)) - r;
          const cover = clamp(0.5 - distance / 1.5);
          value += cover * (130 - 30 * share - value);
        }
        const face = Math.hypot((x - near) / Math.cos(angle), y - 60) - radius;
        value += clamp(0.5 - face / 1.5) * (70 - value);
        const hook = Math.max(Math.abs(x - AXIS_X) - 2.5, y - 42);
        value += clamp(0.5 - hook / 1.5) * (50 - value);
        grey[y * width + x] = Math.max(0, Math.min(255, Math.round(value + 1.5 * random.gaussian())));
      }
    }
    frames.push({ index, time_s, width_px: width, height_px: height, grey });
    truth_deg.push(angle_deg);
  }
  return { frames, truth_deg, width, height };
}
