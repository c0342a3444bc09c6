import { accessSync, constants, existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { packageRoot } from '../page/package-root.ts';

/** Whether the window can be Electron's: how to start it, or one plain reason why not. */
export type ElectronChoice =
  | { readonly use: true; readonly executable: string; readonly root: string }
  | { readonly use: false; readonly reason: string };

/** What the choice depends on. */
export interface Surroundings {
  readonly env: NodeJS.ProcessEnv;
  readonly platform: NodeJS.Platform;
  /** The user's number, null where the system has none. */
  readonly uid: number | null;
}

/** Whether pictures can be shown on this machine at all. */
export function hasDisplay({ env, platform }: Pick<Surroundings, 'env' | 'platform'>): boolean {
  if (platform === 'darwin' || platform === 'win32') return true;
  return Boolean(env.DISPLAY) || Boolean(env.WAYLAND_DISPLAY);
}

/** Looks for Electron's runtime beside the program. NEEDLEBEAT_WINDOW=browser asks for the browser in any case. */
export function electronRuntime(surroundings: Surroundings): ElectronChoice {
  const no = (reason: string): ElectronChoice => ({ use: false, reason });
  if (surroundings.env.NEEDLEBEAT_WINDOW === 'browser') return no('NEEDLEBEAT_WINDOW asks for the browser');
  const root = packageRoot();
  const folder = electronFolder();
  if (root === null || folder === null) return no('Electron is not installed');
  const executable = executableIn(folder, surroundings.env);
  if (executable === null) {
    return no('the Electron runtime has not been fetched ("node node_modules/electron/install.js" fetches it)');
  }
  if (!existsSync(join(root, 'dist/app/main/main.js'))) return no('the desktop part has not been built');
  if (!hasDisplay(surroundings)) return no('this machine has no display');
  if (surroundings.platform === 'linux' && surroundings.uid === 0) {
    return no('Electron keeps its sandbox, which does not work for the superuser');
  }
  return { use: true, executable, root };
}

function electronFolder(): string | null {
  try {
    return dirname(createRequire(import.meta.url).resolve('electron/package.json'));
  } catch {
    return null;
  }
}

/** path.txt beside Electron's package file names the executable within dist; both come with the runtime. */
function executableIn(folder: string, env: NodeJS.ProcessEnv): string | null {
  const elsewhere = env.ELECTRON_OVERRIDE_DIST_PATH;
  try {
    const stated = join(folder, 'path.txt');
    const name = existsSync(stated) ? readFileSync(stated, 'utf8').trim() : elsewhere ? 'electron' : null;
    if (name === null) return null;
    const path = join(elsewhere ?? join(folder, 'dist'), name);
    accessSync(path, constants.X_OK);
    return path;
  } catch {
    return null;
  }
}
