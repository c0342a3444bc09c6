import { randomBytes } from 'node:crypto';
import { basename } from 'node:path';
import type { FileToken } from '../contract.ts';

/** What a token may be used for: reading a file, writing one at a place chosen, writing into a folder chosen. */
export type TokenUse = 'read' | 'write' | 'folder';

const MOST_TOKENS = 2000;

/** Paths that the user chose, under the opaque names by which the window speaks of them. The oldest are forgotten. */
export class Tokens {
  readonly #paths = new Map<string, { readonly path: string; readonly use: TokenUse }>();

  /** @param path absolute. @param name to show; the base name where left out. */
  add(path: string, use: TokenUse, name: string = basename(path)): FileToken {
    const token = randomBytes(18).toString('base64url');
    this.#paths.set(token, { path, use });
    const oldest = this.#paths.keys().next().value;
    if (this.#paths.size > MOST_TOKENS && oldest !== undefined) this.#paths.delete(oldest);
    return { token, name: name.slice(0, 1024) };
  }

  /** The path behind a token, null: never given out for this use, or forgotten. */
  path(token: string, use: TokenUse): string | null {
    const entry = this.#paths.get(token);
    return entry?.use === use ? entry.path : null;
  }
}
