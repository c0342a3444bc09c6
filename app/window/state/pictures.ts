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

/** Shows a picture as the host sent it. */
export async function showPicture(recordingId: string, picture: Picture): Promise<void> {
  const bitmap = await bitmapOf(picture);
  shown.value?.bitmap.close();
  shown.value = { recording: recordingId, index: picture.index, time_s: picture.time_s, bitmap };
}

/** Decodes a picture. */
export function bitmapOf(picture: Picture): Promise<ImageBitmap> {
  return createImageBitmap(new Blob([picture.jpeg], { type: 'image/jpeg' }));
}

let asking = false;
let last: { recording: string; frame: number; width: number } | null = null;

/** Keeps the panel's picture at the cursor: one request at a time, always for where the cursor is then. */
export function keepPicture(): () => void {
  return effect(() => {
    void frame.value;
    void wantedWidth_px.value;
    if (recording.value?.state === 'ready' && !playing.value) void fetchNewest();
  });
}

async function fetchNewest(): Promise<void> {
  if (asking) return;
  asking = true;
  try {
    for (;;) {
      const r = recording.peek();
      const at = frame.peek();
      const width = wantedWidth_px.peek();
      if (r?.state !== 'ready' || at === null || playing.peek()) return;
      if (last?.recording === r.id && last.frame === at && last.width === width && shown.peek()?.index === at) return;
      last = { recording: r.id, frame: at, width };
      const picture = await host().call('picture', { recording: r.id, frame: at, maxWidth_px: width });
      if (!playing.peek() && recording.peek()?.id === r.id) await showPicture(r.id, picture);
    }
  } catch (error) {
    tellFailure(error);
  } finally {
    asking = false;
  }
}

/** Forgets the picture: another document is open. */
export function forgetPicture(): void {
  shown.value?.bitmap.close();
  shown.value = null;
  last = null;
}
