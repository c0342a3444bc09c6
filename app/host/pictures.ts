import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import type { Recording, Region } from '../../src/recording/recording.ts';
import { stillPicture } from '../../src/recording/still-picture.ts';

/** What picture is wanted. */
export interface PictureWish {
  readonly frame: number;
  readonly maxWidth_px: number;
  readonly crop: Region | null;
}

const MOST_CACHED_BYTES = 128 * 1024 * 1024;
const AT_ONCE = 2;

interface Waiting {
  begin(): void;
}

/** Single pictures of recordings as JPEG: the last used are kept, few are decoded at once, the newest wish comes first. */
export class Pictures {
  readonly #kept = new Map<string, Uint8Array<ArrayBuffer>>();
  #keptBytes = 0;
  #running = 0;
  readonly #waiting: Waiting[] = [];

  /** Rejects with the signal's reason when it aborts; InputError where the frame can't be decoded; RangeError where there is no such frame. */
  async get(
    recording: Recording,
    wish: PictureWish,
    tools: FfmpegTools,
    signal: AbortSignal,
  ): Promise<Uint8Array<ArrayBuffer>> {
    const key = JSON.stringify([recording.path, recording.bytes, wish]);
    const kept = this.#kept.get(key);
    if (kept) {
      this.#kept.delete(key);
      this.#kept.set(key, kept);
      return kept;
    }
    await this.#turn(signal);
    try {
      const options = {
        maxWidth_px: wish.maxWidth_px,
        ...(wish.crop && { crop: wish.crop }),
        format: 'jpeg' as const,
      };
      const jpeg = new Uint8Array(await stillPicture(recording, wish.frame, options, tools, signal));
      this.#keep(key, jpeg);
      return jpeg;
    } finally {
      this.#running -= 1;
      this.#waiting.pop()?.begin();
    }
  }

  async #turn(signal: AbortSignal): Promise<void> {
    if (this.#running < AT_ONCE) {
      this.#running += 1;
      return;
    }
    await new Promise<void>((resolve, reject) => {
      const entry: Waiting = {
        begin: () => {
          signal.removeEventListener('abort', onAbort);
          this.#running += 1;
          resolve();
        },
      };
      const onAbort = () => {
        const at = this.#waiting.indexOf(entry);
        if (at >= 0) this.#waiting.splice(at, 1);
        reject(signal.reason);
      };
      if (signal.aborted) return onAbort();
      signal.addEventListener('abort', onAbort, { once: true });
      this.#waiting.push(entry);
    });
  }

  #keep(key: string, jpeg: Uint8Array<ArrayBuffer>): void {
    this.#kept.set(key, jpeg);
    this.#keptBytes += jpeg.byteLength;
    for (const [oldest, bytes] of this.#kept) {
      if (this.#keptBytes <= MOST_CACHED_BYTES) break;
      this.#kept.delete(oldest);
      this.#keptBytes -= bytes.byteLength;
    }
  }
}
