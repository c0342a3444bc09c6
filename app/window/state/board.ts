import { computed, signal } from '@preact/signals';
import { clampSpan, revealTime, spanAround, type TimeSpan, zoomSpan } from '../time-board/time-span.ts';
import { cursor_s, recording, whole_s } from './selection.ts';

const chosen = signal<{ readonly recording: string; readonly span: TimeSpan } | null>(null);

/** The stretch that the time board shows; the whole recording until the user zooms. */
export const span = computed<TimeSpan>(() => {
  const whole = Math.max(whole_s.value, 0.001);
  const own = chosen.value;
  return own && own.recording === recording.value?.id ? clampSpan(own.span, whole) : { start_s: 0, end_s: whole };
});

/** Shows another stretch. */
export function showSpan(next: TimeSpan): void {
  const id = recording.value?.id;
  if (id !== undefined) chosen.value = { recording: id, span: clampSpan(next, Math.max(whole_s.value, 0.001)) };
}

/** Zooms about a time; above 1 closer. */
export function zoomBoard(factor: number, about_s = cursor_s.value): void {
  const { start_s, end_s } = span.value;
  const about = about_s < start_s || about_s > end_s ? (start_s + end_s) / 2 : about_s;
  showSpan(zoomSpan(span.value, about, factor, whole_s.value));
}

/** Shows the whole recording. */
export function showWhole(): void {
  chosen.value = null;
}

/** Moves the board just far enough that the cursor is on it. */
export function revealCursor(): void {
  const next = revealTime(span.value, cursor_s.value, whole_s.value);
  if (next !== span.value) showSpan(next);
}

/** Shows a stretch with some room on either side. */
export function showAround(stretch: TimeSpan): void {
  showSpan(spanAround(stretch, whole_s.value));
}
