import { type FrameRange, patience_s } from './decode-command.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { frameTime_s } from './frame-clock.ts';
import { JpegParts } from './jpeg-parts.ts';
import { movingArguments, type PictureOptions } from './picture-command.ts';
import type { Recording } from './recording.ts';
import { TimedBlocks } from './timed-blocks.ts';

/** One displayed frame for showing. */
export interface ShownFrame {
  /** Index among the displayed frames of the recording. */
  readonly index: number;
  /** Seconds from the first displayed frame, after the time scale. */
  readonly time_s: number;
  readonly jpeg: Uint8Array;
}

/**
 * The frames from `startIndex` to before `endIndex` as JPEG files with their times, as fast as they are taken; showing each at its time is up to
 * the caller. Frames that can't be decoded are left out. Leaving the loop early, or the signal, ends ffmpeg; the signal's reason is thrown.
 */
export async function* playStretch(
  recording: Recording,
  startIndex: number,
  endIndex: number,
  options: PictureOptions & { readonly timeScale?: number },
  tools: FfmpegTools,
  signal?: AbortSignal,
): AsyncGenerator<ShownFrame, void, void> {
  const range: FrameRange = {
    first: Math.max(0, Math.floor(startIndex)),
    end: Math.min(recording.ticks.length, Math.floor(endIndex)),
  };
  if (range.first >= range.end) return;
  signal?.throwIfAborted();
  const args = movingArguments(recording, range, options, tools, { seek: true });
  const pictures = new TimedBlocks(tools.ffmpeg, args, {
    timebase: recording.timebase,
    cutter: new JpegParts(),
    patience_s: patience_s(recording, range, true),
    signal,
  });
  try {
    let index = range.first;
    for (let picture = await pictures.next(); picture !== null; picture = await pictures.next()) {
      while (index < range.end && (recording.ticks[index] ?? 0) < picture.tick) index++;
      if (recording.ticks[index] !== picture.tick) continue;
      yield { index, time_s: frameTime_s(recording, index, options.timeScale ?? 1), jpeg: picture.bytes };
    }
  } finally {
    await pictures.close();
  }
  signal?.throwIfAborted();
}
