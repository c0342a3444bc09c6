import { randomBytes } from 'node:crypto';

/** Something that the browser is to fetch. */
export interface Download {
  readonly name: string;
  readonly type: string;
  readonly bytes: Uint8Array;
}

const MOST_WAITING = 200;
const LONGEST_WAIT_MS = 10 * 60_000;

/** What waits to be fetched, each under an address that works once and for ten minutes. */
export class Downloads {
  readonly #waiting = new Map<string, Download & { readonly since_ms: number }>();
  readonly #now_ms: () => number;

  constructor(now_ms: () => number = () => performance.now()) {
    this.#now_ms = now_ms;
  }

  /** @param way `print`: a page to be shown and printed, not kept. @returns the path to fetch it from. */
  offer(download: Download, way: 'download' | 'print' = 'download'): string {
    const address = `/${way}/${randomBytes(18).toString('base64url')}`;
    this.#waiting.set(address, { ...download, since_ms: this.#now_ms() });
    for (const [old, { since_ms }] of this.#waiting) {
      const tooOld = this.#now_ms() - since_ms > LONGEST_WAIT_MS;
      if (tooOld || this.#waiting.size > MOST_WAITING) this.#waiting.delete(old);
      else break;
    }
    return address;
  }

  /** Hands a download over, once; null: no such address, or used, or too old. */
  take(address: string): Download | null {
    const download = this.#waiting.get(address);
    this.#waiting.delete(address);
    if (!download || this.#now_ms() - download.since_ms > LONGEST_WAIT_MS) return null;
    return download;
  }
}
