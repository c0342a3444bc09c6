import { readdir, readFile, rm, stat, utimes } from 'node:fs/promises';
import { join } from 'node:path';
import { writeWhole } from '../../src/session/write-session.ts';
import { decodeFrame, encodeFrame } from '../contract.ts';

const MOST_KEPT_BYTES = 1024 * 1024 * 1024;
const SUFFIX = '.bin';

/** Plain data on disk under the hash of what it was made from; what can't be read is as good as absent. */
export class ContentCache {
  readonly #folder: string;

  constructor(folder: string) {
    this.#folder = folder;
  }

  /** @param key lower-case hexadecimal. @param isWhole refuses what has another shape. */
  async get<T>(key: string, isWhole: (value: unknown) => value is T): Promise<T | null> {
    try {
      const path = this.#path(key);
      const value = decodeFrame(new Uint8Array(await readFile(path)));
      if (!isWhole(value)) return null;
      const now = new Date();
      await utimes(path, now, now).catch(() => undefined);
      return value;
    } catch {
      return null;
    }
  }

  /** A full disk is no reason to fail: the value is then made again another time. */
  async put(key: string, value: unknown): Promise<void> {
    await writeWhole(this.#path(key), encodeFrame(value)).catch(() => undefined);
  }

  /** Removes what was used longest ago until 1 GiB is left. */
  async trim(): Promise<void> {
    const names = (await readdir(this.#folder).catch(() => [])).filter((n) => n.endsWith(SUFFIX));
    const files = await Promise.all(
      names.map(async (name) => {
        const facts = await stat(join(this.#folder, name)).catch(() => null);
        return { name, bytes: facts?.size ?? 0, used_ms: facts?.mtimeMs ?? 0 };
      }),
    );
    let sum = 0;
    for (const file of files.sort((a, b) => b.used_ms - a.used_ms)) {
      sum += file.bytes;
      if (sum > MOST_KEPT_BYTES) await rm(join(this.#folder, file.name), { force: true });
    }
  }

  #path(key: string): string {
    if (!/^[0-9a-f]{16,64}$/.test(key)) throw new RangeError(`key: expected 16 to 64 hexadecimal digits, got "${key}"`);
    return join(this.#folder, `${key}${SUFFIX}`);
  }
}
