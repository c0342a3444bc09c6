import ffmpegCommand from 'fluent-ffmpeg';
import { type FrameRange, inputOptions, trimFilter } from './decode-command.ts';
import { passthroughOption } from './ffmpeg-version.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { inputName } from './input-options.ts';
import type { Recording, Region } from './recording.ts';
import { storedRegion, turningFilters } from './stored-region.ts';

/** How a picture for looking at is made. */
export interface PictureOptions {
  /** Widest picture wanted; smaller ones aren't enlarged. */
  readonly maxWidth_px?: number;
  /** Part of the displayed picture, before it is made smaller. */
  readonly crop?: Region;
}

/** Arguments of ffmpeg for one picture as displayed, as a JPEG or PNG file on stdout. */
export function stillArguments(
  recording: Recording,
  index: number,
  options: PictureOptions & { readonly format: 'jpeg' | 'png' },
  tools: FfmpegTools,
  seek: boolean,
): string[] {
  const range = { first: index, end: index + 1 };
  const command = ffmpegCommand(inputName(recording.path))
    .inputOptions([...inputOptions(recording, range, seek)])
    .videoFilters([trimFilter(recording, range), ...lookFilters(recording, options, options.format)])
    .outputOptions(['-map', '0:V:0', ...passthroughOption(tools.version)])
    .frames(1);
  if (options.format === 'jpeg') command.videoCodec('mjpeg').outputOptions(['-q:v', '3']);
  else command.videoCodec('png');
  return command.format('image2pipe').output('pipe:1')._getArguments();
}

/** Arguments of ffmpeg for a range of pictures as displayed: JPEG parts on stdout, their ticks as framecrc on descriptor 3. */
export function movingArguments(
  recording: Recording,
  range: FrameRange,
  options: PictureOptions,
  tools: FfmpegTools,
  how: { readonly seek: boolean; readonly keyframesOnly?: boolean; readonly select?: string },
): string[] {
  const filters = [
    trimFilter(recording, range),
    ...(how.select === undefined ? [] : [how.select]),
    ...lookFilters(recording, options, 'jpeg'),
  ];
  const outputOptions = [...passthroughOption(tools.version), '-enc_time_base', '-1', '-flush_packets', '1'];
  return ffmpegCommand(inputName(recording.path))
    .inputOptions([...inputOptions(recording, range, how.seek), ...(how.keyframesOnly ? ['-skip_frame', 'nokey'] : [])])
    .complexFilter(`[0:V:0]${filters.join(',')},split[picture][copy];[copy]crop=2:2:0:0[clock]`)
    .output('pipe:1')
    .outputOptions(['-map', '[picture]', ...outputOptions, '-q:v', '5'])
    .videoCodec('mjpeg')
    .format('mpjpeg')
    .output('pipe:3')
    .outputOptions(['-map', '[clock]', ...outputOptions])
    .videoCodec('rawvideo')
    .format('framecrc')
    ._getArguments();
}

/** Size of the picture that the options lead to. */
export function pictureSize(
  recording: Pick<Recording, 'width_px' | 'height_px'>,
  options: PictureOptions,
): { readonly width_px: number; readonly height_px: number } {
  const { width, height } = options.crop ?? { width: recording.width_px, height: recording.height_px };
  const scale = Math.min(1, (options.maxWidth_px ?? width) / width);
  return { width_px: Math.max(1, Math.round(width * scale)), height_px: Math.max(1, Math.round(height * scale)) };
}

function lookFilters(recording: Recording, options: PictureOptions, format: 'jpeg' | 'png'): readonly string[] {
  const { width_px, height_px } = pictureSize(recording, options);
  const { crop } = options;
  const stored = crop === undefined ? null : storedRegion(recording, crop);
  const turned = recording.rotation_deg === 90 || recording.rotation_deg === 270;
  const size = turned ? `${height_px}:${width_px}` : `${width_px}:${height_px}`;
  return [
    ...(stored === null ? [] : [`crop=${stored.width}:${stored.height}:${stored.x}:${stored.y}:exact=1`]),
    `scale=${size}:flags=area`,
    // Turning comes last: the smaller picture is turned faster.
    `format=${format === 'jpeg' ? 'yuvj420p' : 'rgb24'}`,
    ...turningFilters(recording.rotation_deg),
  ];
}
