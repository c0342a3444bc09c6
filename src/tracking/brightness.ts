import type { Picture } from './picture.ts';

/** Mean and standard deviation of a picture's greys, from about a thousand pixels. */
export interface Brightness {
  readonly mean: number;
  readonly spread: number;
}

/** Pixels looked at. */
const SAMPLE = 1000;

/** Measures how bright a picture is and how strong its contrasts are. */
export function brightnessOf({ data }: Picture<Uint8Array>): Brightness {
  // An odd stride, so that not always the same columns are looked at.
  const stride = Math.max(1, Math.floor(data.length / SAMPLE)) | 1;
  let sum = 0;
  let squares = 0;
  let n = 0;
  for (let i = 0; i < data.length; i += stride, n++) {
    sum += data[i]!;
    squares += data[i]! * data[i]!;
  }
  const mean = sum / n;
  return { mean, spread: Math.sqrt(Math.max(0, squares / n - mean * mean)) };
}
