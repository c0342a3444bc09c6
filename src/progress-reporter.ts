import type { Progress } from './measure.ts';

/** Shows progress on a stream: a bar that redraws itself on a terminal, a plain line every tenth of the way otherwise. */
export interface ProgressReporter {
  readonly show: (progress: Progress) => void;
  /** Leaves the stream on a fresh line. */
  readonly end: () => void;
}

const BAR_CHARACTERS = 24;
const REDRAW_MS = 100;

/** @param now_ms clock in milliseconds; only differences count. */
export function progressReporter(
  stream: NodeJS.WriteStream,
  quiet: boolean,
  now_ms: () => number = () => performance.now(),
): ProgressReporter {
  if (quiet) return { show: () => undefined, end: () => undefined };
  const began_ms = now_ms();
  let drawn_ms = Number.NEGATIVE_INFINITY;
  let tenth = -1;
  let onBar = false;
  const show = (progress: Progress) => {
    const t_ms = now_ms();
    const line = progressLine(progress, (t_ms - began_ms) / 1000);
    const finished = progress.segmentsDone === progress.segments;
    if (stream.isTTY) {
      if (t_ms - drawn_ms < REDRAW_MS && !finished) return;
      drawn_ms = t_ms;
      onBar = true;
      stream.write(`\r\u001b[K${bar(progress)} ${line}`);
    } else {
      const now = Math.floor((10 * progress.done_s) / Math.max(1e-9, progress.total_s));
      if (now <= tenth) return;
      tenth = now;
      stream.write(`${line}\n`);
    }
  };
  return { show, end: () => void (onBar && stream.write('\n')) };
}

function bar({ done_s, total_s }: Progress): string {
  const filled = Math.round((BAR_CHARACTERS * done_s) / Math.max(1e-9, total_s));
  return `${'#'.repeat(filled)}${'.'.repeat(BAR_CHARACTERS - filled)}`;
}

/** `62 % followed, segment 9 of 15, 212 frames/s, 7.1 x real time, 12 s left` */
export function progressLine(progress: Progress, elapsed_s: number): string {
  const { done_s, total_s, frames, segmentsDone, segments } = progress;
  const parts = [
    `${Math.floor((100 * done_s) / Math.max(1e-9, total_s))} % followed`,
    `${segmentsDone} of ${segments} segments done`,
  ];
  if (elapsed_s > 0.5 && done_s > 0) {
    parts.push(`${Math.round(frames / elapsed_s)} frames/s`, `${(done_s / elapsed_s).toFixed(1)} x real time`);
    if (segmentsDone < segments) parts.push(`${Math.ceil(((total_s - done_s) * elapsed_s) / done_s)} s left`);
  }
  return parts.join(', ');
}
