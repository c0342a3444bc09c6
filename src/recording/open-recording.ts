import { resolve } from 'node:path';
import { decodedTicks } from './decoded-ticks.ts';
import { childOutput } from './ffmpeg-child.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { InputError } from './input-error.ts';
import { ffprobeInputOptions, inputName } from './input-options.ts';
import { listPackets, type PacketList } from './packet-list.ts';
import { readableFile } from './readable-file.ts';
import type { Recording } from './recording.ts';
import { parseStreamFacts, type StreamFacts, streamFactsArguments } from './stream-facts.ts';

/**
 * Learns all about a recording that can be known without decoding it: facts of the container and the presentation tick of every
 * frame a player would show. Throws InputError with one sentence naming the file where it can't be used; rejects with the signal's reason
 * when aborted.
 */
export async function openRecording(path: string, tools: FfmpegTools, signal?: AbortSignal): Promise<Recording> {
  const absolute = resolve(path);
  const { bytes, head } = await readableFile(absolute);
  const leaving = new AbortController();
  const stop = signal === undefined ? leaving.signal : AbortSignal.any([signal, leaving.signal]);
  // The packets are listed while the container is being described: either takes a while only to start.
  const listing = listPackets(absolute, tools, stop);
  // Whoever waits for it hears of a failure; nobody may be waiting yet.
  listing.catch(() => {});
  const facts = await probeFacts(absolute, head, tools, signal).catch(async (error) => {
    leaving.abort();
    await listing.catch(() => {});
    throw error;
  });
  const remarks = [...facts.remarks];
  const { ticks, keyframes, seekable, packets } = await displayedFrames(
    absolute,
    facts,
    listing,
    remarks,
    tools,
    signal,
  );
  if (ticks.length === 0)
    throw new InputError(`"${absolute}" holds no picture that can be read: it is damaged or cut short.`);
  if (Math.abs(ticks[0] ?? 0) > Number.MAX_SAFE_INTEGER || Math.abs(ticks.at(-1) ?? 0) > Number.MAX_SAFE_INTEGER) {
    throw new InputError(`"${absolute}" has frame times too large to be exact: its clock is damaged.`);
  }
  const { statedFrames, remarks: _, ...kept } = facts;
  const listed = packets.pts.length + packets.untimed + packets.hidden;
  // Other containers than this count frames that were never there (an avi's skipped ones).
  if (facts.container.startsWith('mov') && statedFrames !== null && listed < statedFrames) {
    remarks.push(`The container states ${statedFrames} frames but only ${listed} can be read: the file is cut short.`);
  } else if (facts.container === 'avi' && head.length >= 8 && head.readUInt32LE(4) + 8 > bytes) {
    remarks.push('The file is shorter than it states: it is cut short.');
  } else if (packets.complaint !== null) {
    remarks.push('Reading the file to its end met damage; frames may be missing.');
  }
  return { path: absolute, ...kept, ticks, keyframes, seekable, bytes, remarks };
}

async function probeFacts(path: string, head: Buffer, tools: FfmpegTools, signal?: AbortSignal): Promise<StreamFacts> {
  const run = await childOutput(
    tools.ffprobe,
    ['-v', 'error', ...ffprobeInputOptions, '-select_streams', 'V:0', ...streamFactsArguments, inputName(path)],
    { deadlines: { whole_s: 60, silence_s: 60 }, limit_bytes: 4 << 20, signal },
  );
  if (run.stopped !== null)
    throw new InputError(`"${path}" couldn't be examined: reading it took too long or told too much.`);
  if (run.code !== 0) throw new InputError(`"${path}" ${whyUnreadable(run.stderr, head)}`);
  const facts = parseStreamFacts(run.stdout.toString('utf8'));
  if (facts === null) throw new InputError(`"${path}" holds no moving picture: a video recording was expected.`);
  return facts;
}

function whyUnreadable(stderr: string, head: Buffer): string {
  const codec = /Codec \(([^)]*)\) not on whitelist/.exec(stderr)?.[1];
  if (codec !== undefined) {
    return `holds a track (${codec}) of a kind that is not read here: H.264, HEVC, VP9, MJPEG or ProRes was expected.`;
  }
  // A file called .mp4 is taken for one whatever it holds: only a real one begins with one of these boxes.
  const isMp4 = /^(ftyp|moov|mdat|wide|free|skip|pnot)$/.test(head.toString('latin1', 4, 8));
  if (isMp4 && /moov atom not found/i.test(stderr))
    return 'is cut short: the index at its end is missing, so no frame can be found.';
  if (/moov atom|not on whitelist|Invalid data|Invalid argument/i.test(stderr)) {
    return 'is not a video recording that can be read (mp4, mov, mkv, webm or avi was expected).';
  }
  return `can't be read as a video recording: ${stderr.trim().split('\n').at(-1) ?? 'no reason given'}.`;
}

/**
 * Which frames a player shows, and when: from the packets, where they carry presentation times and the decoder's first frames bear them out, else
 * from the decoder.
 */
async function displayedFrames(
  path: string,
  facts: StreamFacts,
  listing: Promise<PacketList>,
  remarks: string[],
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<{ ticks: Float64Array; keyframes: Uint32Array; seekable: boolean; packets: PacketList }> {
  const [packets, head] = await Promise.all([
    listing,
    decodedTicks(path, facts.timebase, tools, { frames: 12, signal }),
  ]);
  if (head.length === 0 && packets.pts.length + packets.untimed > 0) {
    throw new InputError(
      `"${path}" holds pictures (${facts.codec}) that ffmpeg ${tools.version.text} can't decode: they are damaged, or of a kind it doesn't know.`,
    );
  }
  const listed = new Set(packets.pts);
  if (packets.untimed > 0 || head.some((tick) => !listed.has(tick))) {
    const ticks = ascending(await decodedTicks(path, facts.timebase, tools, { signal }), remarks);
    return { ticks, keyframes: Uint32Array.of(0), seekable: false, packets };
  }
  // Pictures that lean on something before the file's beginning (it was cut out of a longer one) can't be shown by anybody.
  const shown = ascending(packets.pts, remarks);
  const ticks = shown.filter((tick) => tick >= (head[0] ?? tick));
  if (ticks.length < shown.length) {
    remarks.push(`The first ${shown.length - ticks.length} frames can't be decoded and are passed over.`);
  }
  const keyTicks = new Set(packets.pts.filter((_, row) => packets.key[row] === 1));
  const keyframes = Uint32Array.from(ticks.keys()).filter((index) => keyTicks.has(ticks[index] ?? Number.NaN));
  return { ticks, keyframes, seekable: keyframes.length > 0, packets };
}

/** Ticks in the order of display. Of frames that share a tick only one is ever seen. */
function ascending(ticks: Float64Array, remarks: string[]): Float64Array {
  const sorted = ticks.toSorted();
  const distinct = sorted.filter((tick, row) => row === 0 || tick !== sorted[row - 1]);
  if (distinct.length < sorted.length) {
    remarks.push(`${sorted.length - distinct.length} frames share their time with another one and are passed over.`);
  }
  return distinct;
}
