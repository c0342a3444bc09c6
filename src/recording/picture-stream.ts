import { type ChildEnd, type FfmpegChild, startChild } from './ffmpeg-child.ts';
import { FrameTicks } from './frame-ticks.ts';
import { lumaOf, reducedToBytes } from './luma.ts';
import type { Recording } from './recording.ts';

/** One picture as it comes from the decoder. */
export interface Picture {
  readonly tick: number;
  /** Grey values; its buffer belongs to whoever takes the picture. */
  readonly grey: Uint8Array;
}

/** Complete pictures kept ready for the reader: enough to keep the decoder busy, whatever the recording's length. */
const picturesAhead = 4;

/**
 * Runs ffmpeg and pairs the raw pictures on its stdout with the ticks on its descriptor 3. When the reader falls behind, the pipe fills and
 * ffmpeg waits. `close` kills the child and waits for its exit.
 */
export class PictureStream {
  private readonly child: FfmpegChild;
  private readonly ticks: FrameTicks;
  private readonly ready: Uint8Array[] = [];
  private readonly bits: 8 | 10 | 12;
  private readonly pixels: number;
  private block: Uint8Array;
  private filled = 0;
  private over: ChildEnd | null = null;
  private wake: () => void = () => {};

  constructor(
    ffmpeg: string,
    args: readonly string[],
    recording: Pick<Recording, 'pixelFormat' | 'timebase'>,
    pixels: number,
    signal?: AbortSignal,
  ) {
    this.pixels = pixels;
    this.bits = lumaOf(recording.pixelFormat).bits;
    this.ticks = new FrameTicks(recording.timebase);
    this.block = this.newBlock();
    this.child = startChild(ffmpeg, args, {
      deadlines: { whole_s: null, silence_s: 60 },
      extraPipe: true,
      signal,
    });
    this.child.stdout.on('data', (chunk: Uint8Array) => this.take(chunk));
    this.child.extra?.setEncoding('latin1');
    this.child.extra?.on('data', (text: string) => {
      this.ticks.push(text);
      this.wake();
    });
    void this.child.end.then((end) => {
      this.over = end;
      this.wake();
    });
  }

  /** The next picture, null after the last one. */
  async next(): Promise<Picture | null> {
    for (;;) {
      const grey = this.ready[0];
      const tick = grey === undefined ? undefined : this.ticks.shift();
      if (grey !== undefined && tick !== undefined) {
        this.ready.shift();
        if (this.ready.length < picturesAhead && this.child.stdout.isPaused()) {
          this.child.progressed();
          this.child.stdout.resume();
        }
        return { tick, grey };
      }
      if (this.over !== null) return null;
      await new Promise<void>((resolve) => {
        this.wake = resolve;
      });
    }
  }

  /** Kills the child where it still runs and tells how it ended. */
  close(): Promise<ChildEnd> {
    return this.over === null ? this.child.close() : Promise.resolve(this.over);
  }

  private take(chunk: Uint8Array): void {
    this.child.progressed();
    for (let from = 0; from < chunk.length; ) {
      const length = Math.min(chunk.length - from, this.block.length - this.filled);
      this.block.set(chunk.subarray(from, from + length), this.filled);
      this.filled += length;
      from += length;
      if (this.filled === this.block.length) this.finishBlock();
    }
    if (this.ready.length >= picturesAhead) {
      this.child.stdout.pause();
      this.child.waiting();
    }
  }

  private finishBlock(): void {
    if (this.bits === 8) {
      this.ready.push(this.block);
      this.block = this.newBlock();
    } else {
      this.ready.push(reducedToBytes(this.block, this.pixels, this.bits));
    }
    this.filled = 0;
    this.wake();
  }

  private newBlock(): Uint8Array {
    // Not from the shared pool, so that the buffer can be handed to another thread; not cleared, since every byte is written.
    return new Uint8Array(Buffer.allocUnsafeSlow(this.bits === 8 ? this.pixels : this.pixels * 2).buffer);
  }
}
