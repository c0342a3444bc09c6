import { readFile } from 'node:fs/promises';
import { isAbsolute } from 'node:path';
import { z } from 'zod';
import { writeWhole } from '../../src/session/write-session.ts';

const seen = z.strictObject({ path: z.string().refine(isAbsolute), content: z.string(), bytes: z.number() });
const catalogue = z.strictObject({
  format: z.literal('needlebeat/known-recordings'),
  version: z.literal(1),
  /** Newest last. */
  sessions: z.array(z.strictObject({ sha256: z.string(), recordings: z.record(z.string(), seen) })),
});

/** A recording as a session last had it. */
export type SeenRecording = z.infer<typeof seen>;

const MOST_SESSIONS = 300;

/**
 * Remembers for every session file seen, by the hash of its text, what the recordings it names contained: session files say only names, and names move.
 */
export class KnownRecordings {
  readonly #file: string;
  readonly #sessions: Map<string, Record<string, SeenRecording>>;

  private constructor(file: string, sessions: Map<string, Record<string, SeenRecording>>) {
    this.#file = file;
    this.#sessions = sessions;
  }

  /** Reads what is known; a file that can't be read counts as empty. */
  static async read(file: string): Promise<KnownRecordings> {
    try {
      const { sessions } = catalogue.parse(JSON.parse(await readFile(file, 'utf8')));
      return new KnownRecordings(file, new Map(sessions.map((s) => [s.sha256, s.recordings])));
    } catch {
      return new KnownRecordings(file, new Map());
    }
  }

  /** What a recording of a session file contained; null: never seen. */
  seen(sessionSha256: string, recording: string): SeenRecording | null {
    const recordings = this.#sessions.get(sessionSha256);
    return recordings && Object.hasOwn(recordings, recording) ? (recordings[recording] ?? null) : null;
  }

  /** Remembers the recordings of a session file. */
  async remember(sessionSha256: string, recordings: Readonly<Record<string, SeenRecording>>): Promise<void> {
    const before = this.#sessions.get(sessionSha256);
    this.#sessions.delete(sessionSha256);
    this.#sessions.set(sessionSha256, { ...before, ...recordings });
    for (const oldest of this.#sessions.keys()) {
      if (this.#sessions.size <= MOST_SESSIONS) break;
      this.#sessions.delete(oldest);
    }
    const sessions = [...this.#sessions].map(([sha256, kept]) => ({ sha256, recordings: kept }));
    await writeWhole(this.#file, JSON.stringify({ format: 'needlebeat/known-recordings', version: 1, sessions }));
  }
}
