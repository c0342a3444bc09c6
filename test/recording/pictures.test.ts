import { execFileSync } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { filmStrip } from '../../src/recording/film-strip.ts';
import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { frameTime_s } from '../../src/recording/frame-clock.ts';
import { InputError } from '../../src/recording/input-error.ts';
import { openRecording } from '../../src/recording/open-recording.ts';
import { playStretch } from '../../src/recording/play-stretch.ts';
import type { Recording } from '../../src/recording/recording.ts';
import { stillPicture } from '../../src/recording/still-picture.ts';
import { ffmpegChildren } from './child-processes.ts';
import { hasEncoder, readNumber, writeNumberedVideo, writeRotation } from './numbered-video.ts';

const tools = await findFfmpeg(process.env);
const h264 = hasEncoder(tools, 'libx264') ? ['-c:v', 'libx264', '-bf', '2'] : ['-c:v', 'mpeg4', '-q:v', '3'];
const frames = 120;
let folder: string;
const recordings: Record<string, Recording> = {};
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-pictures-'));
  const draw = async (file: string, output: readonly string[], rotation_deg: 0 | 270 = 0) => {
    const path = join(folder, file);
    await writeNumberedVideo(path, tools, { frames, output: [...output, '-pix_fmt', 'yuv420p'], rotation_deg });
    if (rotation_deg !== 0) await writeRotation(path, rotation_deg);
    recordings[file] = await openRecording(path, tools);
  };
  await draw('long.mp4', [...h264, '-g', '1000', '-sc_threshold', '0']);
  await draw('short.mp4', [...h264, '-g', '15']);
  await draw('turned.mp4', [...h264, '-g', '15'], 270);
  if (hasEncoder(tools, 'libx265')) {
    await draw('hevc.mp4', ['-c:v', 'libx265', '-preset', 'ultrafast', '-x265-params', 'log-level=none:keyint=50']);
  }
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const corner = { x: 0, y: 0 };

/** The grey values of a JPEG or PNG file. */
function greyOf(picture: Uint8Array, width_px: number) {
  const args = ['-v', 'error', '-f', 'image2pipe', '-i', 'pipe:0', '-pix_fmt', 'gray', '-f', 'rawvideo', 'pipe:1'];
  const grey = new Uint8Array(execFileSync(tools.ffmpeg, args, { input: picture }));
  return { width_px, height_px: grey.length / width_px, grey };
}

const isJpeg = (bytes: Uint8Array) => bytes[0] === 0xff && bytes[1] === 0xd8 && bytes.at(-1) === 0xd9;

describe('a still picture', () => {
  test.each([
    ['long.mp4', 97],
    ['long.mp4', 119],
    ['short.mp4', 0],
    ['short.mp4', 44],
    ['turned.mp4', 46],
    ['hevc.mp4', 51],
  ])('%s, frame %i: exactly that frame, upright', async (file, index) => {
    const recording = recordings[file];
    if (recording === undefined) {
      console.log(`${file}: left out, ffmpeg ${tools.version.text} can't draw it`);
      return;
    }
    const picture = await stillPicture(recording, index, { format: 'png' }, tools);
    expect([...picture.slice(1, 4)]).toEqual([...'PNG'].map((letter) => letter.charCodeAt(0)));
    const grey = greyOf(picture, 192);
    expect(grey.height_px).toBe(112);
    expect(readNumber(grey, corner)).toBe(index);
  });

  test('a part of it, as JPEG, in displayed pixels', async () => {
    const crop = { x: 10, y: 20, width: 171, height: 70 };
    const picture = await stillPicture(recordings['turned.mp4']!, 33, { crop, format: 'jpeg' }, tools);
    expect(isJpeg(picture)).toBe(true);
    expect(readNumber(greyOf(picture, crop.width), crop)).toBe(33);
  });

  test('made smaller, never larger', async () => {
    const small = await stillPicture(recordings['short.mp4']!, 5, { maxWidth_px: 96, format: 'png' }, tools);
    expect(greyOf(small, 96).height_px).toBe(56);
    const same = await stillPicture(recordings['short.mp4']!, 5, { maxWidth_px: 1000, format: 'png' }, tools);
    expect(greyOf(same, 192).height_px).toBe(112);
  });

  test('an index outside the recording is refused; a file that has gone is told', async () => {
    const recording = recordings['short.mp4']!;
    const still = (index: number, of = recording) => stillPicture(of, index, { format: 'png' }, tools);
    await expect(still(120)).rejects.toThrow('frameIndex: expected a whole number from 0 to 119, got 120');
    await expect(still(1.5)).rejects.toThrow(RangeError);
    const gone = { ...recording, path: join(folder, 'gone.mp4') };
    await expect(still(3, gone)).rejects.toThrow(InputError);
    await expect(still(3, gone)).rejects.toThrow(/gone\.mp4": frame 3 can't be decoded/);
  });
});

describe('the film strip', () => {
  test('takes the nearest keyframes where there are enough', async () => {
    const strip = await filmStrip(recordings['short.mp4']!, [0, 17, 58, 119], 112, tools);
    expect(strip.every((jpeg) => jpeg !== null && isJpeg(jpeg))).toBe(true);
    expect(strip.map((jpeg) => readNumber(greyOf(jpeg!, 192), corner))).toEqual([0, 15, 60, 105]);
  });

  test('takes the very frames where keyframes are too far apart', async () => {
    const strip = await filmStrip(recordings['long.mp4']!, [0, 40, 80, 119], 112, tools);
    expect(strip.map((jpeg) => readNumber(greyOf(jpeg!, 192), corner))).toEqual([0, 40, 80, 119]);
  });

  test('has the height asked for, turned', async () => {
    const [jpeg] = await filmStrip(recordings['turned.mp4']!, [30], 56, tools);
    expect(greyOf(jpeg!, 96).height_px).toBe(56);
  });
});

describe('a stretch for showing', () => {
  test('every frame once, with its index, time and picture', async () => {
    const recording = recordings['short.mp4']!;
    const shown: (number | null)[][] = [];
    for await (const { index, time_s, jpeg } of playStretch(recording, 41, 47, { timeScale: 0.5 }, tools)) {
      expect(time_s).toBe(frameTime_s(recording, index, 0.5));
      shown.push([index, readNumber(greyOf(jpeg, 192), corner)]);
    }
    expect(shown).toEqual([41, 42, 43, 44, 45, 46].map((index) => [index, index]));
  });

  test('leaving early, and the signal, end ffmpeg', async () => {
    const recording = recordings['long.mp4']!;
    for await (const { index } of playStretch(recording, 0, 120, {}, tools)) if (index === 2) break;
    expect(ffmpegChildren() ?? []).toEqual([]);
    const controller = new AbortController();
    const run = (async () => {
      for await (const { index } of playStretch(recording, 0, 120, {}, tools, controller.signal)) {
        if (index === 2) controller.abort(new Error('enough'));
      }
    })();
    await expect(run).rejects.toThrow('enough');
    expect(ffmpegChildren() ?? []).toEqual([]);
  });
});
