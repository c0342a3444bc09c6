import type { BlockCutter } from './timed-blocks.ts';

/** Largest JPEG accepted, so that a broken header can't ask for any amount of memory. */
const largest_bytes = 64 << 20;
const longestHeader_chars = 512;

/** Cuts ffmpeg's mpjpeg output (parts with a header that states their length) into JPEG files. */
export class JpegParts implements BlockCutter {
  private header = '';
  private part: Uint8Array | null = null;
  private filled = 0;

  take(chunk: Uint8Array, emit: (block: Uint8Array) => void): void {
    let from = 0;
    while (from < chunk.length) {
      if (this.part === null) {
        from = this.readHeader(chunk, from);
        continue;
      }
      const length = Math.min(chunk.length - from, this.part.length - this.filled);
      this.part.set(chunk.subarray(from, from + length), this.filled);
      this.filled += length;
      from += length;
      if (this.filled === this.part.length) {
        emit(this.part);
        this.part = null;
      }
    }
  }

  /** Reads header bytes up to the empty line that ends them; gives where to go on. */
  private readHeader(chunk: Uint8Array, from: number): number {
    for (let at = from; at < chunk.length; at++) {
      this.header = (this.header + String.fromCharCode(chunk[at] ?? 0)).slice(-longestHeader_chars);
      if (!this.header.endsWith('\r\n\r\n')) continue;
      const length = Number(/content-length:\s*(\d+)/i.exec(this.header)?.[1] ?? 0);
      this.header = '';
      if (length > 0 && length <= largest_bytes) {
        this.part = new Uint8Array(length);
        this.filled = 0;
      }
      return at + 1;
    }
    return chunk.length;
  }
}
