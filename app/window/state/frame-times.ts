import { effect, signal } from '@preact/signals';
import { documentState, recordings, session } from './document.ts';
import { host } from './host.ts';

/** Presentation times of the frames of each recording, as far as they have been read. */
export const timesOf = signal<ReadonlyMap<string, Float64Array>>(new Map());

/** What each recording's times were read for: document, file and time scale. */
const readFor = new Map<string, string>();

/** Reads frame times of recordings as they become ready, and again where the time scale was edited. */
export function keepFrameTimes(): () => void {
  return effect(() => {
    const key = documentState.value?.key ?? '';
    const marks = new Map(session.value?.recordings.map((r) => [r.id, `${key} ${r.file} ${r.time_scale ?? 1}`]));
    for (const { id, state } of recordings.value) {
      const mark = marks.get(id);
      if (state !== 'ready' || mark === undefined || readFor.get(id) === mark) continue;
      readFor.set(id, mark);
      void read(id, mark);
    }
  });
}

async function read(id: string, mark: string): Promise<void> {
  try {
    const { time_s } = await host().call('frameTimes', { recording: id });
    if (readFor.get(id) === mark) timesOf.value = new Map(timesOf.peek()).set(id, time_s);
  } catch {
    readFor.delete(id);
  }
}

/** Forgets the frame times read so far: another document is open. */
export function forgetFrameTimes(): void {
  timesOf.value = new Map();
}
