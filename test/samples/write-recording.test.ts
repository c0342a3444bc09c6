import { execFileSync } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { FilePlan } from '../../samples/drawing/bench.ts';
import { randomFrom } from '../../samples/drawing/random.ts';
import { writeRecording } from '../../samples/write-recording.ts';

const load = createRequire(import.meta.url);
const ffmpeg = (load('@ffmpeg-installer/ffmpeg') as { path: string }).path;
const ffprobe = (load('@ffprobe-installer/ffprobe') as { path: string }).path;
const WIDTH = 96;
const HEIGHT = 64;
const base: FilePlan = {
  codec: 'h264',
  extension: 'mp4',
  clock_Hz: 90000,
  start_s: 0,
  rotation_deg: 0,
  quality: 20,
  preset: 'medium',
  timeScale: 1,
  keyframeEvery: 20,
};
let directory = '';
beforeAll(async () => {
  directory = await mkdtemp(join(tmpdir(), 'needlebeat-writing-'));
});
afterAll(() => rm(directory, { recursive: true, force: true }));

function* squares(count: number, tenBits: boolean) {
  for (let frame = 0; frame < count; frame++) {
    const make = (length: number) => (tenBits ? new Uint16Array(length) : new Uint8Array(length));
    const y = make(WIDTH * HEIGHT).fill(tenBits ? 256 : 64);
    for (let row = 20; row < 40; row++) y.fill(tenBits ? 800 : 200, row * WIDTH + frame, row * WIDTH + frame + 16);
    const colour = () => make((WIDTH * HEIGHT) / 4).fill(tenBits ? 512 : 128);
    yield { frame, planes: [y, colour(), colour()] };
  }
}

/** Presentation times in seconds of all packets, ascending, as ffprobe states them. */
function packetTimes(path: string): number[] {
  const text = execFileSync(
    ffprobe,
    ['-v', 'error', '-select_streams', 'v:0', '-show_entries', 'packet=pts_time', '-of', 'csv=p=0', path],
    { encoding: 'utf8' },
  );
  return text
    .split('\n')
    .map((line) => line.replace(',', '').trim())
    .filter((line) => line !== '')
    .map(Number)
    .sort((a, b) => a - b);
}

function unevenTicks(clock_Hz: number, start_s: number, count: number): number[] {
  const random = randomFrom(3);
  const ticks = [Math.round(start_s * clock_Hz)];
  while (ticks.length < count) {
    const gap_s = random.uniform() < 0.15 ? 0.1 : 0.0333 + 0.002 * random.normal();
    ticks.push(ticks[ticks.length - 1]! + Math.round(gap_s * clock_Hz));
  }
  return ticks;
}

describe('writing a recording', () => {
  const cases: readonly (readonly [string, Partial<FilePlan>])[] = [
    ['H.264 in mp4', {}],
    ['H.264 in mov with a coarse clock', { extension: 'mov', clock_Hz: 600 }],
    ['H.264 in mkv, milliseconds', { extension: 'mkv', clock_Hz: 1000 }],
    ['a clock that does not begin at zero', { start_s: 0.187 }],
    ['HEVC', { codec: 'hevc', preset: 'ultrafast' }],
  ];
  it.each(cases)('%s: every packet has the time it was given', async (name, changes) => {
    const file = { ...base, ...changes };
    const ticks = unevenTicks(file.clock_Hz, file.start_s, 45);
    const path = join(directory, `${name.replace(/\W+/g, '-')}.${file.extension}`);
    await writeRecording(ffmpeg, { width_px: WIDTH, height_px: HEIGHT, file, ticks }, squares(45, false), path);
    const times = packetTimes(path);
    expect(times).toHaveLength(45);
    for (const [i, tick] of ticks.entries()) expect(times[i]).toBeCloseTo(tick / file.clock_Hz, 5);
  });

  it('ten bits are kept', async () => {
    const file: FilePlan = { ...base, codec: 'hevc10', preset: 'ultrafast' };
    const path = join(directory, 'ten.mp4');
    const ticks = unevenTicks(file.clock_Hz, 0, 8);
    await writeRecording(ffmpeg, { width_px: WIDTH, height_px: HEIGHT, file, ticks }, squares(8, true), path);
    const format = execFileSync(ffprobe, ['-v', 'error', '-show_entries', 'stream=pix_fmt', '-of', 'csv=p=0', path], {
      encoding: 'utf8',
    });
    expect(format.trim()).toBe('yuv420p10le');
    const raw = execFileSync(
      ffmpeg,
      ['-v', 'error', '-i', path, '-frames:v', '1', '-f', 'rawvideo', '-pix_fmt', 'gray10le', '-'],
      { maxBuffer: 1e8 },
    );
    const y = new Uint16Array(raw.buffer.slice(raw.byteOffset, raw.byteOffset + raw.length));
    expect(Math.abs(y[30 * WIDTH + 8]! - 800)).toBeLessThan(80);
    expect(Math.abs(y[30 * WIDTH + 60]! - 256)).toBeLessThan(40);
  });

  it('the rotation for display is written', async () => {
    const file: FilePlan = { ...base, rotation_deg: 90 };
    const path = join(directory, 'turned.mp4');
    await writeRecording(
      ffmpeg,
      { width_px: WIDTH, height_px: HEIGHT, file, ticks: unevenTicks(90000, 0, 5) },
      squares(5, false),
      path,
    );
    const side = execFileSync(
      ffprobe,
      ['-v', 'error', '-show_entries', 'stream_side_data=rotation', '-of', 'csv=p=0', path],
      { encoding: 'utf8' },
    );
    expect(Math.abs(Number(side.trim().split('\n')[0]!.replace(/,/g, '')))).toBe(90);
  });

  it('a failing coder is an error with its own words', async () => {
    const file: FilePlan = { ...base, preset: 'nonsense' };
    const path = join(directory, 'never.mp4');
    await expect(
      writeRecording(
        ffmpeg,
        { width_px: WIDTH, height_px: HEIGHT, file, ticks: unevenTicks(90000, 0, 5) },
        squares(5, false),
        path,
      ),
    ).rejects.toThrow(/could not write .*never\.mp4/);
  });
});
