/**
 * Size of a JPEG picture in pixels, from its frame header (ITU-T T.81, B.2.2); null where it has none.
 */
export function jpegSize(jpeg: Uint8Array): { readonly width_px: number; readonly height_px: number } | null {
  const view = new DataView(jpeg.buffer, jpeg.byteOffset, jpeg.byteLength);
  for (let at = 2; at + 9 <= jpeg.length && jpeg[at] === 0xff; at += 2 + view.getUint16(at + 2)) {
    const marker = jpeg[at + 1] ?? 0;
    // SOF0 to SOF15, less the markers in between that mean something else (DHT, JPG, DAC).
    const isFrame = marker >= 0xc0 && marker <= 0xcf && marker !== 0xc4 && marker !== 0xc8 && marker !== 0xcc;
    if (isFrame) return { width_px: view.getUint16(at + 7), height_px: view.getUint16(at + 5) };
  }
  return null;
}
