import { type Luma, reduceToBytes } from './luma.ts';
import type { BlockCutter } from './timed-blocks.ts';

/** Cuts ffmpeg's rawvideo output into pictures of one byte per pixel. */
export class RawPictures implements BlockCutter {
  private readonly spare: Uint8Array[] = [];
  private block: Uint8Array;
  private filled = 0;

  constructor(
    private readonly pixels: number,
    private readonly bits: Luma['bits'],
  ) {
    this.block = this.bits === 8 ? this.picture() : new Uint8Array(pixels * 2);
  }

  take(chunk: Uint8Array, emit: (block: Uint8Array) => void): void {
    for (let from = 0; from < chunk.length; ) {
      const length = Math.min(chunk.length - from, this.block.length - this.filled);
      this.block.set(chunk.subarray(from, from + length), this.filled);
      this.filled += length;
      from += length;
      if (this.filled < this.block.length) continue;
      this.filled = 0;
      if (this.bits === 8) {
        emit(this.block);
        this.block = this.picture();
      } else {
        const picture = this.picture();
        reduceToBytes(this.block, this.bits, picture);
        emit(picture);
      }
    }
  }

  /** Thousands of buffers, each filled once and left to the garbage collector, would cost more than filling them. */
  giveBack(block: Uint8Array): void {
    this.spare.push(block);
  }

  private picture(): Uint8Array {
    return this.spare.pop() ?? new Uint8Array(this.pixels);
  }
}
