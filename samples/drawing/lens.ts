import type { Warp } from './camera.ts';
import type { Still } from './still.ts';

function kernelOf(sigma_px: number): Float32Array {
  const half = Math.ceil(3 * sigma_px);
  const kernel = Float32Array.from({ length: 2 * half + 1 }, (_, i) =>
    Math.exp(-((i - half) ** 2) / (2 * sigma_px * sigma_px)),
  );
  const sum = kernel.reduce((a, b) => a + b, 0);
  return kernel.map((value) => value / sum);
}

/** How far the lens blur reaches, whole pixels. */
export function blurReach(sigma_px: number): number {
  return sigma_px < 0.05 ? 0 : Math.ceil(3 * sigma_px);
}

/** Gaussian blur of linear light (three values a pixel), by rows and then by columns; edges are continued outwards. */
export function blurLight(light: Float32Array, width: number, height: number, sigma_px: number): Float32Array {
  if (sigma_px < 0.05) return light;
  const kernel = kernelOf(sigma_px);
  const half = (kernel.length - 1) / 2;
  const rows = new Float32Array(light.length);
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const at = 3 * (y * width + x);
      let r = 0;
      let g = 0;
      let b = 0;
      for (let k = -half; k <= half; k++) {
        const sx = x + k < 0 ? 0 : x + k >= width ? width - 1 : x + k;
        const from = 3 * (y * width + sx);
        const w = kernel[k + half]!;
        r += w * light[from]!;
        g += w * light[from + 1]!;
        b += w * light[from + 2]!;
      }
      rows[at] = r;
      rows[at + 1] = g;
      rows[at + 2] = b;
    }
  }
  const out = new Float32Array(light.length);
  const line = 3 * width;
  for (let y = 0; y < height; y++) {
    for (let k = -half; k <= half; k++) {
      const sy = y + k < 0 ? 0 : y + k >= height ? height - 1 : y + k;
      const w = kernel[k + half]!;
      const to = y * line;
      const from = sy * line;
      for (let i = 0; i < line; i++) out[to + i]! += w * rows[from + i]!;
    }
  }
  return out;
}

/** A still as a magnified and shifted picture shows it, resampled between pixels; cubic, so that it stays sharp. */
export function warpStill(still: Still, warp: Warp): Still {
  const { width_px: w, height_px: h } = still;
  const light = new Float32Array(still.light.length);
  const onBoard = new Uint8Array(w * h);
  const depth = new Float32Array(w * h);
  const cx = (w - 1) / 2;
  const cy = (h - 1) / 2;
  const weights = (f: number): readonly [number, number, number, number] => [
    f * (-0.5 + f * (1 - 0.5 * f)),
    1 + f * f * (-2.5 + 1.5 * f),
    f * (0.5 + f * (2 - 1.5 * f)),
    f * f * (-0.5 + 0.5 * f),
  ];
  const columns = Array.from({ length: w }, (_, x) => {
    const sx = cx + (x - cx - warp.dx_px) / warp.scale;
    const i = Math.floor(sx);
    return {
      at: [-1, 0, 1, 2].map((k) => 3 * Math.min(w - 1, Math.max(0, i + k))),
      weights: weights(sx - i),
      nearest: Math.min(w - 1, Math.max(0, Math.round(sx))),
    };
  });
  for (let y = 0; y < h; y++) {
    const sy = cy + (y - cy - warp.dy_px) / warp.scale;
    const j = Math.floor(sy);
    const wy = weights(sy - j);
    const lines = [-1, 0, 1, 2].map((k) => 3 * w * Math.min(h - 1, Math.max(0, j + k)));
    const nearestLine = Math.min(h - 1, Math.max(0, Math.round(sy))) * w;
    for (let x = 0; x < w; x++) {
      const column = columns[x]!;
      let r = 0;
      let g = 0;
      let b = 0;
      for (let m = 0; m < 4; m++) {
        const line = lines[m]!;
        for (let n = 0; n < 4; n++) {
          const from = line + column.at[n]!;
          const weight = wy[m]! * column.weights[n]!;
          r += weight * still.light[from]!;
          g += weight * still.light[from + 1]!;
          b += weight * still.light[from + 2]!;
        }
      }
      const pixel = y * w + x;
      light[3 * pixel] = r;
      light[3 * pixel + 1] = g;
      light[3 * pixel + 2] = b;
      onBoard[pixel] = still.onBoard[nearestLine + column.nearest]!;
      depth[pixel] = still.depth[nearestLine + column.nearest]!;
    }
  }
  return { width_px: w, height_px: h, light, onBoard, depth };
}
