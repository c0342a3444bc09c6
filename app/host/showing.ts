import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import { filmStrip } from '../../src/recording/film-strip.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import { frameAt, framesWithin, frameTime_s } from '../../src/recording/frame-clock.ts';
import { InputError } from '../../src/recording/input-error.ts';
import { playStretch } from '../../src/recording/play-stretch.ts';
import type { Picture } from '../contract.ts';
import { jpegSize } from './jpeg-size.ts';

/** Pictures of a film strip that are decoded in one go; the first ones are there soon. */
const STRIP_PART = 8;
/** Frames that may be on their way to the window. */
const FRAMES_AHEAD = 8;

/** A JPEG picture of a frame, with its own size. @throws InputError where it isn't one. */
export function pictureOf(opened: OpenRecording, index: number, jpeg: Uint8Array): Picture {
  const size = jpegSize(jpeg);
  if (!size) throw new InputError(`Frame ${index} can't be shown: it was not decoded to a picture.`);
  const time_s = frameTime_s(opened.recording, index, opened.timeScale);
  return { jpeg: new Uint8Array(jpeg), index, time_s, ...size };
}

/** Small pictures spread evenly over a stretch, each in the middle of its share; told as they come. */
export async function showStrip(
  opened: OpenRecording,
  stretch: { readonly start_s: number; readonly end_s: number; readonly count: number; readonly maxWidth_px: number },
  tools: FfmpegTools,
  signal: AbortSignal,
  tell: (position: number, picture: Picture) => void,
): Promise<void> {
  const { recording, timeScale } = opened;
  const { start_s, end_s, count, maxWidth_px } = stretch;
  const height_px = Math.max(1, Math.round((maxWidth_px * recording.height_px) / recording.width_px));
  const indices = Array.from({ length: count }, (_, i) =>
    frameAt(recording, start_s + ((i + 0.5) / count) * Math.max(0, end_s - start_s), timeScale),
  );
  for (let first = 0; first < count; first += STRIP_PART) {
    const part = indices.slice(first, first + STRIP_PART);
    const pictures = await filmStrip(recording, part, height_px, tools, signal);
    for (const [i, jpeg] of pictures.entries()) {
      if (jpeg) tell(first + i, pictureOf(opened, part[i] ?? 0, jpeg));
    }
  }
}

/** What keeps a player from running ahead of the window: it waits until enough frames have been shown. */
export class PlayPace {
  #sent = 0;
  #shown = 0;
  readonly #order = new Map<number, number>();
  #wake: () => void = () => undefined;

  /** A frame goes out. */
  sent(index: number): void {
    this.#order.set(index, this.#sent++);
  }
  /** The window has shown a frame. */
  shown(index: number): void {
    const place = this.#order.get(index);
    if (place === undefined) return;
    this.#shown = Math.max(this.#shown, place + 1);
    for (const [old, at] of this.#order) if (at < this.#shown) this.#order.delete(old);
    this.#wake();
  }
  /** Settles when there is room for one more. */
  async room(signal: AbortSignal): Promise<void> {
    while (this.#sent - this.#shown >= FRAMES_AHEAD) {
      signal.throwIfAborted();
      await new Promise<void>((resolve) => {
        const go = () => {
          signal.removeEventListener('abort', go);
          resolve();
        };
        this.#wake = go;
        signal.addEventListener('abort', go, { once: true });
      });
    }
    signal.throwIfAborted();
  }
}

/** The frames of a stretch for showing, as fast as the window takes them. */
export async function play(
  opened: OpenRecording,
  stretch: { readonly start_s: number; readonly end_s: number; readonly maxWidth_px: number },
  pace: PlayPace,
  tools: FfmpegTools,
  signal: AbortSignal,
  tell: (picture: Picture) => void,
): Promise<void> {
  const { recording, timeScale } = opened;
  const { first, end } = framesWithin(recording, stretch.start_s, stretch.end_s, timeScale);
  const options = { maxWidth_px: stretch.maxWidth_px, timeScale };
  for await (const frame of playStretch(recording, first, end, options, tools, signal)) {
    await pace.room(signal);
    pace.sent(frame.index);
    tell(pictureOf(opened, frame.index, frame.jpeg));
  }
}
