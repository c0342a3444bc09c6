import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import { type DecodeRequest, decodeFrames } from '../../src/recording/decode-frames.ts';
import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { frameTime_s } from '../../src/recording/frame-clock.ts';
import { openRecording } from '../../src/recording/open-recording.ts';
import type { Frame, Recording } from '../../src/recording/recording.ts';
import { ffmpegChildren } from './child-processes.ts';
import {
  hasEncoder,
  numberRegion,
  readNumber,
  runFfmpeg,
  writeNumberedVideo,
  writeRotation,
} from './numbered-video.ts';

const tools = await findFfmpeg(process.env);
const encoder = hasEncoder(tools, 'libx264') ? 'libx264' : 'mpeg4';
const output = ['-c:v', encoder, '-pix_fmt', 'yuv420p', '-g', '30', '-q:v', '3'];
let folder: string;
let recording: Recording;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-decode-'));
  await writeNumberedVideo(join(folder, 'plain.mp4'), tools, { frames: 900, output });
  recording = await openRecording(join(folder, 'plain.mp4'), tools);
});
afterAll(() => rm(folder, { recursive: true, force: true }));
// null where the system can't be asked.
afterEach(() => expect(ffmpegChildren() ?? []).toEqual([]));

const request = (more: Partial<DecodeRequest> = {}): DecodeRequest => ({
  ...{ region: numberRegion, start_s: 0, end_s: 1e6, timeScale: 1 },
  ...more,
});

/** All frames, with copies of their grey values, which are only lent. */
async function all(frames: AsyncIterable<Frame>): Promise<Frame[]> {
  const list: Frame[] = [];
  for await (const frame of frames) list.push({ ...frame, grey: frame.grey.slice() });
  return list;
}

describe('the stretch', () => {
  test('both bounds belong to it', async () => {
    const [start_s, end_s] = [frameTime_s(recording, 100, 1), frameTime_s(recording, 103, 1)];
    const frames = await all(decodeFrames(recording, request({ start_s, end_s }), tools));
    expect(frames.map(({ index }) => index)).toEqual([100, 101, 102, 103]);
    expect(frames.map(({ time_s }) => time_s)).toEqual([100, 101, 102, 103].map((i) => frameTime_s(recording, i, 1)));
    expect(frames.map((frame) => readNumber(frame))).toEqual([100, 101, 102, 103]);
  });

  test('a time scale of 1/8 makes an eighth of every time, and picks the frames by the scaled ones', async () => {
    const frames = await all(decodeFrames(recording, request({ start_s: 0.5, end_s: 0.52, timeScale: 1 / 8 }), tools));
    // 30 frames/s stored, so 240 frames/s filmed: 0.5 s is frame 120.
    expect(frames.map((frame) => readNumber(frame))).toEqual([120, 121, 122, 123, 124]);
    expect(frames[0]?.time_s).toBeCloseTo(0.5, 9);
  });

  test('a stretch between two frames, or after the end, is empty and starts no ffmpeg', async () => {
    for (const bounds of [
      { start_s: 1.01, end_s: 1.02 },
      { start_s: 100, end_s: 200 },
    ]) {
      const stream = decodeFrames(recording, request(bounds), tools);
      expect(await all(stream)).toEqual([]);
      expect(stream.account()).toEqual({ claimed: 0, decoded: 0, lost: 0, problem: null });
    }
  });
});

describe('the region', () => {
  test('odd places and sizes are exact', async () => {
    const end_s = 0;
    const whole = { x: 0, y: 0, width: recording.width_px, height: recording.height_px };
    const region = { x: 13, y: 27, width: 101, height: 43 };
    const [[picture], [part]] = await Promise.all([
      all(decodeFrames(recording, request({ region: whole, end_s }), tools)),
      all(decodeFrames(recording, request({ region, end_s }), tools)),
    ]);
    const expected = new Uint8Array(region.width * region.height);
    for (let y = 0; y < region.height; y++) {
      const from = (region.y + y) * whole.width + region.x;
      expected.set(picture!.grey.subarray(from, from + region.width), y * region.width);
    }
    expect(part!.grey).toEqual(expected);
  });

  test('the memory of frames that are done with is used again, never that of the frame just given', async () => {
    const used = new Set<Uint8Array>();
    let numbers = 0;
    for await (const { grey, width_px } of decodeFrames(recording, request(), tools)) {
      used.add(grey);
      // Time enough for the next frames to arrive.
      if (numbers % 50 === 0) await sleep(5);
      expect(readNumber({ grey, width_px }, numberRegion)).toBe(numbers);
      numbers++;
    }
    expect(numbers).toBe(900);
    expect(used.size).toBeLessThan(200);
  });

  test.each([
    [{ x: 0, y: 0, width: 193, height: 10 }],
    [{ x: -1, y: 0, width: 10, height: 10 }],
    [{ x: 0.5, y: 0, width: 10, height: 10 }],
    [{ x: 0, y: 0, width: 0, height: 10 }],
  ])('%o is refused', (region) => {
    expect(() => decodeFrames(recording, request({ region }), tools)).toThrow(
      /^region: expected whole pixels within 192 x 112, got/,
    );
  });
});

describe('rotation', () => {
  test.each([90, 180, 270] as const)('%d degrees: numbers read upright, in displayed pixels', async (rotation_deg) => {
    const path = join(folder, `turned-${rotation_deg}.mp4`);
    await writeNumberedVideo(path, tools, { frames: 12, output, rotation_deg });
    await writeRotation(path, rotation_deg);
    const turned = await openRecording(path, tools);
    expect(turned).toMatchObject({ rotation_deg, width_px: 192, height_px: 112, remarks: [] });
    const around = { x: 11, y: 23, width: 175, height: 61 };
    const frames = await all(decodeFrames(turned, request({ region: around }), tools));
    expect(frames.map((frame) => readNumber(frame, around))).toEqual(Array.from({ length: 12 }, (_, i) => i));
  });
});

describe('grey values', () => {
  test.skipIf(!hasEncoder(tools, 'ffv1'))(
    'are the coded ones: alike in every pixel format, and nothing is cut off at the ends of the range',
    async () => {
      // Lossless, so that a ramp over the whole range of a byte comes back as it is.
      const ramp = Buffer.alloc(
        256 * 32,
        Uint8Array.from({ length: 256 }, (_, x) => x),
      );
      for (const [pixelFormat, perByte, range] of [
        ['yuv420p', 1, 'tv'],
        ['yuv420p', 1, 'pc'],
        ['yuv422p', 1, 'tv'],
        ['gray', 1, 'pc'],
        ['yuv420p10le', 4, 'tv'],
      ] as const) {
        const path = join(folder, `${pixelFormat}-${range}.mkv`);
        const wide = perByte > 1;
        const plane = Buffer.concat([
          wide ? Buffer.from(Uint16Array.from(ramp, (value) => value * perByte).buffer) : ramp,
          pixelFormat === 'gray' ? Buffer.alloc(0) : Buffer.alloc(256 * 32 * (wide ? 2 : 1) * 2, wide ? 0 : 128),
        ]).subarray(0, rawBytes(pixelFormat));
        const input = ['-f', 'rawvideo', '-pix_fmt', pixelFormat, '-s', '256x32', '-i', 'pipe:0'];
        await runFfmpeg(tools, [...input, '-c:v', 'ffv1', '-color_range', range, path], plane);
        const opened = await openRecording(path, tools);
        expect(opened.pixelFormat).toMatch(/^(yuv|gray)/);
        const region = { x: 0, y: 0, width: 256, height: 32 };
        const [frame] = await all(decodeFrames(opened, request({ region }), tools));
        expect(frame!.grey, `${pixelFormat} ${range}`).toEqual(new Uint8Array(ramp));
      }
    },
  );
});

function rawBytes(pixelFormat: string): number {
  const pixels = 256 * 32;
  switch (pixelFormat) {
    case 'gray':
      return pixels;
    case 'yuv422p':
      return pixels * 2;
    case 'yuv420p10le':
      return pixels * 3;
    default:
      return pixels * 1.5;
  }
}

describe('ending', () => {
  test('leaving the loop early ends ffmpeg; the account counts what was taken', async () => {
    const stream = decodeFrames(recording, request(), tools);
    let taken = 0;
    for await (const _ of stream) if (++taken === 3) break;
    expect(ffmpegChildren() ?? []).toEqual([]);
    expect(stream.account()).toEqual({ claimed: 3, decoded: 3, lost: 0, problem: null });
  });

  test('the signal ends ffmpeg, and its reason comes through untouched', async () => {
    const reason = new Error('enough');
    const controller = new AbortController();
    const stream = decodeFrames(recording, request({ signal: controller.signal }), tools);
    const seen: number[] = [];
    const run = (async () => {
      for await (const { index } of stream) {
        seen.push(index);
        if (index === 5) controller.abort(reason);
      }
    })();
    await expect(run).rejects.toBe(reason);
    expect(seen).toEqual([0, 1, 2, 3, 4, 5]);
    expect(ffmpegChildren() ?? []).toEqual([]);
    expect(stream.account()).toEqual({ claimed: 6, decoded: 6, lost: 0, problem: null });
  });

  test('a signal given before the start lets nothing start', async () => {
    const signal = AbortSignal.abort(new Error('no'));
    await expect(all(decodeFrames(recording, request({ signal }), tools))).rejects.toThrow('no');
    await expect(openRecording(recording.path, tools, signal)).rejects.toThrow('no');
  });

  test('a reader that waits makes ffmpeg wait', async () => {
    const whole = { x: 0, y: 0, width: recording.width_px, height: recording.height_px };
    const frames = decodeFrames(recording, request({ region: whole }), tools)[Symbol.asyncIterator]();
    expect((await frames.next()).value.index).toBe(0);
    await sleep(1500);
    // 900 pictures of 21 kB are far more than the pipe holds: without back pressure it would be done by now.
    const children = ffmpegChildren();
    if (children !== null) expect(children.length).toBe(1);
    await frames.return?.();
  });

  test('several decode at once', async () => {
    const runs = [0, 10, 20].map((start_s) =>
      all(decodeFrames(recording, request({ start_s, end_s: start_s + 0.5 }), tools)),
    );
    const numbers = (await Promise.all(runs)).map((frames) => frames.map((frame) => readNumber(frame)));
    expect(numbers).toEqual([0, 300, 600].map((first) => Array.from({ length: 16 }, (_, i) => first + i)));
  });

  test('a program that is not there is told, not thrown', async () => {
    const stream = decodeFrames(recording, request({ end_s: 1 }), { ...tools, ffmpeg: join(folder, 'nothing') });
    expect(await all(stream)).toEqual([]);
    expect(stream.account()).toEqual({ claimed: 31, decoded: 0, lost: 31, problem: 'ffmpeg could not be started.' });
  });
});
