import { passthroughOption } from './ffmpeg-version.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { ffmpegInputOptions, inputName } from './input-options.ts';
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
    ...['-v', 'error', '-nostdin', ...ffmpegInputOptions, '-noautorotate', '-copyts'],
    // The trim filter cuts exactly; ffmpeg's own cutting would count from where it takes the file to begin.
    ...(keyframe > 0
      ? ['-noaccurate_seek', '-seek_timestamp', '1', '-ss', seconds(shortlyAfter(recording, keyframe))]
      : []),
  ];
}

/**
 * How long ffmpeg may be silent before it is taken to be stuck, in seconds: frames between the keyframe and the range are decoded without a
 * sign of it. A tenth of a second each is more than the largest picture takes.
 */
export function patience_s(recording: Recording, range: FrameRange, seek: boolean): number {
  const from = seek && recording.seekable ? keyframeBefore(recording, range.first) : 0;
  return 60 + 0.1 * (range.end - from);
}

/** Filter that passes the frames of a range and no others. */
export function trimFilter(recording: Recording, range: FrameRange): string {
  const limits = [
    ...(range.first > 0 ? [`start=${seconds(shortlyBefore(recording, range.first))}`] : []),
    ...(range.end < recording.ticks.length ? [`end=${seconds(shortlyBefore(recording, range.end))}`] : []),
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

/**
 * A time in seconds of the container's clock that lies before a frame by a quarter of the gap before it: ffmpeg rounds it to microseconds and
 * then to the nearest tick, and neither takes it past this frame or back to the one before, even where they are a single tick apart.
 */
function shortlyBefore(recording: Recording, index: number): number {
  const tick = recording.ticks[index] ?? 0;
  const gap = tick - (recording.ticks[index - 1] ?? tick - 1);
  return ((tick - gap / 4) * recording.timebase.numerator) / recording.timebase.denominator;
}

/** A time in seconds of the container's clock that lies after a frame, but before the next one. */
function shortlyAfter(recording: Recording, index: number): number {
  const tick = recording.ticks[index] ?? 0;
  const gap = (recording.ticks[index + 1] ?? tick + 1) - tick;
  return ((tick + gap / 4) * recording.timebase.numerator) / recording.timebase.denominator;
}

function seconds(time_s: number): string {
  return time_s.toFixed(6);
}
