import type { JobProgress } from '../contract.ts';

/**
 * Makes progress reports of a job.
 * @param total_s seconds of recording to be done. @param now_ms clock; only differences count.
 */
export function rateMeter(job: string, total_s: number, now_ms: () => number) {
  const began_ms = now_ms();
  return (done_s: number, frames: number): JobProgress => {
    const elapsed_s = (now_ms() - began_ms) / 1000;
    const known = elapsed_s > 0.3 && done_s > 0;
    const rate = known ? done_s / elapsed_s : null;
    return {
      job,
      done_s: Math.min(done_s, total_s),
      total_s,
      rate,
      frameRate_Hz: known ? frames / elapsed_s : null,
      remaining_s: rate === null ? null : Math.max(0, total_s - done_s) / rate,
    };
  };
}
