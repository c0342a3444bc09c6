import { decodeArguments, type FrameRange, keyframeBefore, patience_s } from './decode-command.ts';
import { decodeProblem } from './decode-problem.ts';
import type { ChildEnd } from './ffmpeg-child.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { framesWithin, frameTime_s } from './frame-clock.ts';
import { lumaOf } from './luma.ts';
import { RawPictures } from './raw-pictures.ts';
import type { DecodeAccount, Frame, Recording, Region } from './recording.ts';
import { storedRegion } from './stored-region.ts';
import { TimedBlocks } from './timed-blocks.ts';

/** What is to be decoded. */
export interface DecodeRequest {
  /** Region of the displayed picture, whole pixels within it. */
  readonly region: Region;
  /** Seconds from the first displayed frame, after the time scale; frames with start_s <= time <= end_s are decoded. */
  readonly start_s: number;
  readonly end_s: number;
  /** Multiplies the container's clock. */
  readonly timeScale: number;
  readonly signal?: AbortSignal | undefined;
}

/** The frames of a stretch, in the order of their times. Can be gone through once. */
export interface FrameStream extends AsyncIterable<Frame> {
  /**
   * What became of the frames that the container claims in the stretch; valid once the frames have ended. After leaving the loop early it
   * counts up to the last frame taken.
   */
  account(): DecodeAccount;
}

/**
 * Decodes a region of the frames in a stretch of a recording to grey values: one ffmpeg, started at the keyframe before, read as a stream. Memory
 * doesn't depend on the length. Leaving the loop early, or the signal, ends ffmpeg and waits for its exit; the signal's reason is thrown. A damaged
 * recording is no error: the frames end, or have gaps, and the account says so. Throws RangeError for a region outside the picture.
 */
export function decodeFrames(recording: Recording, request: DecodeRequest, tools: FfmpegTools): FrameStream {
  storedRegion(recording, request.region);
  const range = framesWithin(recording, request.start_s, request.end_s, request.timeScale);
  let account: DecodeAccount = { claimed: 0, decoded: 0, lost: 0, problem: null };
  const frames = decodeRange(recording, range, request, tools, (result) => {
    account = result;
  });
  return { [Symbol.asyncIterator]: () => frames, account: () => account };
}

async function* decodeRange(
  recording: Recording,
  range: FrameRange,
  request: DecodeRequest,
  tools: FfmpegTools,
  settle: (account: DecodeAccount) => void,
): AsyncGenerator<Frame, void, void> {
  const { region, timeScale, signal } = request;
  let next = range.first;
  let decoded = 0;
  let end: ChildEnd | null = null;
  let finished = false;
  try {
    for (const seek of attempts(recording, range)) {
      signal?.throwIfAborted();
      const args = decodeArguments(recording, range, region, tools, seek);
      const cutter = new RawPictures(region.width * region.height, lumaOf(recording.pixelFormat).bits);
      const pictures = new TimedBlocks(tools.ffmpeg, args, {
        timebase: recording.timebase,
        cutter,
        patience_s: patience_s(recording, range, seek),
        signal,
      });
      try {
        for (let picture = await pictures.next(); picture !== null; picture = await pictures.next()) {
          const index = indexOfTick(recording.ticks, picture.tick, next, range.end);
          if (index === null) continue;
          // The seek came out after the first frame wanted: begin again from the start of the file.
          if (seek && decoded === 0 && index > range.first) break;
          next = index + 1;
          decoded++;
          yield {
            index,
            time_s: frameTime_s(recording, index, timeScale),
            width_px: region.width,
            height_px: region.height,
            grey: picture.bytes,
          };
          signal?.throwIfAborted();
        }
      } finally {
        end = await pictures.close();
      }
      signal?.throwIfAborted();
      if (decoded > 0) break;
    }
    finished = true;
  } finally {
    const claimed = (finished ? range.end : next) - range.first;
    const lost = claimed - decoded;
    const problem = finished ? decodeProblem({ recording, range, timeScale, next, lost, end }) : null;
    settle({ claimed, decoded, lost, problem });
  }
}

/** Whether to seek, in the order of trying. */
function attempts(recording: Recording, range: FrameRange): readonly boolean[] {
  if (range.first === range.end) return [];
  return recording.seekable && keyframeBefore(recording, range.first) > 0 ? [true, false] : [false];
}

/** Index of a tick from `from` on, null where no frame wanted has it. Frames come in order, so the search is a short walk. */
function indexOfTick(ticks: Float64Array, tick: number, from: number, end: number): number | null {
  for (let index = from; index < end && (ticks[index] ?? tick) <= tick; index++) {
    if (ticks[index] === tick) return index;
  }
  return null;
}
