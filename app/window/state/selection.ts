import { computed, signal } from '@preact/signals';
import type { RecordingState, SessionSegment, SessionView, SHEETS } from '../../contract.ts';
import { nearestIndex } from '../plots/extremes.ts';
import { segmentsOf } from '../session-edits/segment-edits.ts';
import { recordings, session } from './document.ts';
import { timesOf } from './frame-times.ts';

export type Sheet = (typeof SHEETS)[number];

/** Which sheet lies open at the right. */
export const sheet = signal<Sheet>('view');

const chosenRecording = signal<string | null>(null);
const chosenView = signal<string | null>(null);
const chosenSegment = signal<string | null>(null);

/** Where the cursor stands on the clock of the recording shown, seconds. */
export const cursor_s = signal(0);

/** The recording that is shown; null where nothing is open. */
export const recording = computed<RecordingState | null>(
  () => recordings.value.find((r) => r.id === chosenRecording.value) ?? recordings.value[0] ?? null,
);

/** The segments of the recording shown, by time. */
export const segments = computed<readonly SessionSegment[]>(() =>
  session.value && recording.value ? segmentsOf(session.value, recording.value.id) : [],
);

/** The selected segment; null where none is. */
export const segment = computed<SessionSegment | null>(
  () => segments.value.find((s) => s.id === chosenSegment.value) ?? null,
);

/** The views of the recording shown. */
export const views = computed<readonly SessionView[]>(
  () => session.value?.views.filter((v) => v.recording === recording.value?.id) ?? [],
);

/** The view that is shown and worked on; null where none has been drawn. */
export const view = computed<SessionView | null>(
  () => views.value.find((v) => v.id === chosenView.value) ?? views.value[0] ?? null,
);

/** Presentation times of its frames, seconds; null until they have been read. */
export const frameTimes = computed<Float64Array | null>(() => timesOf.value.get(recording.value?.id ?? '') ?? null);

/**
 * Seconds from the first frame to the end of the last. While the recording is still being opened, or is missing: to the end of the
 * last segment, so that the segments can be seen all the same. 0 where there is none.
 */
export const whole_s = computed(() => {
  const times = frameTimes.value;
  if (!times?.length) return recording.value?.facts?.duration_s ?? segments.value.at(-1)?.end_s ?? 0;
  const last = times[times.length - 1]!;
  return Math.max(last + last / Math.max(1, times.length - 1), 0.001);
});

/** Index of the frame at the cursor; null while the recording isn't ready. */
export const frame = computed<number | null>(() => {
  const times = frameTimes.value;
  return times?.length ? nearestIndex(times, cursor_s.value) : null;
});

/** Shows another recording. */
export function showRecording(id: string): void {
  if (recording.value?.id === id) return;
  chosenRecording.value = id;
  chosenView.value = null;
  chosenSegment.value = null;
  cursor_s.value = 0;
}

/** Shows a view of the recording. */
export function showView(id: string): void {
  chosenView.value = id;
}

/** Selects a segment, with its recording and view; the cursor goes to its start unless it is inside already. */
export function selectSegment(id: string | null): void {
  const found = id === null ? null : (session.value?.segments.find((s) => s.id === id) ?? null);
  chosenSegment.value = found?.id ?? null;
  if (!found) return;
  if (recording.value?.id !== found.recording) showRecording(found.recording);
  chosenSegment.value = found.id;
  chosenView.value = found.view;
  if (cursor_s.value < found.start_s || cursor_s.value > found.end_s) moveCursor(found.start_s);
}

/** Puts the cursor at a time, kept inside the recording. */
export function moveCursor(time_s: number): void {
  const times = frameTimes.value;
  const last = times?.length ? times[times.length - 1]! : whole_s.value;
  cursor_s.value = Math.min(Math.max(time_s, 0), last);
}

/** Moves the cursor by whole frames. */
export function stepFrames(by: number): void {
  const times = frameTimes.value;
  const here = frame.value;
  if (!times || here === null) return;
  cursor_s.value = times[Math.min(Math.max(here + by, 0), times.length - 1)]!;
}

/** Forgets what was selected: another document is open. */
export function forgetSelection(): void {
  chosenRecording.value = null;
  chosenView.value = null;
  chosenSegment.value = null;
  cursor_s.value = 0;
}
