import { createRequire } from 'node:module';
import type { Picture } from './picture.ts';

/** The few parts of OpenCV that are used, as far as they are used. */
interface Mat {
  readonly data: Uint8Array;
  readonly data32F: Float32Array;
  readonly data32S: Int32Array;
  delete(): void;
}
interface OpenCv {
  Mat: new (rows?: number, cols?: number, type?: number) => Mat;
  Size: new (width: number, height: number) => object;
  CV_8UC1: number;
  CV_32FC1: number;
  INTER_AREA: number;
  TM_CCOEFF_NORMED: number;
  BORDER_REPLICATE: number;
  resize(from: Mat, to: Mat, size: object, fx: number, fy: number, interpolation: number): void;
  GaussianBlur(from: Mat, to: Mat, size: object, sigmaX: number, sigmaY: number, border: number): void;
  matchTemplate(from: Mat, template: Mat, to: Mat, method: number): void;
  connectedComponentsWithStats(from: Mat, labels: Mat, stats: Mat, centroids: Mat): number;
}

let loaded: OpenCv | undefined;

/**
 * OpenCV, loaded on first use. Its loader installs handlers for uncaught exceptions and rejections that turn every
 * failure of the process into its own; they are taken out again.
 */
export function openCv(): OpenCv {
  if (loaded === undefined) {
    const events = ['uncaughtException', 'unhandledRejection'] as const;
    const before = events.map((event) => process.listeners(event as 'uncaughtException'));
    loaded = (createRequire(import.meta.url)('opencv-wasm') as { cv: OpenCv }).cv;
    for (const [i, event] of events.entries()) {
      for (const listener of process.listeners(event as 'uncaughtException')) {
        if (!before[i]!.includes(listener)) process.removeListener(event, listener);
      }
    }
  }
  return loaded;
}

/** The picture made smaller by a whole factor, every pixel the mean of those it replaces (a rest at the right and bottom is left out). */
export function shrink(picture: Picture<Uint8Array>, factor: number): Picture<Uint8Array> {
  const cv = openCv();
  const width = Math.floor(picture.width / factor);
  const height = Math.floor(picture.height / factor);
  if (factor === 1) return picture;
  const from = new cv.Mat(height * factor, width * factor, cv.CV_8UC1);
  const to = new cv.Mat();
  try {
    const target = from.data;
    for (let y = 0; y < height * factor; y++) {
      target.set(picture.data.subarray(y * picture.width, y * picture.width + width * factor), y * width * factor);
    }
    cv.resize(from, to, new cv.Size(width, height), 0, 0, cv.INTER_AREA);
    return { width, height, data: to.data.slice() };
  } finally {
    from.delete();
    to.delete();
  }
}

/** The picture blurred by a Gaussian of standard deviation `sigma_px`. */
export function blur(picture: Picture, sigma_px: number): Picture {
  const cv = openCv();
  const { width, height } = picture;
  const from = new cv.Mat(height, width, cv.CV_32FC1);
  const to = new cv.Mat();
  try {
    from.data32F.set(picture.data);
    const size = 2 * Math.ceil(3 * sigma_px) + 1;
    cv.GaussianBlur(from, to, new cv.Size(size, size), sigma_px, sigma_px, cv.BORDER_REPLICATE);
    return { width, height, data: to.data32F.slice() };
  } finally {
    from.delete();
    to.delete();
  }
}

/** Patches of touching non-zero pixels: the patch number of every pixel (0: none) and each patch's pixel count by number. */
export function patches(mask: Picture<Uint8Array>): { readonly label: Int32Array; readonly area: number[] } {
  const cv = openCv();
  const from = new cv.Mat(mask.height, mask.width, cv.CV_8UC1);
  const labels = new cv.Mat();
  const stats = new cv.Mat();
  const centroids = new cv.Mat();
  try {
    from.data.set(mask.data);
    const count = cv.connectedComponentsWithStats(from, labels, stats, centroids);
    // Five columns a patch: left, top, width, height, area.
    const area = Array.from({ length: count }, (_, i) => (i === 0 ? 0 : stats.data32S[i * 5 + 4]!));
    return { label: labels.data32S.slice(), area };
  } finally {
    for (const mat of [from, labels, stats, centroids]) mat.delete();
  }
}

/** A patch of a picture: left and top pixel, width and height. */
export interface Patch {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

/**
 * How well a patch of one picture is found at each place of a strip of others: for every picture the normalised
 * correlation (-1 to 1) row by row, (strip.width - patch.width + 1) values a row.
 */
export function correlate(
  from: Picture<Uint8Array>,
  patch: Patch,
  pictures: readonly Picture<Uint8Array>[],
  strip: Patch,
): Float32Array[] {
  const cv = openCv();
  const template = new cv.Mat(patch.height, patch.width, cv.CV_8UC1);
  const ground = new cv.Mat(strip.height, strip.width, cv.CV_8UC1);
  const found = new cv.Mat();
  try {
    cut(from, patch, template.data);
    return pictures.map((picture) => {
      cut(picture, strip, ground.data);
      cv.matchTemplate(ground, template, found, cv.TM_CCOEFF_NORMED);
      return found.data32F.slice();
    });
  } finally {
    for (const mat of [template, ground, found]) mat.delete();
  }
}

function cut(picture: Picture<Uint8Array>, patch: Patch, to: Uint8Array): void {
  for (let row = 0; row < patch.height; row++) {
    const at = (patch.top + row) * picture.width + patch.left;
    to.set(picture.data.subarray(at, at + patch.width), row * patch.width);
  }
}
