import { basename, join } from 'node:path';
import { InputError } from '../../src/recording/input-error.ts';
import { writeWhole } from '../../src/session/write-session.ts';
import type { Saved } from '../contract.ts';
import type { Downloads } from './downloads.ts';
import { Refusal } from './serve-window.ts';
import type { Tokens } from './tokens.ts';

/** Something to be saved. */
export interface Savable {
  readonly name: string;
  readonly type: string;
  readonly bytes: string | Uint8Array;
}

/** Puts things where the user wants them: at a place chosen in a dialog, or into the browser's downloads. */
export class Saving {
  readonly #tokens: Tokens;
  readonly #downloads: Downloads | null;

  /** @param downloads null: there is no browser that could fetch them. */
  constructor(tokens: Tokens, downloads: Downloads | null) {
    this.#tokens = tokens;
    this.#downloads = downloads;
  }

  /** @param token of a save dialog; left out: a download, or the question where. */
  async save(thing: Savable, token: string | undefined): Promise<Saved> {
    if (token !== undefined) {
      const path = this.placeOf(token, 'write');
      await written(path, thing.bytes);
      return { saved: 'file', name: basename(path) };
    }
    return this.handOut(thing) ?? { saved: 'needs_place', suggestedName: thing.name };
  }

  /** Several things into one folder, or as downloads. */
  async saveAll(things: readonly Savable[], token: string | undefined): Promise<Saved[]> {
    if (token === undefined) {
      return things.map((t) => this.handOut(t) ?? { saved: 'needs_place', suggestedName: t.name });
    }
    const folder = this.placeOf(token, 'folder');
    const saved: Saved[] = [];
    for (const thing of things) {
      const path = join(folder, basename(thing.name));
      await written(path, thing.bytes);
      saved.push({ saved: 'file', name: basename(path) });
    }
    return saved;
  }

  /** Offers a download; null: there is no browser. */
  handOut({ name, type, bytes }: Savable): Saved | null {
    const offered = typeof bytes === 'string' ? Buffer.from(bytes) : bytes;
    const address = this.#downloads?.offer({ name, type, bytes: offered });
    return address === undefined ? null : { saved: 'download', name, address };
  }

  /** Offers a page for the browser to print. @throws Refusal where there is no browser. */
  toPrint(page: Savable & { readonly bytes: string }): Saved {
    const address = this.#downloads?.offer({ ...page, bytes: Buffer.from(page.bytes) }, 'print');
    if (address === undefined) throw new Refusal('bad_argument', 'There is no browser here that could print.');
    return { saved: 'to_print', address };
  }

  /** @throws Refusal for a token that was never given out for this. */
  placeOf(token: string, use: 'read' | 'write' | 'folder'): string {
    const path = this.#tokens.path(token, use);
    if (path === null) throw new Refusal('bad_argument', 'This file is not known any more: choose it again.');
    return path;
  }
}

async function written(path: string, bytes: string | Uint8Array): Promise<void> {
  await writeWhole(path, bytes).catch((error: NodeJS.ErrnoException) => {
    throw new InputError(`${basename(path)}: it can't be written here (${error.code ?? 'unknown reason'}).`);
  });
}
