import { randomBytes } from 'node:crypto';
import { mkdir, readdir, readFile, rename, rm, stat, utimes } from 'node:fs/promises';
import { isAbsolute, join } from 'node:path';
import { z } from 'zod';
import { sessionSchema } from '../../src/session/session.ts';
import { writeWhole } from '../../src/session/write-session.ts';
import type { DocumentStart, SessionDocument } from './session-document.ts';

const path = z.string().refine(isAbsolute);
const copySchema = z.strictObject({
  format: z.literal('needlebeat/working-copy'),
  version: z.literal(1),
  session: sessionSchema,
  saved: sessionSchema,
  paths: z.record(z.string(), path),
  place: z.strictObject({ path, sha256: z.string(), asWritten: z.record(z.string(), z.string()) }).nullable(),
});

const HEARTBEAT_MS = 5_000;
/** A run that hasn't shown itself for so long has ended, even where its process number lives on in another program. */
const SILENT_MS = 30_000;

/**
 * The document on disk, written whole after every change, in a folder of this run. What a run leaves behind when it ends without warning is
 * found by the next one.
 */
export class WorkingCopy {
  readonly #folder: string;
  readonly #heartbeat: NodeJS.Timeout;
  #wanted: string | null = null;
  #writing: Promise<void> | null = null;

  private constructor(folder: string) {
    this.#folder = folder;
    this.#heartbeat = setInterval(() => {
      const now = new Date();
      utimes(join(folder, 'run.json'), now, now).catch(() => undefined);
    }, HEARTBEAT_MS).unref();
  }

  /** Begins a run: makes its folder. */
  static async begin(work: string): Promise<WorkingCopy> {
    const folder = join(work, randomBytes(8).toString('hex'));
    await mkdir(folder, { mode: 0o700 });
    await writeWhole(join(folder, 'run.json'), JSON.stringify({ pid: process.pid }));
    return new WorkingCopy(folder);
  }

  /** Writes the document; settles when it is safely on disk. Changes that come while one is written go out together. */
  save(document: SessionDocument | null): Promise<void> {
    this.#wanted = document ? copyText(document) : '';
    this.#writing ??= this.#writeAll().finally(() => {
      this.#writing = null;
    });
    return this.#writing;
  }

  /** Ends the run. @param keep leave the copy for the next run to find. */
  async end(keep: boolean): Promise<void> {
    clearInterval(this.#heartbeat);
    await this.#writing;
    if (keep) await rm(join(this.#folder, 'run.json'), { force: true });
    else await rm(this.#folder, { recursive: true, force: true });
  }

  async #writeAll(): Promise<void> {
    while (this.#wanted !== null) {
      const text = this.#wanted;
      this.#wanted = null;
      const file = join(this.#folder, 'copy.json');
      if (text === '') await rm(file, { force: true });
      else await writeWhole(file, text);
    }
  }
}

function copyText(document: SessionDocument): string {
  const { session, saved, paths, place } = document;
  return JSON.stringify({
    format: 'needlebeat/working-copy',
    version: 1,
    session,
    saved,
    paths: Object.fromEntries(paths),
    place: place && { ...place, asWritten: Object.fromEntries(place.asWritten) },
  });
}

/** A working copy that an earlier run left behind. */
export interface LeftBehind {
  /** Name of its folder. */
  readonly id: string;
  /** When it was written last. */
  readonly written: Date;
  readonly start: DocumentStart;
}

/** Working copies of runs that have ended, newest first. What can't be read is passed over and stays where it is. */
export async function leftBehind(work: string): Promise<LeftBehind[]> {
  const found: LeftBehind[] = [];
  for (const id of await readdir(work).catch(() => [])) {
    const folder = join(work, id);
    if (await isRunning(folder)) continue;
    const written = await stat(join(folder, 'copy.json')).catch(() => null);
    const start = written && (await readCopy(join(folder, 'copy.json')));
    if (written && start) found.push({ id, written: written.mtime, start });
    else if (!written) await rm(folder, { recursive: true, force: true });
  }
  return found.sort((a, b) => b.written.getTime() - a.written.getTime());
}

/**
 * Takes a working copy over, so that no other run does.
 * @returns what removes it, to be called when it has been saved elsewhere; null where another run was faster.
 */
export async function claim(work: string, id: string): Promise<(() => Promise<void>) | null> {
  const mine = join(work, randomBytes(8).toString('hex'));
  try {
    await rename(join(work, id), mine);
  } catch {
    return null;
  }
  await writeWhole(join(mine, 'run.json'), JSON.stringify({ pid: process.pid }));
  return () => rm(mine, { recursive: true, force: true });
}

async function readCopy(file: string): Promise<DocumentStart | null> {
  try {
    const copy = copySchema.parse(JSON.parse(await readFile(file, 'utf8')));
    return {
      session: copy.session,
      saved: copy.saved,
      paths: new Map(Object.entries(copy.paths)),
      place: copy.place && { ...copy.place, asWritten: new Map(Object.entries(copy.place.asWritten)) },
      restored: true,
    };
  } catch {
    return null;
  }
}

async function isRunning(folder: string): Promise<boolean> {
  const file = join(folder, 'run.json');
  try {
    const { mtimeMs } = await stat(file);
    if (Date.now() - mtimeMs > SILENT_MS) return false;
    const run: unknown = JSON.parse(await readFile(file, 'utf8'));
    const pid = typeof run === 'object' && run !== null && 'pid' in run ? run.pid : null;
    return typeof pid === 'number' && isAlive(pid);
  } catch (error) {
    // A folder that was made this moment has no run.json yet: leave it alone. One without for longer was left on purpose.
    if ((error as NodeJS.ErrnoException).code !== 'ENOENT') return false;
    const made = await stat(folder).catch(() => null);
    const copied = await stat(join(folder, 'copy.json')).catch(() => null);
    return made !== null && copied === null && Date.now() - made.mtimeMs < SILENT_MS;
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}
