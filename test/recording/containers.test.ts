import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { decodeFrames } from '../../src/recording/decode-frames.ts';
import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { frameTime_s } from '../../src/recording/frame-clock.ts';
import { openRecording } from '../../src/recording/open-recording.ts';
import type { Recording } from '../../src/recording/recording.ts';
import {
  decodedFrameTicks,
  hasEncoder,
  numberRegion,
  ownTimes,
  probedFrameTicks,
  readNumber,
  runFfmpeg,
  varyingTimes,
  writeNumberedVideo,
} from './numbered-video.ts';

const tools = await findFfmpeg(process.env);
const frames = 60;
let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-containers-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

/** A file to draw, and what is to be found in it. */
interface Kind {
  readonly title: string;
  readonly file: string;
  readonly encoder: string;
  readonly output: readonly string[];
  readonly filter?: string;
  readonly codec: string;
  readonly pixelFormat: string;
  /** Whether packets carry presentation times, so that nothing has to be decoded to know them. */
  readonly timed: boolean;
  readonly frames: number;
}

const h264 = (file: string, bFrames: number, more: Partial<Kind> = {}): Kind => ({
  title: `H.264 with ${bFrames} B-frames`,
  file,
  encoder: 'libx264',
  output: ['-c:v', 'libx264', '-preset', 'veryfast', '-pix_fmt', 'yuv420p', '-g', '25', '-bf', String(bFrames)],
  codec: 'h264',
  pixelFormat: 'yuv420p',
  timed: true,
  frames,
  ...more,
});
const varying = (file: string, bFrames: number): Kind => ({
  ...h264(file, bFrames, { title: 'H.264 at a varying rate with drops', filter: varyingTimes, frames: frames - 5 }),
  output: [...h264(file, bFrames).output, ...ownTimes(tools)],
});
const hevc = (file: string, pixelFormat: string, openGroups: 0 | 1): Kind => ({
  title: `HEVC ${pixelFormat}`,
  file,
  encoder: 'libx265',
  output: [
    ...['-c:v', 'libx265', '-preset', 'ultrafast', '-pix_fmt', pixelFormat, '-tag:v', 'hvc1'],
    ...['-x265-params', `log-level=none:keyint=25:bframes=3:open-gop=${openGroups}`],
  ],
  codec: 'hevc',
  pixelFormat,
  timed: true,
  frames,
});
const vp9: Kind = {
  title: 'VP9',
  file: 'vp9.webm',
  encoder: 'libvpx-vp9',
  output: [
    ...['-c:v', 'libvpx-vp9', '-pix_fmt', 'yuv420p', '-deadline', 'realtime', '-cpu-used', '8', '-g', '25'],
    ...['-b:v', '400k', '-auto-alt-ref', '1', '-lag-in-frames', '16'],
  ],
  codec: 'vp9',
  pixelFormat: 'yuv420p',
  timed: true,
  frames,
};
const intra = (file: string, encoder: string, codec: string, pixelFormat: string): Kind => ({
  title: codec,
  file,
  encoder,
  output: ['-c:v', encoder, '-pix_fmt', pixelFormat, '-q:v', '3'],
  codec,
  pixelFormat,
  timed: true,
  frames,
});

const kinds: readonly Kind[] = [
  h264('b.mp4', 3),
  h264('i.mov', 0),
  h264('b.mkv', 3),
  h264('b.avi', 2, { timed: false }),
  varying('varying.mp4', 2),
  varying('varying.mkv', 0),
  hevc('hevc.mp4', 'yuv420p', 0),
  hevc('hevc10.mov', 'yuv420p10le', 1),
  vp9,
  intra('mjpeg.avi', 'mjpeg', 'mjpeg', 'yuvj420p'),
  intra('prores.mov', 'prores_ks', 'prores', 'yuv422p10le'),
];

/** Index and number of every frame of a stretch, given by the indices of its first and last frame. */
async function stretch(recording: Recording, first: number, last: number) {
  const stream = decodeFrames(
    recording,
    {
      region: numberRegion,
      start_s: frameTime_s(recording, first, 1),
      end_s: frameTime_s(recording, last, 1),
      timeScale: 1,
    },
    tools,
  );
  const found: { index: number; number: number | null; time_s: number }[] = [];
  for await (const frame of stream) found.push({ index: frame.index, number: readNumber(frame), time_s: frame.time_s });
  return { found, account: stream.account() };
}

async function expectEveryFrame(
  recording: Recording,
  numberOf: (index: number) => number,
  starts: readonly number[] = [10],
) {
  const last = recording.ticks.length - 1;
  const whole = await stretch(recording, 0, last);
  expect(whole.account).toEqual({ claimed: last + 1, decoded: last + 1, lost: 0, problem: null });
  for (const [row, { index, number, time_s }] of whole.found.entries()) {
    expect({ index, number }).toEqual({ index: row, number: numberOf(row) });
    const { numerator, denominator } = recording.timebase;
    expect(time_s).toBeCloseTo(((recording.ticks[row]! - recording.ticks[0]!) * numerator) / denominator, 9);
  }
  for (const first of starts) {
    const end = Math.min(last, first + 4);
    const { found, account } = await stretch(recording, first, end);
    expect(account).toEqual({ claimed: end - first + 1, decoded: end - first + 1, lost: 0, problem: null });
    expect(found.map(({ index, number }) => [index, number])).toEqual(
      Array.from({ length: end - first + 1 }, (_, row) => [first + row, numberOf(first + row)]),
    );
  }
}

describe.each(kinds)('$title in $file', (kind) => {
  const missing = !hasEncoder(tools, kind.encoder);
  if (missing) console.log(`${kind.title}: left out, ffmpeg ${tools.version.text} has no encoder ${kind.encoder}`);
  let recording: Recording;
  const path = () => join(folder, kind.file);
  beforeAll(async () => {
    if (missing) return;
    await writeNumberedVideo(path(), tools, { ...kind, frames });
    recording = await openRecording(path(), tools);
  });

  test.skipIf(missing)('frame times are those of the decoder, and of ffprobe', () => {
    expect([...recording.ticks]).toEqual(decodedFrameTicks(tools, path()));
    // Without times in the packets ffprobe leaves the last pictures in its decoder.
    const probed = probedFrameTicks(tools, path());
    if (kind.timed) expect([...recording.ticks]).toEqual(probed);
    else expect([...recording.ticks].slice(0, probed.length)).toEqual(probed);
    // An old muxer gives the last frame no duration, and its own edit list then cuts that frame away.
    expect([kind.frames, kind.frames - 1]).toContain(recording.ticks.length);
  });

  test.skipIf(missing)('facts', () => {
    expect(recording).toMatchObject({
      ...{ codec: kind.codec, pixelFormat: kind.pixelFormat, width_px: 192, height_px: 112, rotation_deg: 0 },
      ...{ seekable: kind.timed, remarks: [] },
    });
    expect(recording.keyframes[0]).toBe(0);
  });

  test.skipIf(missing)(
    'every frame holds the number that belongs to its index, from wherever decoding starts',
    async () => {
      const numbers = Array.from({ length: frames }, (_, number) => number);
      const kept = kind.filter === undefined ? numbers : numbers.filter((number) => number % 11 !== 5);
      await expectEveryFrame(recording, (index) => kept[index]!, [24, 26]);
    },
  );
});

describe.skipIf(!hasEncoder(tools, 'libx264'))('what edit lists and offsets make of the same pictures', () => {
  const source = () => join(folder, 'source.mp4');
  beforeAll(() => writeNumberedVideo(source(), tools, { frames, output: h264('', 2).output }));

  async function copied(file: string, before: readonly string[], after: readonly string[] = []) {
    const path = join(folder, file);
    await runFfmpeg(tools, [...before, '-i', source(), ...after, '-c:v', 'copy', path]);
    const recording = await openRecording(path, tools);
    expect([...recording.ticks]).toEqual(decodedFrameTicks(tools, path));
    expect([...recording.ticks]).toEqual(probedFrameTicks(tools, path));
    return recording;
  }

  test('an edit list that cuts the beginning away: packets before it are decoded and not shown', async () => {
    const recording = await copied('cut.mp4', ['-ss', '1.1']);
    const first = frames - recording.ticks.length;
    // The packets from the keyframe at 25 on are in the file; 1.1 s is frame 33.
    expect(first).toBe(33);
    await expectEveryFrame(recording, (index) => first + index);
  });

  test('a container clock that does not begin at zero: times count from the first frame', async () => {
    const recording = await copied('late.mp4', ['-itsoffset', '0.25']);
    expect((recording.ticks[0]! * recording.timebase.numerator) / recording.timebase.denominator).toBeCloseTo(0.25, 3);
    await expectEveryFrame(recording, (index) => index);
  });

  test('a sound track that begins earlier than the picture', async () => {
    const sound = ['-f', 'lavfi', '-i', 'sine=duration=3'];
    const recording = await copied(
      'sound.mkv',
      [...sound, '-itsoffset', '0.3'],
      ['-map', '1:v', '-map', '0:a', '-c:a', 'aac'],
    );
    expect(recording.ticks[0]).toBeGreaterThan(250);
    await expectEveryFrame(recording, (index) => index);
  });

  test('fragments, and no edit list for the delay of B-frames', async () => {
    const recording = await copied('fragments.mp4', [], ['-movflags', 'frag_keyframe+empty_moov']);
    await expectEveryFrame(recording, (index) => index);
  });
});
