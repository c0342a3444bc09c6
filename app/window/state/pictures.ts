import { effect, signal } from '@preact/signals';
import type { Picture } from '../../contract.ts';
import { host, tellFailure } from './host.ts';
import { frame, recording } from './selection.ts';

/** A picture ready to be drawn, and which frame of which recording it is. */
export interface Shown {
  readonly recording: string;
  readonly index: number;
  readonly time_s: number;
  readonly bitmap: ImageBitmap;
}

/** The picture on the panel: that of the cursor as soon as it is there, until then the one before. */
export const shown = signal<Shown | null>(null);

/** How many pixels wide pictures are asked for; follows the panel's size and zoom. */
export const wantedWidth_px = signal(960);

/** While a stretch plays, its pictures come by themselves. */
export const playing = signal<{ readonly job: string } | null>(null);

let begun = 0;
let newestShown = 0;

/** Shows a picture as the host sent it; of those whose decoding overlaps never an older one after a newer. */
export async function showPicture(recordingId: string, picture: Picture): Promise<void> {
  const mine = ++begun;
  const bitmap = await bitmapOf(picture);
  if (mine < newestShown) return bitmap.close();
  newestShown = mine;
  const before = shown.peek();
  shown.value = { recording: recordingId, index: picture.index, time_s: picture.time_s, bitmap };
  if (before) retire(before.bitmap);
}

const LAST_DRAWING_MS = 500;

/** Gives a picture's memory back once nothing can be about to draw it any more. */
export function retire(bitmap: ImageBitmap): void {
  setTimeout(() => bitmap.close(), LAST_DRAWING_MS);
}

/** Decodes a picture. */
export function bitmapOf(picture: Picture): Promise<ImageBitmap> {
  return createImageBitmap(new Blob([picture.jpeg], { type: 'image/jpeg' }));
}

/** A request that has run so long is given up where the cursor has moved on. */
const PATIENCE_MS = 400;

interface Asked {
  readonly recording: string;
  readonly frame: number;
  readonly width: number;
  readonly since_ms: number;
  readonly abort: AbortController;
}

let asked: Asked | null = null;
let last: Pick<Asked, 'recording' | 'frame' | 'width'> | null = null;

/** Says how many pixels wide the picture is on the panel; it is read anew only where it would look coarse. */
export function wantWidth(width_px: number, mostWidth_px: number): void {
  const steps = Math.ceil(width_px / WIDTH_STEP_PX) * WIDTH_STEP_PX;
  wantedWidth_px.value = Math.min(Math.max(steps, WIDTH_STEP_PX), mostWidth_px);
}

const WIDTH_STEP_PX = 480;

/** Keeps the panel's picture at the cursor: one request at a time, always for where the cursor is then. */
export function keepPicture(): () => void {
  return effect(() => {
    const at = frame.value;
    void wantedWidth_px.value;
    if (recording.value?.state !== 'ready' || playing.value) return;
    if (!asked) void fetchNewest();
    else if (asked.frame !== at && performance.now() - asked.since_ms > PATIENCE_MS) asked.abort.abort();
  });
}

async function fetchNewest(): Promise<void> {
  for (let next = wanted(); next; next = wanted()) {
    const mine: Asked = { ...next, since_ms: performance.now(), abort: new AbortController() };
    asked = mine;
    try {
      const args = { recording: mine.recording, frame: mine.frame, maxWidth_px: mine.width };
      const picture = await host().call('picture', args, mine.abort.signal);
      last = next;
      if (!playing.peek() && recording.peek()?.id === mine.recording) await showPicture(mine.recording, picture);
    } catch (error) {
      if (!mine.abort.signal.aborted) {
        tellFailure(error);
        return;
      }
    } finally {
      asked = null;
    }
  }
}

/** What is to be asked for: the cursor's frame, unless it is shown already and fine enough. */
function wanted(): Pick<Asked, 'recording' | 'frame' | 'width'> | null {
  const r = recording.peek();
  const at = frame.peek();
  const width = wantedWidth_px.peek();
  if (r?.state !== 'ready' || at === null || playing.peek()) return null;
  const same = last?.recording === r.id && last.frame === at;
  if (same && last && last.width >= width && (shown.peek() === null || shown.peek()?.index === at)) return null;
  return { recording: r.id, frame: at, width };
}

/** Forgets the picture: another document is open. */
export function forgetPicture(): void {
  asked?.abort.abort();
  const before = shown.peek();
  if (before) retire(before.bitmap);
  shown.value = null;
  last = null;
}
