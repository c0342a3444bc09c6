import { startChild } from './ffmpeg-child.ts';
import { passthroughOption } from './ffmpeg-version.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { FrameTicks } from './frame-ticks.ts';
import { ffmpegInputOptions, inputName } from './input-options.ts';
import type { Recording } from './recording.ts';

/**
 * The presentation ticks of the frames that the decoder puts out, read from the start: for files whose packets carry no presentation
 * times. Costs a decoding of the whole file, or of its first `frames` frames.
 */
export async function decodedTicks(
  path: string,
  timebase: Recording['timebase'],
  tools: FfmpegTools,
  options: { readonly frames?: number; readonly signal?: AbortSignal | undefined } = {},
): Promise<Float64Array> {
  const child = startChild(
    tools.ffmpeg,
    [
      ...['-v', 'error', '-nostdin', ...ffmpegInputOptions, '-noautorotate', '-copyts', '-i', inputName(path)],
      // One corner is enough: the checksum of whole pictures would cost more than decoding them.
      ...['-map', '0:V:0', '-vf', 'crop=2:2:0:0', ...passthroughOption(tools.version), '-enc_time_base', '-1'],
      ...(options.frames === undefined ? [] : ['-frames:v', String(options.frames)]),
      ...['-flush_packets', '1', '-f', 'framecrc', 'pipe:1'],
    ],
    { deadlines: { whole_s: null, silence_s: 60 }, signal: options.signal },
  );
  const ticks = new FrameTicks(timebase);
  const list: number[] = [];
  child.stdout.setEncoding('latin1');
  child.stdout.on('data', (text: string) => {
    child.progressed();
    ticks.push(text);
    for (let tick = ticks.shift(); tick !== undefined; tick = ticks.shift()) list.push(tick);
  });
  await child.end;
  options.signal?.throwIfAborted();
  return Float64Array.from(list);
}
