import { access, chmod, constants, copyFile, mkdir, rename, rm, stat } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { homedir } from 'node:os';
import { basename, join } from 'node:path';

const require = createRequire(import.meta.url);

/** Path of the binary that ffmpeg-static fetched when it was installed; null where the package or its binary is missing. */
export function ffmpegStaticPath(): string | null {
  try {
    const path: unknown = require('ffmpeg-static');
    return typeof path === 'string' ? outsideArchive(path) : null;
  } catch {
    return null;
  }
}

/** Path of the ffmpeg inside @ffmpeg-installer, ready to run; null where the package has none for this system. */
export function installedFfmpegPath(env: NodeJS.ProcessEnv): Promise<string | null> {
  return installedPath('@ffmpeg-installer/ffmpeg', env);
}

/** Path of the ffprobe inside @ffprobe-installer, ready to run; null where the package has none for this system. */
export function installedFfprobePath(env: NodeJS.ProcessEnv): Promise<string | null> {
  return installedPath('@ffprobe-installer/ffprobe', env);
}

async function installedPath(name: string, env: NodeJS.ProcessEnv): Promise<string | null> {
  try {
    const { path } = require(name) as { path: string };
    return await madeExecutable(outsideArchive(path), env);
  } catch {
    return null;
  }
}

/** Where a program that an Electron archive seems to hold really is: it can't be started from within, so it is unpacked beside the archive. */
export function outsideArchive(path: string): string {
  return path.replace(/app\.asar(?=[\\/])/, 'app.asar.unpacked');
}

/**
 * The packed ffprobe may be executable by its owner only. Gives it the missing bits where we may, else makes a copy of our own in the user's
 * cache folder (once: its name carries size and time of the original). Rejects where neither can be done.
 */
export async function madeExecutable(path: string, env: NodeJS.ProcessEnv): Promise<string> {
  if (await mayRun(path)) return path;
  try {
    await chmod(path, 0o755);
    if (await mayRun(path)) return path;
  } catch {
    // Not ours: copy it.
  }
  const { size, mtimeMs } = await stat(path);
  const folder = join(env.XDG_CACHE_HOME ?? join(env.HOME ?? homedir(), '.cache'), 'needlebeat');
  const copy = join(folder, `${size}-${Math.trunc(mtimeMs)}-${basename(path)}`);
  if (await mayRun(copy)) return copy;
  await mkdir(folder, { recursive: true, mode: 0o700 });
  const unfinished = `${copy}.${process.pid}`;
  try {
    await copyFile(path, unfinished);
    await chmod(unfinished, 0o700);
    await rename(unfinished, copy);
  } finally {
    await rm(unfinished, { force: true });
  }
  return copy;
}

async function mayRun(path: string): Promise<boolean> {
  try {
    await access(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}
