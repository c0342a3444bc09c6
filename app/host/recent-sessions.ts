import { createHash } from 'node:crypto';
import { access, readFile } from 'node:fs/promises';
import { basename, isAbsolute } from 'node:path';
import { z } from 'zod';
import { writeWhole } from '../../src/session/write-session.ts';
import type { RecentSession } from '../contract.ts';

const recentFile = z.strictObject({
  format: z.literal('needlebeat/recent-sessions'),
  version: z.literal(1),
  sessions: z.array(z.strictObject({ path: z.string().refine(isAbsolute), title: z.string(), opened: z.string() })),
});
type Entry = z.infer<typeof recentFile>['sessions'][number];

const MOST = 20;

/** The session files opened or saved last. */
export class RecentSessions {
  readonly #file: string;
  #entries: Entry[];

  private constructor(file: string, entries: Entry[]) {
    this.#file = file;
    this.#entries = entries;
  }

  /** Reads the list; a file that can't be read counts as empty. */
  static async read(file: string): Promise<RecentSessions> {
    try {
      return new RecentSessions(file, recentFile.parse(JSON.parse(await readFile(file, 'utf8'))).sessions);
    } catch {
      return new RecentSessions(file, []);
    }
  }

  /** Puts a session file at the top. @param opened ISO 8601. */
  async add(path: string, title: string, opened: string): Promise<void> {
    this.#entries = [{ path, title, opened }, ...this.#entries.filter((e) => e.path !== path)].slice(0, MOST);
    const text = JSON.stringify({ format: 'needlebeat/recent-sessions', version: 1, sessions: this.#entries }, null, 2);
    await writeWhole(this.#file, `${text}\n`);
  }

  /** Those whose files are still there, newest first. */
  async list(): Promise<RecentSession[]> {
    const there = await Promise.all(
      this.#entries.map((e) =>
        access(e.path).then(
          () => true,
          () => false,
        ),
      ),
    );
    return this.#entries
      .filter((_, i) => there[i])
      .map((e) => ({ id: idOf(e.path), name: basename(e.path), title: e.title, opened: e.opened }));
  }

  /** Path of an entry, null: not in the list. */
  path(id: string): string | null {
    return this.#entries.find((e) => idOf(e.path) === id)?.path ?? null;
  }
}

function idOf(path: string): string {
  return createHash('sha256').update(path).digest('hex').slice(0, 24);
}
