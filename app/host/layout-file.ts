import { readFile } from 'node:fs/promises';
import { z } from 'zod';
import { writeWhole } from '../../src/session/write-session.ts';
import { type Layout, layout } from '../contract/values.ts';

const layoutFile = z.strictObject({ format: z.literal('needlebeat/layout'), version: z.literal(1), layout });

/** Where the window's layout is kept between starts. */
export class LayoutFile {
  readonly #path: string;
  #written: Promise<void> = Promise.resolve();

  constructor(path: string) {
    this.#path = path;
  }

  /** The layout kept last; null: none, or none that can be read. */
  async read(): Promise<Layout | null> {
    try {
      return layoutFile.parse(JSON.parse(await readFile(this.#path, 'utf8'))).layout;
    } catch {
      return null;
    }
  }

  /** Keeps a layout. Settles when it is on disk; one after the other. */
  keep(next: Layout): Promise<void> {
    const text = JSON.stringify({ format: 'needlebeat/layout', version: 1, layout: next }, null, 2);
    this.#written = this.#written.catch(() => undefined).then(() => writeWhole(this.#path, `${text}\n`));
    return this.#written;
  }
}
