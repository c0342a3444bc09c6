/** How the grey values of a picture are had from its pixel format. */
export interface Luma {
  /** ffmpeg filters that leave one plane of grey values. */
  readonly filters: readonly string[];
  /** Bits of a value as it comes over the pipe: 8 in one byte, more in two (little-endian). */
  readonly bits: 8 | 10 | 12;
}

/**
 * The brightness plane as it was coded, untouched by any conversion: a range of 16 to 235 isn't stretched, so nothing brighter is cut
 * off and the values of one scene don't depend on how the file labels its range. Formats without such a plane are converted.
 */
export function lumaOf(pixelFormat: string): Luma {
  const planar = /^(?:yuvj?\d{3}p|yuva\d{3}p|gray)(\d*)(?:le)?$/.exec(pixelFormat);
  if (planar === null) return { filters: ['format=gray'], bits: 8 };
  switch (planar[1]) {
    case '':
      return { filters: ['extractplanes=y', 'format=gray'], bits: 8 };
    case '10':
      return { filters: ['extractplanes=y', 'format=gray10le'], bits: 10 };
    case '12':
      return { filters: ['extractplanes=y', 'format=gray12le'], bits: 12 };
    default:
      return { filters: ['format=gray'], bits: 8 };
  }
}

/** Fills `grey` with the values, one byte each and rounded, of a picture with two bytes each. */
export function reduceToBytes(wide: Uint8Array, bits: 10 | 12, grey: Uint8Array): void {
  const values = new Uint16Array(wide.buffer, wide.byteOffset, grey.length);
  const shift = bits - 8;
  const half = 1 << (shift - 1);
  for (let i = 0; i < grey.length; i++) grey[i] = Math.min(255, (values[i]! + half) >> shift);
}
