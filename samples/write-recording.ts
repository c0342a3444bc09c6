import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { rm } from 'node:fs/promises';
import type { FilePlan } from './drawing/bench.ts';
import { matroskaBlock, matroskaHead } from './drawing/matroska.ts';

/** What is written: size of the stored picture, how it is coded, and for each frame its tick of the container's clock. */
export interface RecordingPlan {
  readonly width_px: number;
  readonly height_px: number;
  readonly file: FilePlan;
  readonly ticks: readonly number[];
}

const TAGS = ['-color_primaries', 'bt709', '-color_trc', 'bt709', '-colorspace', 'bt709', '-color_range', 'tv'];

function codingArguments(plan: RecordingPlan): string[] {
  const { file } = plan;
  const keys = ['-g', String(file.keyframeEvery)];
  switch (file.codec) {
    case 'h264':
      return [
        '-c:v',
        'libx264',
        '-profile:v',
        'high',
        '-pix_fmt',
        'yuv420p',
        '-preset',
        file.preset,
        '-crf',
        String(file.quality),
        '-threads',
        '1',
        ...keys,
      ];
    case 'hevc':
    case 'hevc10':
      return [
        '-c:v',
        'libx265',
        '-pix_fmt',
        file.codec === 'hevc10' ? 'yuv420p10le' : 'yuv420p',
        '-preset',
        file.preset,
        '-crf',
        String(file.quality),
        '-tag:v',
        'hvc1',
        '-x265-params',
        'log-level=error:pools=2',
        ...keys,
      ];
  }
}

/** Arguments of ffmpeg (4.0 or later) that code raw frames in Matroska on stdin into `path`, keeping every frame's own time. */
export function codingCommand(plan: RecordingPlan, path: string): string[] {
  const { file } = plan;
  const clock = clockArguments(file);
  // Bit-exact: no version or date in the file, so that drawing it again with the same ffmpeg gives the same bytes.
  return [
    ...[
      '-nostdin',
      '-hide_banner',
      '-loglevel',
      'error',
      '-y',
      '-f',
      'matroska',
      '-copyts',
      '-i',
      'pipe:0',
      '-map',
      '0:v:0',
    ],
    ...['-vsync', 'passthrough', '-enc_time_base', '-1', ...codingArguments(plan), ...TAGS],
    ...['-bitexact', '-map_metadata', '-1', ...clock, '-avoid_negative_ts', 'disabled', `file:${path}`],
  ];
}

/** Arguments that copy a coded file into another one that says how far to turn it for display; older ffmpeg only does it while copying. */
export function turningCommand(from: string, to: string, file: FilePlan): string[] {
  return [
    ...[
      '-nostdin',
      '-hide_banner',
      '-loglevel',
      'error',
      '-y',
      '-copyts',
      '-i',
      `file:${from}`,
      '-map',
      '0:v:0',
      '-c',
      'copy',
    ],
    ...['-bitexact', '-map_metadata', '-1', '-metadata:s:v:0', `rotate=${file.rotation_deg}`],
    ...[...clockArguments(file), '-avoid_negative_ts', 'disabled', `file:${to}`],
  ];
}

function clockArguments(file: FilePlan): string[] {
  return file.extension === 'mkv' ? [] : ['-video_track_timescale', String(file.clock_Hz), '-movflags', '+faststart'];
}

/**
 * Writes frames as a video file through ffmpeg. The frames reach it as uncompressed pictures in Matroska, each with its own
 * time in microseconds; the container's clock must therefore not be finer than 500 kHz.
 * @throws Error with ffmpeg's own words when it fails.
 */
export async function writeRecording(
  ffmpegPath: string,
  plan: RecordingPlan,
  frames: Iterable<{ readonly frame: number; readonly planes: readonly ArrayBufferView[] }>,
  path: string,
): Promise<void> {
  const turned = plan.file.rotation_deg !== 0;
  const coded = turned ? `${path}.unturned.${plan.file.extension}` : path;
  const coder = startFfmpeg(ffmpegPath, codingCommand(plan, coded), path);
  await coder.send(matroskaHead(plan.width_px, plan.height_px, plan.file.codec === 'hevc10'));
  for (const { frame, planes } of frames) {
    if (coder.broken()) break;
    const tick = plan.ticks[frame];
    if (tick === undefined) throw new RangeError(`writeRecording: frame ${frame} has no tick`);
    const bytes = planes.map((plane) => new Uint8Array(plane.buffer, plane.byteOffset, plane.byteLength));
    const time_us = Math.round((tick / plan.file.clock_Hz) * 1e6);
    await coder.send(
      matroskaBlock(
        time_us,
        bytes.reduce((sum, part) => sum + part.length, 0),
      ),
    );
    for (const part of bytes) await coder.send(part);
  }
  await coder.finish();
  if (!turned) return;
  await startFfmpeg(ffmpegPath, turningCommand(coded, path, plan.file), path).finish();
  await rm(coded);
}

/** A running ffmpeg that is fed through its standard input. */
interface Feeding {
  readonly send: (bytes: Uint8Array) => Promise<void>;
  readonly broken: () => boolean;
  /** Ends the input and waits; throws with ffmpeg's own words when it failed. */
  readonly finish: () => Promise<void>;
}

function startFfmpeg(ffmpegPath: string, command: readonly string[], path: string): Feeding {
  const child = spawn(ffmpegPath, command, { stdio: ['pipe', 'ignore', 'pipe'] });
  let words = '';
  child.stderr.setEncoding('utf8').on('data', (text: string) => {
    words = (words + text).slice(-4000);
  });
  const ended = new Promise<number | null>((resolve, reject) => {
    child.once('error', reject);
    child.once('close', resolve);
  });
  let broken = false;
  child.stdin.on('error', () => {
    broken = true;
  });
  return {
    send: async (bytes) => {
      if (!broken && !child.stdin.write(bytes)) await Promise.race([once(child.stdin, 'drain'), ended]);
    },
    broken: () => broken,
    finish: async () => {
      child.stdin.end();
      const code = await ended;
      if (code !== 0) throw new Error(`ffmpeg could not write ${path} (exit ${code}): ${words.trim()}`);
    },
  };
}
