import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import { frameTime_s } from '../../src/recording/frame-clock.ts';

/** Presentation times of all displayed frames of a recording, seconds from the first one after the time scale. */
export function frameTimes_s({ recording, timeScale }: OpenRecording): Float64Array {
  return Float64Array.from(recording.ticks, (_, index) => frameTime_s(recording, index, timeScale));
}
