import { execFileSync, spawn } from 'node:child_process';
import { readFile, writeFile } from 'node:fs/promises';
import { passthroughOption } from '../../src/recording/ffmpeg-version.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';

/** Displayed size of the pictures drawn here. */
export const size = { width: 192, height: 112 };
const block_px = 16;
const bits = 10;
const left_px = 16;
const top_px = 32;

/** The region that holds the number. */
export const numberRegion = { x: left_px, y: top_px, width: bits * block_px, height: 2 * block_px };

/** Grey picture whose blocks spell a number: a row of bits and below it the row of their opposites, so that no other part of a picture, and no turned one, reads as a number. */
function drawNumber(number: number): Uint8Array {
  const grey = new Uint8Array(size.width * size.height).fill(110);
  for (let y = 0; y < 2 * block_px; y++) {
    for (let x = 0; x < bits * block_px; x++) {
      const bit = (number >> Math.floor(x / block_px)) & 1;
      const bright = bit === (y < block_px ? 1 : 0);
      grey[(top_px + y) * size.width + left_px + x] = bright ? 200 : 40;
    }
  }
  return grey;
}

/** Reads the number of a picture drawn by `drawNumber` from its `numberRegion`, or a part of a picture that starts elsewhere; null where it isn't one. */
export function readNumber(
  picture: { readonly width_px: number; readonly grey: Uint8Array },
  origin = { x: numberRegion.x, y: numberRegion.y },
): number | null {
  let number = 0;
  for (let bit = 0; bit < bits; bit++) {
    const x = left_px - origin.x + bit * block_px;
    const [upper, lower] = [0, 1].map((row) => {
      const y = top_px - origin.y + row * block_px;
      let sum = 0;
      for (let dy = 4; dy < 12; dy++)
        for (let dx = 4; dx < 12; dx++) sum += picture.grey[(y + dy) * picture.width_px + x + dx] ?? Number.NaN;
      return sum / 64;
    });
    const difference = (upper ?? 0) - (lower ?? 0);
    if (!(Math.abs(difference) > 60)) return null;
    if (difference > 0) number |= 1 << bit;
  }
  return number;
}

/** Turns a grey picture anticlockwise by 0, 90, 180 or 270 degrees: what a camera stores that says "turn me clockwise". */
function turnedBack(grey: Uint8Array, width: number, rotation_deg: number): { grey: Uint8Array; width: number } {
  if (rotation_deg === 0) return { grey, width };
  const height = grey.length / width;
  const turned = new Uint8Array(grey.length);
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) turned[(width - 1 - x) * height + y] = grey[y * width + x] ?? 0;
  }
  return turnedBack(turned, height, rotation_deg - 90);
}

/** Writes a video of numbered frames 0, 1, 2, … with the ffmpeg in use, encoded by the given output arguments. */
export async function writeNumberedVideo(
  path: string,
  tools: FfmpegTools,
  options: {
    readonly frames: number;
    readonly output: readonly string[];
    readonly rate?: string;
    readonly rotation_deg?: number;
    readonly filter?: string;
  },
): Promise<void> {
  const rotation_deg = options.rotation_deg ?? 0;
  const upright = rotation_deg % 180 === 0;
  const stored = upright ? `${size.width}x${size.height}` : `${size.height}x${size.width}`;
  const pictures = Array.from(
    { length: options.frames },
    (_, number) => turnedBack(drawNumber(number), size.width, rotation_deg).grey,
  );
  await runFfmpeg(
    tools,
    [
      ...['-f', 'rawvideo', '-pix_fmt', 'gray', '-s', stored, '-r', options.rate ?? '30', '-i', 'pipe:0'],
      ...(options.filter === undefined ? [] : ['-vf', options.filter]),
      ...[...options.output, path],
    ],
    Buffer.concat(pictures),
  );
}

/** Runs ffmpeg with these arguments and waits for it; throws with what it said where it fails. */
export function runFfmpeg(tools: FfmpegTools, args: readonly string[], input?: Uint8Array): Promise<void> {
  return new Promise((resolve, reject) => {
    const child = spawn(tools.ffmpeg, ['-v', 'error', '-y', ...args], { stdio: ['pipe', 'ignore', 'pipe'] });
    let stderr = '';
    child.stderr.on('data', (text) => {
      stderr += String(text);
    });
    child.once('error', reject);
    child.once('close', (code) => (code === 0 ? resolve() : reject(new Error(`ffmpeg: ${stderr}`))));
    child.stdin.on('error', () => {});
    child.stdin.end(input ?? Buffer.alloc(0));
  });
}

/** Output arguments for a file whose frame times are those of its pictures, in ticks of 1/90000 s. */
export function ownTimes(tools: FfmpegTools): readonly string[] {
  return [...passthroughOption(tools.version), '-enc_time_base', '1:90000'];
}

/** Filter for a rate that varies, a gap of 0.1 s and frames dropped: every eleventh is missing. */
export const varyingTimes = [
  'settb=1/90000',
  'setpts=N*3000+700*mod(N\\,4)+if(gt(N\\,50)\\,9000\\,0)',
  'select=not(eq(mod(n\\,11)\\,5))',
].join(',');

const encoders = new Map<string, string>();

/** Whether the ffmpeg in use can encode with this encoder. */
export function hasEncoder(tools: FfmpegTools, name: string): boolean {
  const list =
    encoders.get(tools.ffmpeg) ?? execFileSync(tools.ffmpeg, ['-v', 'error', '-encoders'], { encoding: 'utf8' });
  encoders.set(tools.ffmpeg, list);
  return new RegExp(`^ V\\S+ ${name} `, 'm').test(list);
}

/** Makes an mp4 or mov say that its picture is to be turned clockwise, by writing the matrix of its first track header (ISO/IEC 14496-12, 8.3.2). */
export async function writeRotation(path: string, rotation_deg: 0 | 90 | 180 | 270): Promise<void> {
  const file = await readFile(path);
  const header = file.indexOf('tkhd');
  const matrix = header + 4 + (file[header + 4] === 0 ? 40 : 52);
  const one = 0x10000;
  const [cos, sin] = { 0: [one, 0], 90: [0, one], 180: [-one, 0], 270: [0, -one] }[rotation_deg] as [number, number];
  for (const [place, value] of [cos, sin, 0, -sin, cos, 0].entries()) file.writeInt32BE(value, matrix + 4 * place);
  await writeFile(path, file);
}

/** Presentation ticks of the frames as ffprobe decodes them: our packets' ticks are checked against these. */
export function probedFrameTicks(tools: FfmpegTools, path: string): number[] {
  const output = execFileSync(
    tools.ffprobe,
    ['-v', 'quiet', '-select_streams', 'V:0', '-show_entries', 'frame=best_effort_timestamp', '-of', 'csv=p=0', path],
    { encoding: 'utf8' },
  );
  return [...output.matchAll(/^(-?\d+)/gm)].map((line) => Number(line[1]));
}

/** Presentation ticks of the frames that ffmpeg puts out, each as it is. */
export function decodedFrameTicks(tools: FfmpegTools, path: string): number[] {
  const output = execFileSync(
    tools.ffmpeg,
    [
      ...['-v', 'quiet', '-copyts', '-i', path, '-map', '0:V:0', ...passthroughOption(tools.version)],
      ...['-enc_time_base', '-1', '-f', 'framecrc', '-'],
    ],
    { encoding: 'utf8' },
  );
  return [...output.matchAll(/^\d+,\s*-?\d+,\s*(-?\d+),/gm)].map((line) => Number(line[1]));
}
