import { access, constants, stat } from 'node:fs/promises';
import { resolve } from 'node:path';
import { decodedTicks } from './decoded-ticks.ts';
import { childOutput } from './ffmpeg-child.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { InputError } from './input-error.ts';
import { inputName, untrustedInputOptions } from './input-options.ts';
import { listPackets, type PacketList } from './packet-list.ts';
import type { Recording } from './recording.ts';
import { parseStreamFacts, type StreamFacts, streamFactsArguments } from './stream-facts.ts';

/**
 * Learns all about a recording that can be known without decoding it: facts of the container and the presentation tick of every
 * frame a player would show. Throws InputError with one sentence naming the file where it can't be used; rejects with the signal's reason
 * when aborted.
 */
export async function openRecording(path: string, tools: FfmpegTools, signal?: AbortSignal): Promise<Recording> {
  const absolute = resolve(path);
  const bytes = await sizeOfFile(absolute);
  const facts = await probeFacts(absolute, tools, signal);
  const packets = await listPackets(absolute, tools, signal);
  const remarks = [...facts.remarks];
  const { ticks, keyframes, seekable } = await displayedFrames(absolute, facts, packets, remarks, tools, signal);
  if (ticks.length === 0)
    throw new InputError(`"${absolute}" holds no picture that can be read: it is damaged or cut short.`);
  if (Math.abs(ticks[0] ?? 0) > Number.MAX_SAFE_INTEGER || Math.abs(ticks.at(-1) ?? 0) > Number.MAX_SAFE_INTEGER) {
    throw new InputError(`"${absolute}" has frame times too large to be exact: its clock is damaged.`);
  }
  const { statedFrames, remarks: _, ...kept } = facts;
  const listed = packets.pts.length + packets.untimed + packets.hidden;
  if (statedFrames !== null && listed < statedFrames) {
    remarks.push(`The container states ${statedFrames} frames but only ${listed} can be read: the file is cut short.`);
  } else if (packets.complaint !== null) {
    remarks.push('Reading the file to its end met damage; frames may be missing.');
  }
  return { path: absolute, ...kept, ticks, keyframes, seekable, bytes, remarks };
}

async function sizeOfFile(path: string): Promise<number> {
  const facts = await stat(path).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT' || error.code === 'ENOTDIR')
      throw new InputError(`"${path}" doesn't exist: a recording was expected there.`);
    throw new InputError(`"${path}" can't be read: ${error.message}.`);
  });
  if (facts.isDirectory()) throw new InputError(`"${path}" is a folder: a recording was expected there.`);
  if (!facts.isFile()) throw new InputError(`"${path}" isn't a regular file: a recording was expected there.`);
  if (facts.size === 0) throw new InputError(`"${path}" is empty (zero bytes): a recording was expected there.`);
  await access(path, constants.R_OK).catch(() => {
    throw new InputError(`"${path}" can't be read: its permissions don't allow it.`);
  });
  return facts.size;
}

async function probeFacts(path: string, tools: FfmpegTools, signal?: AbortSignal): Promise<StreamFacts> {
  const run = await childOutput(
    tools.ffprobe,
    ['-v', 'error', ...untrustedInputOptions, '-select_streams', 'V:0', ...streamFactsArguments, inputName(path)],
    { deadlines: { whole_s: 60, silence_s: 60 }, limit_bytes: 4 << 20, signal },
  );
  if (run.stopped !== null)
    throw new InputError(`"${path}" couldn't be examined: reading it took too long or told too much.`);
  if (run.code !== 0) throw new InputError(`"${path}" ${whyUnreadable(run.stderr)}`);
  const facts = parseStreamFacts(run.stdout.toString('utf8'));
  if (facts === null) throw new InputError(`"${path}" holds no moving picture: a video recording was expected.`);
  return facts;
}

function whyUnreadable(stderr: string): string {
  if (/moov atom not found/i.test(stderr))
    return 'is cut short: the index at its end is missing, so no frame can be found.';
  if (/not on whitelist|Invalid data|Invalid argument/i.test(stderr)) {
    return 'is not a video recording that can be read (mp4, mov, mkv, webm or avi was expected).';
  }
  return `can't be read as a video recording: ${stderr.trim().split('\n').at(-1) ?? 'no reason given'}.`;
}

/** Which frames a player shows, and when: from the packets where they carry presentation times, else from the decoder. */
async function displayedFrames(
  path: string,
  facts: StreamFacts,
  packets: PacketList,
  remarks: string[],
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<{ ticks: Float64Array; keyframes: Uint32Array; seekable: boolean }> {
  if (packets.untimed > 0) {
    const ticks = ascending(await decodedTicks(path, facts.timebase, tools, { signal }), remarks);
    return { ticks, keyframes: ticks.length > 0 ? Uint32Array.of(0) : new Uint32Array(), seekable: false };
  }
  const ticks = ascending(packets.pts, remarks);
  const keyTicks = new Set(packets.pts.filter((_, row) => packets.key[row] === 1));
  const keyframes = Uint32Array.from(ticks.keys()).filter((index) => keyTicks.has(ticks[index] ?? Number.NaN));
  return { ticks, keyframes, seekable: keyframes.length > 0 };
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
