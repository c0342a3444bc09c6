import { type ChildEnd, type FfmpegChild, startChild } from './ffmpeg-child.ts';
import { FrameTicks } from './frame-ticks.ts';
import type { Recording } from './recording.ts';

/** A picture of the decoder as a block of bytes (raw or coded), with its presentation tick. */
export interface TimedBlock {
  readonly tick: number;
  /** Belongs to whoever takes the block; where the cutter takes blocks back, only until the next one is asked for. */
  readonly bytes: Uint8Array;
}

/** Cuts the bytes of a stream into blocks. */
export interface BlockCutter {
  /** Takes the next piece and hands on every block it completes. */
  take(chunk: Uint8Array, emit: (block: Uint8Array) => void): void;
  /** Takes back a block that the reader is done with, to be filled anew. */
  giveBack?(block: Uint8Array): void;
}

/** Complete pictures kept ready for the reader: enough to keep the decoder busy, whatever the recording's length. */
const blocksAhead = 4;

/**
 * Runs ffmpeg and pairs the pictures on its stdout with the ticks on its descriptor 3. When the reader falls behind, the pipe fills and
 * ffmpeg waits. `close` kills the child and waits for its exit.
 */
export class TimedBlocks {
  private readonly child: FfmpegChild;
  private readonly ticks: FrameTicks;
  private readonly ready: Uint8Array[] = [];
  private lent: Uint8Array | null = null;
  private over: ChildEnd | null = null;
  private wake: () => void = () => {};

  constructor(
    ffmpeg: string,
    args: readonly string[],
    private readonly options: {
      readonly timebase: Recording['timebase'];
      readonly cutter: BlockCutter;
      /** Longest time without any output before ffmpeg is taken to be stuck. */
      readonly patience_s: number;
      readonly signal?: AbortSignal | undefined;
    },
  ) {
    const { cutter, signal } = options;
    this.ticks = new FrameTicks(options.timebase);
    const deadlines = { whole_s: null, silence_s: options.patience_s };
    this.child = startChild(ffmpeg, args, { deadlines, extraPipe: true, signal });
    const emit = (block: Uint8Array) => {
      this.ready.push(block);
      this.wake();
    };
    this.child.stdout.on('data', (chunk: Uint8Array) => {
      this.child.progressed();
      cutter.take(chunk, emit);
      if (this.ready.length >= blocksAhead) {
        this.child.stdout.pause();
        this.child.waiting();
      }
    });
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
  async next(): Promise<TimedBlock | null> {
    if (this.lent !== null) this.options.cutter.giveBack?.(this.lent);
    this.lent = null;
    for (;;) {
      const bytes = this.ready[0];
      const tick = bytes === undefined ? undefined : this.ticks.shift();
      if (bytes !== undefined && tick !== undefined) {
        this.ready.shift();
        if (this.ready.length < blocksAhead && this.child.stdout.isPaused()) {
          this.child.progressed();
          this.child.stdout.resume();
        }
        this.lent = bytes;
        return { tick, bytes };
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
}
