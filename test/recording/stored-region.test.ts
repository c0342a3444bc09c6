import { describe, expect, test } from 'vitest';
import { storedRegion } from '../../src/recording/stored-region.ts';

const stored = { width: 7, height: 5 };

/** Where a stored pixel is displayed after turning the picture clockwise, by turning it a quarter at a time. */
function displayed(x: number, y: number, rotation_deg: number): [number, number] {
  let [px, py, height, width] = [x, y, stored.height, stored.width];
  for (let turned = 0; turned < rotation_deg; turned += 90) {
    [px, py, height, width] = [height - 1 - py, px, width, height];
  }
  return [px, py];
}

describe.each([0, 90, 180, 270] as const)('a picture turned by %d degrees', (rotation_deg) => {
  const turned = rotation_deg % 180 !== 0;
  const recording = {
    rotation_deg,
    width_px: turned ? stored.height : stored.width,
    height_px: turned ? stored.width : stored.height,
  };

  test('every region holds the same pixels as stored and as displayed', () => {
    for (let x = 0; x < recording.width_px; x++) {
      for (let y = 0; y < recording.height_px; y++) {
        const region = {
          x,
          y,
          width: Math.min(2, recording.width_px - x),
          height: Math.min(3, recording.height_px - y),
        };
        const there = storedRegion(recording, region);
        for (let sx = 0; sx < stored.width; sx++) {
          for (let sy = 0; sy < stored.height; sy++) {
            const [dx, dy] = displayed(sx, sy, rotation_deg);
            expect(within(there, sx, sy)).toBe(within(region, dx, dy));
          }
        }
      }
    }
  });
});

function within(region: { x: number; y: number; width: number; height: number }, x: number, y: number): boolean {
  return x >= region.x && y >= region.y && x < region.x + region.width && y < region.y + region.height;
}
