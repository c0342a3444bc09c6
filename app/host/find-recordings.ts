import { readdir, stat } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { contentHash } from '../../src/recording/content-hash.ts';
import { recordingPath, type SessionFile } from '../../src/session/read-session.ts';
import type { SeenRecording } from './known-recordings.ts';

/**
 * Where the recordings of a session file are, by id. One that isn't where the session says is looked for where it was seen last and beside
 * the session file, and taken only when its content is what it was; else its path stays what the session says.
 * @param seen what a recording contained when the session was last seen.
 */
export async function findRecordings(
  file: SessionFile,
  seen: (recording: string) => SeenRecording | null,
): Promise<Map<string, string>> {
  const paths = new Map<string, string>();
  for (const { id, file: name } of file.session.recordings) {
    const said = recordingPath(file.path, name);
    const last = seen(id);
    const moved = last && !(await size_bytes(said)) ? await movedTo(last, dirname(file.path)) : null;
    paths.set(id, moved ?? said);
  }
  return paths;
}

async function movedTo(last: SeenRecording, folder: string): Promise<string | null> {
  const beside = (await readdir(folder).catch(() => [])).map((name) => join(folder, name));
  const sameName = (path: string) => (basename(path) === basename(last.path) ? 0 : 1);
  for (const path of [last.path, ...beside.sort((a, b) => sameName(a) - sameName(b))]) {
    if ((await size_bytes(path)) !== last.bytes) continue;
    if ((await contentHash(path).catch(() => null)) === last.content) return path;
  }
  return null;
}

/** Size of a file, null: there is none. */
async function size_bytes(path: string): Promise<number | null> {
  const facts = await stat(path).catch(() => null);
  return facts?.isFile() ? facts.size : null;
}
