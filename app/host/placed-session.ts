import { basename, isAbsolute, relative, resolve, sep } from 'node:path';
import type { Session } from '../contract.ts';

/** Where a session's recordings are: absolute path by recording id. */
export type RecordingPaths = ReadonlyMap<string, string>;

/** The session as the window sees it: recordings by their base names, no path. */
export function withoutPaths(session: Session): Session {
  const bare = (file: string) => file.split(/[\\/]/).at(-1) || file;
  return { ...session, recordings: session.recordings.map((r) => ({ ...r, file: bare(r.file) })) };
}

/**
 * The session as its file holds it: recordings relative to the folder of the session file.
 * @param folder of the session file, absolute; null: not known yet, recordings are taken to lie beside it.
 * @param asWritten how the file itself spells them, by id; kept where it still means the same.
 */
export function placed(
  session: Session,
  paths: RecordingPaths,
  folder: string | null,
  asWritten: ReadonlyMap<string, string> = new Map(),
): Session {
  const fileOf = (id: string, file: string) => {
    const path = paths.get(id);
    if (path === undefined) return asWritten.get(id) ?? file;
    if (folder === null) return basename(path);
    const written = asWritten.get(id);
    if (written !== undefined && resolve(folder, written) === path) return written;
    const way = relative(folder, path);
    return isAbsolute(way) ? way : way.split(sep).join('/');
  };
  return { ...session, recordings: session.recordings.map((r) => ({ ...r, file: fileOf(r.id, r.file) })) };
}
