import { patience_s } from './decode-command.ts';
import { childOutput } from './ffmpeg-child.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { InputError } from './input-error.ts';
import { type PictureOptions, stillArguments } from './picture-command.ts';
import type { Recording } from './recording.ts';

/**
 * One displayed frame as a JPEG or PNG file: exactly the frame with this index, turned for display, whatever its codec. Throws RangeError
 * for an index or a crop outside the recording, InputError where the frame can't be decoded; rejects with the signal's reason when aborted.
 */
export async function stillPicture(
  recording: Recording,
  frameIndex: number,
  options: PictureOptions & { readonly format: 'jpeg' | 'png' },
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<Uint8Array> {
  if (!Number.isInteger(frameIndex) || frameIndex < 0 || frameIndex >= recording.ticks.length) {
    throw new RangeError(
      `frameIndex: expected a whole number from 0 to ${recording.ticks.length - 1}, got ${frameIndex}`,
    );
  }
  // A seek that comes out after the frame leaves nothing: then from the start of the file.
  const range = { first: frameIndex, end: frameIndex + 1 };
  for (const seek of [true, false]) {
    const run = await childOutput(tools.ffmpeg, stillArguments(recording, frameIndex, options, tools, seek), {
      deadlines: { whole_s: null, silence_s: patience_s(recording, range, seek) },
      limit_bytes: 256 << 20,
      signal,
    });
    if (run.stopped === null && run.stdout.length > 0) return new Uint8Array(run.stdout);
  }
  throw new InputError(
    `"${recording.path}": frame ${frameIndex} can't be decoded: the recording is damaged or cut short there.`,
  );
}
