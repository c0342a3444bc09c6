import { patience_s } from './decode-command.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { JpegParts } from './jpeg-parts.ts';
import { movingArguments } from './picture-command.ts';
import type { Recording } from './recording.ts';
import { stillPicture } from './still-picture.ts';
import { TimedBlocks } from './timed-blocks.ts';

/**
 * Small JPEG pictures for a film strip, one for each index, `height_px` high. They are made cheaply: where the recording has
 * keyframes enough, each is the keyframe nearest to the frame asked for, not that frame itself. A picture is null where
 * nothing near it can be decoded. Rejects with the signal's reason when aborted.
 */
export async function filmStrip(
  recording: Recording,
  frameIndices: readonly number[],
  height_px: number,
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<(Uint8Array | null)[]> {
  const maxWidth_px = Math.max(1, Math.round((height_px * recording.width_px) / recording.height_px));
  const last = recording.ticks.length - 1;
  const indices = frameIndices.map((index) => Math.min(last, Math.max(0, Math.round(index))));
  const nearest = indices.map((index) => nearestOf(recording.keyframes, index));
  const useKeyframes = recording.seekable && new Set(nearest).size * 2 >= new Set(indices).size;
  const shown = useKeyframes ? nearest : indices;
  const wanted = [...new Set(shown)].sort((a, b) => a - b);
  // Reading through the keyframes between beats starting ffmpeg for each picture, unless nearly all of them would be decoded for nothing.
  const between = recording.keyframes.filter((k) => k >= (wanted[0] ?? 0) && k <= (wanted.at(-1) ?? 0)).length;
  const readThrough = !useKeyframes || between <= wanted.length * 15;
  const pictures = readThrough
    ? await picturesInOnePass(recording, wanted, { maxWidth_px, keyframesOnly: useKeyframes }, tools, signal)
    : await picturesOneByOne(recording, wanted, maxWidth_px, tools, signal);
  const had = [...pictures.keys()].sort((a, b) => a - b);
  return shown.map((index) => (had.length === 0 ? null : (pictures.get(nearestOf(had, index)) ?? null)));
}

async function picturesInOnePass(
  recording: Recording,
  wanted: readonly number[],
  how: { readonly maxWidth_px: number; readonly keyframesOnly: boolean },
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<Map<number, Uint8Array>> {
  const pictures = new Map<number, Uint8Array>();
  const range = { first: wanted[0] ?? 0, end: (wanted.at(-1) ?? -1) + 1 };
  if (range.first >= range.end) return pictures;
  const byTick = new Map(wanted.map((index) => [recording.ticks[index], index]));
  const args = movingArguments(recording, range, { maxWidth_px: how.maxWidth_px }, tools, {
    seek: true,
    keyframesOnly: how.keyframesOnly,
    select: selectFilter(recording, wanted),
  });
  const blocks = new TimedBlocks(tools.ffmpeg, args, {
    timebase: recording.timebase,
    cutter: new JpegParts(),
    patience_s: patience_s(recording, range, true),
    signal,
  });
  try {
    for (let block = await blocks.next(); block !== null; block = await blocks.next()) {
      const index = byTick.get(block.tick);
      if (index !== undefined) pictures.set(index, block.bytes);
    }
  } finally {
    await blocks.close();
  }
  signal?.throwIfAborted();
  return pictures;
}

async function picturesOneByOne(
  recording: Recording,
  wanted: readonly number[],
  maxWidth_px: number,
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<Map<number, Uint8Array>> {
  const pictures = new Map<number, Uint8Array>();
  const queue = wanted.values();
  const takeTurns = async () => {
    for (const index of queue) {
      const still = await stillPicture(recording, index, { maxWidth_px, format: 'jpeg' }, tools, signal).catch(
        () => null,
      );
      signal?.throwIfAborted();
      if (still !== null) pictures.set(index, still);
    }
  };
  // Two at a time: much of the time of each goes into starting ffmpeg, which one core does while the other decodes.
  await Promise.all([takeTurns(), takeTurns()]);
  return pictures;
}

/** Filter that passes only these frames, by their time: within half a tick of it. */
function selectFilter(recording: Recording, indices: readonly number[]): string {
  const tick_s = recording.timebase.numerator / recording.timebase.denominator;
  const times = indices.map((index) => {
    const tick = recording.ticks[index] ?? 0;
    return `between(t\\,${((tick - 0.5) * tick_s).toFixed(7)}\\,${((tick + 0.5) * tick_s).toFixed(7)})`;
  });
  return `select=${times.join('+')}`;
}

/** The one of some ascending indices that is nearest to an index; the index itself where there are none. */
function nearestOf(ascending: Uint32Array | readonly number[], index: number): number {
  let best = ascending[0] ?? index;
  for (const candidate of ascending) if (Math.abs(candidate - index) < Math.abs(best - index)) best = candidate;
  return best;
}
