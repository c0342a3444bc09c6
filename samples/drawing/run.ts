import type { BenchPlan } from './bench.ts';
import { type FrameTimes, frameTimes } from './frame-times.ts';
import { totalField } from './magnet.ts';
import { integrateMotion, type Motion } from './motion.ts';
import { type Schedule, scheduleOf } from './schedule.ts';

/** A bench that has been run, but not yet filmed: what happened and when frames were taken. */
export interface Run {
  readonly plan: BenchPlan;
  readonly schedule: Schedule;
  readonly motion: Motion;
  readonly times: FrameTimes;
}

/** Runs a bench: places its steps in time, integrates the motion, draws the frame times. */
export function runBench(plan: BenchPlan): Run {
  const schedule = scheduleOf(plan);
  const start = totalField(plan.apparatus, 0).direction_rad + 0.02;
  const motion = integrateMotion(plan.apparatus, schedule, start);
  return { plan, schedule, motion, times: frameTimes(plan.sensor, plan.file, schedule.length_s, plan.seed + 1) };
}

/** Which line of the stored picture shows a displayed pixel: lines are read one after the other. */
export function lineReader(plan: BenchPlan): {
  readonly lines: number;
  readonly lineOf: (x: number, y: number) => number;
} {
  const { width_px: w, height_px: h } = plan.camera;
  switch (plan.file.rotation_deg) {
    case 0:
      return { lines: h, lineOf: (_x, y) => y };
    case 90:
      return { lines: w, lineOf: (x) => w - 1 - x };
    case 180:
      return { lines: h, lineOf: (_x, y) => h - 1 - y };
    case 270:
      return { lines: w, lineOf: (x) => x };
  }
}

/** Seconds by which a line is exposed after the middle line. */
export function lineDelay_s(plan: BenchPlan, line: number, lines: number): number {
  return plan.sensor.readout_s * ((line + 0.5) / lines - 0.5);
}
