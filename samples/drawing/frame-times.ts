import type { FilePlan, SensorPlan } from './bench.ts';
import { randomFrom } from './random.ts';

/** When the frames of a recording were taken and what the container says of it. */
export interface FrameTimes {
  /** Ticks of the container's clock, ascending; the first one is that of `start_s`. */
  readonly ticks: readonly number[];
  /** True seconds from the first frame: exactly what the ticks say, times the file's time scale. */
  readonly time_s: Float64Array;
}

/**
 * Draws the times of frames of a phone: an even rate with a jitter, single frames dropped, and in the middle third a lower
 * rate where the phone finds it too dark. Rounded to ticks of the container's clock, and exact after that.
 */
export function frameTimes(sensor: SensorPlan, file: FilePlan, length_s: number, seed: number): FrameTimes {
  const random = randomFrom(seed);
  const start = Math.round(file.start_s * file.clock_Hz);
  const toTick = (time_s: number): number => start + Math.round((time_s / file.timeScale) * file.clock_Hz);
  const ticks: number[] = [];
  let planned = 0;
  while (planned <= length_s) {
    const tick = toTick(Math.max(0, planned + (ticks.length === 0 ? 0 : sensor.jitter_s * random.normal())));
    const dropped = ticks.length > 0 && random.uniform() < sensor.droppedShare;
    if (!dropped && (ticks.length === 0 || tick > ticks[ticks.length - 1]!)) ticks.push(tick);
    const dim = planned > length_s / 3 && planned < (2 * length_s) / 3;
    planned += 1 / (sensor.rate_Hz * (dim ? sensor.dimRateShare : 1));
  }
  const time_s = Float64Array.from(ticks, (tick) => ((tick - start) / file.clock_Hz) * file.timeScale);
  return { ticks, time_s };
}
