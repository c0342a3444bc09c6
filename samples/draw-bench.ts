import { mkdir, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { BenchPlan } from './drawing/bench.ts';
import { film } from './drawing/filming.ts';
import { runBench } from './drawing/run.ts';
import { sessionOf } from './drawing/session.ts';
import { framesCsv, truthOf } from './drawing/truth.ts';
import { writeRecording } from './write-recording.ts';

/** What is written and where it goes. */
export interface DrawOptions {
  readonly ffmpegPath: string;
  readonly directory: string;
  /** Names of the files without directory; frames null: not written. */
  readonly names: {
    readonly session: string;
    readonly recording: string;
    readonly truth: string;
    readonly frames: string | null;
  };
  readonly onFrame?: (frame: number, frames: number) => void;
}

/** Runs, films and stores a bench: recording, session, truth and, when asked for, the true angle in every frame. */
export async function drawBench(plan: BenchPlan, options: DrawOptions): Promise<void> {
  const { directory, names } = options;
  await mkdir(directory, { recursive: true });
  const run = runBench(plan);
  const frames = run.times.ticks.length;
  const sideways = plan.file.rotation_deg === 90 || plan.file.rotation_deg === 270;
  const size = { width_px: plan.camera.width_px, height_px: plan.camera.height_px };
  const stored = sideways ? { width_px: size.height_px, height_px: size.width_px } : size;
  const watched = (function* () {
    for (const item of film(run)) {
      options.onFrame?.(item.frame, frames);
      yield item;
    }
  })();
  // Drawn under another name first, so that an interrupted drawing doesn't leave half a recording behind.
  const half = join(directory, `unfinished.${plan.file.extension}`);
  await writeRecording(options.ffmpegPath, { ...stored, file: plan.file, ticks: run.times.ticks }, watched, half);
  await rename(half, join(directory, names.recording));
  const json = (value: unknown): string => `${JSON.stringify(value, null, 2)}\n`;
  await writeFile(join(directory, names.session), json(sessionOf(run, names.recording)));
  await writeFile(join(directory, names.truth), json(truthOf(run, names.recording)));
  if (names.frames !== null) await writeFile(join(directory, names.frames), framesCsv(run));
}
