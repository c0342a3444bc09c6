import { passthroughOption } from './ffmpeg-version.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { inputName, untrustedInputOptions } from './input-options.ts';
import { lumaOf } from './luma.ts';
import type { Recording, Region } from './recording.ts';
import { storedRegion, turningFilters } from './stored-region.ts';

/** Which displayed frames are wanted: indices from `first` to before `end`. */
export interface FrameRange {
  readonly first: number;
  readonly end: number;
}

/**
 * Arguments of ffmpeg for the grey values of a region in a range of frames: raw pictures on stdout, their ticks as framecrc on
 * descriptor 3. Both outputs come from one pass of one filter graph, so they hold the same frames in the same order.
 */
export function decodeArguments(
  recording: Recording,
  range: FrameRange,
  region: Region,
  tools: FfmpegTools,
  seek: boolean,
): readonly string[] {
  const graph = [
    `[0:V:0]${[trimFilter(recording, range), ...regionFilters(recording, region)].join(',')},split[picture][copy]`,
    '[copy]crop=1:1:0:0[clock]',
  ].join(';');
  const output = [...passthroughOption(tools.version), '-enc_time_base', '-1'];
  return [
    ...inputOptions(recording, range, seek),
    ...['-i', inputName(recording.path)],
    ...['-filter_complex', graph],
    ...['-map', '[picture]', ...output, '-c:v', 'rawvideo', '-f', 'rawvideo', 'pipe:1'],
    // Without flushing, the ticks of hundreds of pictures would wait in ffmpeg's buffer while the pictures wait for their ticks.
    ...['-map', '[clock]', ...output, '-c:v', 'rawvideo', '-flush_packets', '1', '-f', 'framecrc', 'pipe:3'],
  ];
}

/** Options before the input: the container's own clock is kept; `seek` begins at the keyframe before the range. */
export function inputOptions(recording: Recording, range: FrameRange, seek: boolean): readonly string[] {
  const keyframe = seek && recording.seekable ? keyframeBefore(recording, range.first) : 0;
  return [
    ...['-v', 'error', '-nostdin', ...untrustedInputOptions, '-noautorotate', '-copyts'],
    // The trim filter cuts exactly; ffmpeg's own cutting would count from where it takes the file to begin.
    ...(keyframe > 0 ? ['-noaccurate_seek', '-seek_timestamp', '1', '-ss', seconds(after(recording, keyframe))] : []),
  ];
}

/** Filter that passes exactly the frames of a range. It cuts half-way between two ticks, so the timebase of the filter graph doesn't matter. */
export function trimFilter(recording: Recording, range: FrameRange): string {
  const limits = [
    ...(range.first > 0 ? [`start=${seconds(after(recording, range.first - 1))}`] : []),
    ...(range.end < recording.ticks.length ? [`end=${seconds(after(recording, range.end - 1))}`] : []),
  ];
  return limits.length === 0 ? 'null' : `trim=${limits.join(':')}`;
}

/** Index of the last keyframe that isn't after a frame. */
export function keyframeBefore(recording: Pick<Recording, 'keyframes'>, index: number): number {
  return recording.keyframes.findLast((keyframe) => keyframe <= index) ?? 0;
}

/**
 * Filters that leave the grey values of a region as displayed. A picture of another size than the recording's first one has no such
 * region: the crop then fails and ends the decoding, where ffmpeg would rescale without a word.
 */
function regionFilters(recording: Recording, region: Region): readonly string[] {
  const stored = storedRegion(recording, region);
  const sameSize = `eq(iw\\,${recording.storedWidth_px})*eq(ih\\,${recording.storedHeight_px})`;
  const width = `if(${sameSize}\\,${stored.width}\\,-1)`;
  return [
    `crop=w=${width}:h=${stored.height}:x=${stored.x}:y=${stored.y}:exact=1`,
    ...lumaOf(recording.pixelFormat).filters,
    ...turningFilters(recording.rotation_deg),
  ];
}

/** A time between a frame and the next, in seconds of the container's clock. */
function after(recording: Recording, index: number): number {
  const tick = recording.ticks[index] ?? 0;
  const next = recording.ticks[index + 1] ?? tick + 1;
  return (((tick + next) / 2) * recording.timebase.numerator) / recording.timebase.denominator;
}

function seconds(time_s: number): string {
  return time_s.toFixed(6);
}
