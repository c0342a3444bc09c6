import type { Picture } from '../../contract.ts';
import { revealCursor } from './board.ts';
import { ask, host } from './host.ts';
import { playing, showPicture, wantedWidth_px } from './pictures.ts';
import { cursor_s, frameTimes, moveCursor, recording, whole_s } from './selection.ts';

interface Run {
  readonly job: string;
  readonly recording: string;
  readonly start_s: number;
  readonly waiting: Picture[];
  began_ms: number | null;
  ended: boolean;
}

let run: Run | null = null;

/** Plays from the cursor to `end_s` (left out: the end of the recording) at the speed of life, or stops. */
export async function playOrPause(end_s = whole_s.value): Promise<void> {
  if (run) return pause();
  const r = recording.value;
  if (r?.state !== 'ready') return;
  const last_s = frameTimes.value?.at(-1) ?? 0;
  const start_s = cursor_s.value >= Math.min(end_s, last_s) - 1e-6 ? 0 : cursor_s.value;
  const width = Math.min(wantedWidth_px.value, 960);
  const job = await ask('play', { recording: r.id, start_s, end_s, maxWidth_px: width });
  if (!job) return;
  run = { job: job.job, recording: r.id, start_s, waiting: early.splice(0), began_ms: null, ended: false };
  playing.value = { job: job.job };
  requestAnimationFrame(draw);
}

/** Stops playing; the cursor stays where it is. */
export async function pause(): Promise<void> {
  const ending = run;
  if (!ending) return;
  run = null;
  playing.value = null;
  await host()
    .call('cancel', { job: ending.job })
    .catch(() => null);
}

const early: Picture[] = [];

/** Takes a frame of what is being played. */
export function takePlayFrame(job: string, picture: Picture): void {
  if (run?.job === job) run.waiting.push(picture);
  else if (!run && early.length < 8) early.push(picture);
}

/** Takes the end of a job: what has arrived is still shown. */
export function takePlayEnd(job: string): void {
  if (run?.job === job) run.ended = true;
  else early.length = 0;
}

/** Shows the newest frame that is due. Where frames come too slowly the clock waits for them, so none is skipped unseen for long. */
function draw(now_ms: number): void {
  const here = run;
  if (!here) return;
  const next = here.waiting[0];
  if (!next) {
    if (here.ended) {
      run = null;
      playing.value = null;
      return;
    }
    if (here.began_ms !== null) here.began_ms = null;
    requestAnimationFrame(draw);
    return;
  }
  here.began_ms ??= now_ms - (next.time_s - here.start_s) * 1000;
  const due_s = here.start_s + (now_ms - here.began_ms) / 1000;
  let latest: Picture | null = null;
  while (here.waiting[0] && here.waiting[0].time_s <= due_s + 0.004) latest = here.waiting.shift() ?? null;
  if (latest) {
    void host()
      .call('playAck', { job: here.job, index: latest.index })
      .catch(() => null);
    void showPicture(here.recording, latest);
    moveCursor(latest.time_s);
    revealCursor();
  }
  requestAnimationFrame(draw);
}
