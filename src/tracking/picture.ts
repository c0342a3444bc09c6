/** A grey picture of bytes or floats, row by row; pixel centres at whole numbers, origin at the top left, y down. */
export interface Picture<T extends Uint8Array | Float32Array = Float32Array> {
  readonly width: number;
  readonly height: number;
  readonly data: T;
}

/** A black picture of the given size. */
export function emptyPicture(width: number, height: number): Picture {
  return { width, height, data: new Float32Array(width * height) };
}

/** Value at (x, y) by bilinear interpolation; places outside the picture take the nearest edge's value. */
export function valueAt(picture: Picture<Uint8Array | Float32Array>, x: number, y: number): number {
  const { width, height, data } = picture;
  const cx = Math.min(Math.max(x, 0), width - 1.001);
  const cy = Math.min(Math.max(y, 0), height - 1.001);
  const left = Math.floor(cx);
  const top = Math.floor(cy);
  const fx = cx - left;
  const fy = cy - top;
  const at = top * width + left;
  const upper = data[at]! + fx * (data[at + 1]! - data[at]!);
  const lower = data[at + width]! + fx * (data[at + width + 1]! - data[at + width]!);
  return upper + fy * (lower - upper);
}
