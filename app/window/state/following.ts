import { computed, signal } from '@preact/signals';
import type { JobProgress } from '../../contract.ts';
import { editsSettled } from './document.ts';
import { ask, tellFailure } from './host.ts';
import { tell } from './notices.ts';
import { readOverview, traces } from './traces.ts';

/** A bar being followed. */
export interface Following {
  readonly job: string;
  readonly view: string;
  readonly progress: JobProgress | null;
  /** The user asked it to stop, and it is stopping. */
  readonly stopping: boolean;
}

/** The job that follows a bar; null where none runs. */
export const following = signal<Following | null>(null);

/** Share that is done, 0 to 1. */
export const followedShare = computed(() => {
  const p = following.value?.progress;
  return p && p.total_s > 0 ? Math.min(1, p.done_s / p.total_s) : 0;
});

/** Starts to follow the bar of a view; start or end left out: the recording's. One at a time. */
export async function follow(viewId: string, stretch: { start_s?: number; end_s?: number } = {}): Promise<void> {
  if (following.value) return;
  await editsSettled();
  const started = await ask('follow', { view: viewId, ...stretch });
  if (started) following.value = { job: started.job, view: viewId, progress: null, stopping: false };
}

/** Stops following. */
export async function stopFollowing(): Promise<void> {
  const now = following.value;
  if (!now) return;
  following.value = { ...now, stopping: true };
  await ask('cancel', { job: now.job });
}

/** Takes progress of a job. */
export function takeProgress(progress: JobProgress): void {
  if (following.value?.job === progress.job) following.value = { ...following.value, progress };
}

/** Takes the end of a job. */
export function takeJobEnd(job: string, error: { reason: string; message: string } | null): void {
  const now = following.value;
  if (now?.job !== job) return;
  following.value = null;
  void readOverview(now.view).then(() => {
    if (error?.reason === 'cancelled') tell(`View ${now.view}: stopped; ${keptOf(now.view)}.`);
  });
  if (!error) tell(`View ${now.view}: the bar has been followed.`);
  else if (error.reason !== 'cancelled') tellFailure(new Error(error.message));
}

/** Only stretches of some 15 s that were finished are kept: the poses within one are not settled before its end. */
function keptOf(viewId: string): string {
  const poses = traces.value.get(viewId)?.length ?? 0;
  return poses === 0 ? 'no stretch was finished yet' : `the ${poses} poses of finished stretches are kept`;
}

/** Takes up a job that went on while the window was being loaded anew. */
export async function resumeFollowing(): Promise<void> {
  const jobs = await ask('jobs', {});
  const found = jobs?.find((j) => j.kind === 'follow' && j.view !== null);
  if (found?.view) following.value = { job: found.job, view: found.view, progress: null, stopping: false };
}
