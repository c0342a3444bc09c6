import { type Luma, reducedToBytes } from './luma.ts';
import type { BlockCutter } from './timed-blocks.ts';

/** Cuts ffmpeg's rawvideo output into pictures of one byte per pixel. */
export class RawPictures implements BlockCutter {
  private block: Uint8Array;
  private filled = 0;

  constructor(
    private readonly pixels: number,
    private readonly bits: Luma['bits'],
  ) {
    this.block = this.newBlock();
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
        this.block = this.newBlock();
      } else {
        emit(reducedToBytes(this.block, this.pixels, this.bits));
      }
    }
  }

  private newBlock(): Uint8Array {
    // Not from the shared pool, so that the buffer can be handed to another thread; not cleared, since every byte is written.
    return new Uint8Array(Buffer.allocUnsafeSlow(this.bits === 8 ? this.pixels : this.pixels * 2).buffer);
  }
}
