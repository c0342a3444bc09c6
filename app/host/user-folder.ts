import { mkdir } from 'node:fs/promises';
import { homedir } from 'node:os';
import { isAbsolute, join } from 'node:path';

/**
 * Folder for what the program keeps between runs: NEEDLEBEAT_HOME where set, else the place that the system has for it
 * (XDG Base Directory Specification 0.8 on Linux, common practice elsewhere).
 */
export function userFolderPath(env: NodeJS.ProcessEnv, platform: NodeJS.Platform): string {
  if (env.NEEDLEBEAT_HOME && isAbsolute(env.NEEDLEBEAT_HOME)) return env.NEEDLEBEAT_HOME;
  if (platform === 'win32') return join(env.LOCALAPPDATA ?? join(homedir(), 'AppData', 'Local'), 'Needlebeat');
  if (platform === 'darwin') return join(homedir(), 'Library', 'Application Support', 'Needlebeat');
  const state = env.XDG_STATE_HOME;
  return join(state && isAbsolute(state) ? state : join(homedir(), '.local', 'state'), 'needlebeat');
}

/** The parts of the user's folder. */
export interface UserFolder {
  /** Working copies: one folder for each run. */
  readonly work: string;
  /** Files that came in through a browser. */
  readonly uploads: string;
  /** Traces that have been followed, and measured segments. */
  readonly cache: string;
  readonly recent: string;
  /** How the window was laid out last. */
  readonly layout: string;
  /** Where recordings were seen, and what their content was. */
  readonly known: string;
}

/** Makes the folder, private to the user, and says where its parts are. */
export async function openUserFolder(path: string): Promise<UserFolder> {
  const folder = {
    work: join(path, 'work'),
    uploads: join(path, 'uploads'),
    cache: join(path, 'cache'),
    recent: join(path, 'recent.json'),
    layout: join(path, 'layout.json'),
    known: join(path, 'recordings.json'),
  };
  await mkdir(path, { recursive: true, mode: 0o700 });
  for (const part of [folder.work, folder.uploads, folder.cache]) await mkdir(part, { recursive: true, mode: 0o700 });
  return folder;
}
