import { spawn } from 'node:child_process';
import { mkdir, mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { cpus, tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { fitRingDown } from '../../src/oscillation/fit-ring-down.ts';
import { type FfmpegTools, findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { openRecording } from '../../src/recording/open-recording.ts';
import type { Region } from '../../src/recording/recording.ts';
import type { Trace } from '../../src/tracking/trace.ts';

/**
 * Speed and memory, as ratios measured in one run:
 *   wall time of measuring over wall time of ffmpeg decoding the same stretch to nowhere (1080p H.264, three minutes in
 *   six segments: a short sweep; and one minute in two, of which starting up is a good part),
 *   peak memory of the Node process for a recording of 1 minute and of 10 minutes,
 *   time of one ring-down fit of 1,000 samples.
 * Usage: npm run bench [-- REPEATS]
 */
const REPEATS = Number(process.argv[2] ?? 3);
const CLI = fileURLToPath(new URL('../../src/cli.js', import.meta.url));
const SAMPLE = fileURLToPath(new URL('../../../samples/boathouse/boathouse.mp4', import.meta.url));

interface Run {
  readonly wall_s: number;
  readonly peakMemory_MB: number;
  readonly status: number | null;
}

/** Runs a command; wall time from outside, peak resident memory of the process itself (not of its children) from /proc. */
function timed(command: string, args: readonly string[]): Promise<Run> {
  return new Promise((done, failed) => {
    const began = performance.now();
    const child = spawn(command, args, { stdio: ['ignore', 'ignore', 'pipe'] });
    let errors = '';
    let peak_kB = 0;
    const look = setInterval(async () => {
      const text = await readFile(`/proc/${child.pid}/status`, 'utf8').catch(() => '');
      peak_kB = Math.max(peak_kB, Number(/VmHWM:\s+(\d+)/.exec(text)?.[1] ?? 0));
    }, 50);
    child.stderr.on('data', (chunk) => {
      errors = `${errors}${chunk}`.slice(-2000);
    });
    child.on('error', failed);
    child.on('close', (status) => {
      clearInterval(look);
      if (status === 2 || (status ?? 3) > 2) failed(new Error(`${command} ${args.join(' ')}: ${errors}`));
      else done({ wall_s: (performance.now() - began) / 1000, peakMemory_MB: peak_kB / 1024, status });
    });
  });
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? Number.NaN;
}

/**
 * Writes a minute of 1080p from the sample, with noise, as phones code it: H.264 High with CABAC and deblocking, about
 * 14 Mbit/s, a keyframe every 2 s.
 */
async function codeMinute(dir: string, tools: FfmpegTools): Promise<string> {
  const file = join(dir, 'coded.mp4');
  const from = ['-stream_loop', '-1', '-i', SAMPLE, '-t', '60'];
  const filter = ['-vf', 'scale=1920:1080:flags=bicubic,noise=alls=6:allf=t,format=yuv420p'];
  const rate = ['-b:v', '14M', '-maxrate', '17M', '-bufsize', '17M', '-g', '60'];
  const coding = ['-c:v', 'libx264', '-preset', 'veryfast', '-profile:v', 'high', ...rate];
  await timed(tools.ffmpeg, ['-nostdin', '-v', 'error', '-y', ...from, ...filter, ...coding, '-an', file]);
  return file;
}

/** Repeats the coded minute to the wanted length, and writes a session over all of it. */
async function makeSession(minute: string, name: string, minutes: number, tools: FfmpegTools): Promise<string> {
  const dir = dirname(minute);
  const video = join(dir, `${name}.mp4`);
  const seconds = 60 * minutes;
  const loop = ['-stream_loop', String(minutes - 1), '-i', minute];
  await timed(tools.ffmpeg, ['-nostdin', '-v', 'error', '-y', ...loop, '-c', 'copy', video]);
  const session = join(dir, `${name}.needlebeat.json`);
  const segments: object[] = [];
  // Stretches of half a minute one after the other, as a sweep has them, without gaps: nearly all of the recording is decoded.
  for (let start = 0, n = 1; start + 10 <= seconds; start += 30, n += 1) {
    const end = Math.min(start + 30, seconds) - 0.1;
    segments.push({ id: `s${n}`, recording: 'A', view: 'v', start_s: start, end_s: end, current_A: null });
  }
  const view = { id: 'v', recording: 'A', kind: 'plan', region: await scaledRegion() };
  const recordings = [{ id: 'A', file: `${name}.mp4` }];
  await writeFile(
    session,
    JSON.stringify({ format: 'needlebeat/session', version: 1, recordings, views: [view], segments }),
  );
  return session;
}

async function scaledRegion(): Promise<Region> {
  const recording = await openRecording(SAMPLE, await findFfmpeg(process.env));
  const text = await readFile(SAMPLE.replace(/\.mp4$/, '.needlebeat.json'), 'utf8');
  const region = (JSON.parse(text) as { views: { region: Region }[] }).views[0]?.region;
  if (!region) throw new Error('the sample has no view');
  const kx = 1920 / recording.width_px;
  const ky = 1080 / recording.height_px;
  const [x, y] = [Math.floor(region.x * kx), Math.floor(region.y * ky)];
  return {
    x,
    y,
    width: Math.min(1920 - x, Math.ceil(region.width * kx)),
    height: Math.min(1080 - y, Math.ceil(region.height * ky)),
  };
}

async function speed(minute: string, minutes: number, tools: FfmpegTools): Promise<void> {
  const session = await makeSession(minute, `speed-${minutes}`, minutes, tools);
  const dir = dirname(minute);
  const video = session.replace(/\.needlebeat\.json$/, '.mp4');
  const ratios: number[] = [];
  const measuring: number[] = [];
  const decoding: number[] = [];
  for (let i = 0; i < REPEATS; i++) {
    const decode = await timed(tools.ffmpeg, [
      '-nostdin',
      '-v',
      'error',
      '-i',
      video,
      '-map',
      '0:v:0',
      '-f',
      'null',
      '-',
    ]);
    const measure = await timed(process.execPath, [CLI, 'measure', session, '--out', join(dir, 'out'), '--quiet']);
    decoding.push(decode.wall_s);
    measuring.push(measure.wall_s);
    ratios.push(measure.wall_s / decode.wall_s);
  }
  const frames = await frameCount(video, tools);
  console.log(`1080p H.264, ${minutes} min, ${frames} frames, median of ${REPEATS}:`);
  console.log(`  decode only   ${(frames / median(decoding)).toFixed(0)} frames/s (${median(decoding).toFixed(2)} s)`);
  console.log(
    `  measuring     ${(frames / median(measuring)).toFixed(0)} frames/s (${median(measuring).toFixed(2)} s)`,
  );
  console.log(`  wall time of measuring / decode only: ${median(ratios).toFixed(2)} (target 1.15 at most)`);
}

async function frameCount(video: string, tools: FfmpegTools): Promise<number> {
  return (await openRecording(video, tools)).ticks.length;
}

async function memory(minute: string, tools: FfmpegTools): Promise<void> {
  const peaks: number[] = [];
  const dir = dirname(minute);
  for (const minutes of [1, 10]) {
    const session = await makeSession(minute, `memory-${minutes}`, minutes, tools);
    const runs: Run[] = [];
    // When the collector comes is chance: the shorter one is run as often as the speed.
    for (let i = 0; i < (minutes === 1 ? REPEATS : 1); i++) {
      runs.push(await timed(process.execPath, [CLI, 'measure', session, '--out', join(dir, 'out'), '--quiet']));
    }
    const peak_MB = median(runs.map((run) => run.peakMemory_MB));
    peaks.push(peak_MB);
    console.log(`peak memory of the Node process, ${minutes} min of 1080p: ${peak_MB.toFixed(0)} MB`);
    await rm(session.replace(/\.needlebeat\.json$/, '.mp4'));
  }
  console.log(
    `  10 min / 1 min: ${((peaks[1] ?? Number.NaN) / (peaks[0] ?? 1)).toFixed(3)} (target 1.10 at most; both under 400 MB)`,
  );
}

function fitTime(): void {
  const n = 1000;
  const time_s = Float64Array.from({ length: n }, (_, i) => i / 30);
  const noise = (i: number) => 2e-4 * Math.sin(12.9898 * i * i + 78.233 * i);
  const angle = time_s.map(
    (t, i) => 0.17 * Math.exp(-0.03 * t) * Math.cos(2 * Math.PI * 0.9 * t + 0.3) + 0.1 + noise(i),
  );
  const still = time_s.map((_, i) => 400 + 0.02 * Math.sin(i * i));
  const trace: Trace = {
    time_s,
    angle,
    unit: 'rad',
    x_px: still,
    y_px: still,
    quality: time_s.map(() => 1),
    frame_index: Int32Array.from(time_s, (_, i) => i),
    refused: [],
    halfLength_px: 100,
    u_common: 0,
  };
  const times_ms: number[] = [];
  for (let i = 0; i < 30; i++) {
    const began = performance.now();
    fitRingDown(trace, { u_time_scale: 2e-5, view: 'plan' });
    times_ms.push(performance.now() - began);
  }
  console.log(`fit of 1,000 samples: median ${median(times_ms).toFixed(1)} ms of 30 (target under 20 ms)`);
}

const dir = await mkdtemp(join(tmpdir(), 'needlebeat-bench-'));
try {
  await mkdir(join(dir, 'out'));
  await stat(SAMPLE);
  const tools = await findFfmpeg(process.env);
  console.log(`${cpus().length} cores, node ${process.version}, ffmpeg ${tools.version.text}, ${resolve(SAMPLE)}`);
  fitTime();
  const minute = await codeMinute(dir, tools);
  for (const minutes of [1, 3]) await speed(minute, minutes, tools);
  await memory(minute, tools);
} finally {
  await rm(dir, { recursive: true, force: true });
}
