import type { Recording } from './recording.ts';

/**
 * Reads the output of ffmpeg's framecrc format as it arrives: one line a frame, with its presentation tick. Its header names the timebase; where
 * that isn't the recording's own, ticks are converted to it.
 */
export class FrameTicks {
  private rest = '';
  private readonly waiting: number[] = [];
  private ticksPerUnit = 1;

  constructor(private readonly timebase: Recording['timebase']) {}

  /** Takes the next piece of the output. */
  push(text: string): void {
    const lines = (this.rest + text).split('\n');
    this.rest = lines.pop() ?? '';
    for (const line of lines) {
      const header = /^#tb 0: (\d+)\/(\d+)/.exec(line);
      if (header !== null) {
        const { numerator, denominator } = this.timebase;
        this.ticksPerUnit = (Number(header[1]) * denominator) / (Number(header[2]) * numerator);
      }
      // Columns: stream, decoding tick, presentation tick, duration, size, checksum.
      const frame = /^\d+,\s*-?\d+,\s*(-?\d+),/.exec(line);
      if (frame !== null) this.waiting.push(Math.round(Number(frame[1]) * this.ticksPerUnit));
    }
  }

  /** The next frame's tick, undefined while it hasn't come. */
  shift(): number | undefined {
    return this.waiting.shift();
  }
}
