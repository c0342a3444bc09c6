import { access, constants, stat } from 'node:fs/promises';
import { delimiter, dirname, isAbsolute, join } from 'node:path';
import { ffmpegStaticPath, installedFfmpegPath, installedFfprobePath } from './bundled-binaries.ts';
import { childOutput } from './ffmpeg-child.ts';
import { type FfmpegVersion, isNewer, parseFfmpegVersion } from './ffmpeg-version.ts';
import { InputError } from './input-error.ts';

/** Which of the ways found the ffmpeg in use. */
export type FfmpegSource = 'FFMPEG_PATH' | 'ffmpeg-static' | 'PATH' | 'bundled';

/** The two programs that read recordings. */
export interface FfmpegTools {
  /** Absolute path of ffmpeg. */
  readonly ffmpeg: string;
  readonly version: FfmpegVersion;
  readonly source: FfmpegSource;
  /** Absolute path of ffprobe. */
  readonly ffprobe: string;
  readonly ffprobeVersion: FfmpegVersion;
}

interface Binary {
  readonly path: string;
  readonly version: FfmpegVersion;
}

const found = new Map<string, Promise<FfmpegTools>>();

/**
 * Finds ffmpeg and ffprobe, once per process and environment. ffmpeg: FFMPEG_PATH, the optional ffmpeg-static, the newer of the one on PATH and
 * the bundled one. ffprobe: FFPROBE_PATH, the one beside the chosen ffmpeg (it reads containers with the same code), the newer of the one
 * on PATH and the bundled one. Throws InputError where a variable names something that isn't ffmpeg, or nothing is found.
 */
export function findFfmpeg(env: NodeJS.ProcessEnv): Promise<FfmpegTools> {
  const key = JSON.stringify([env.FFMPEG_PATH, env.FFPROBE_PATH, env.PATH]);
  let tools = found.get(key);
  if (tools === undefined) {
    tools = search(env);
    found.set(key, tools);
    tools.catch(() => found.delete(key));
  }
  return tools;
}

async function search(env: NodeJS.ProcessEnv): Promise<FfmpegTools> {
  const tryBinary = triedOnce();
  // Nearly always the one that is wanted in the end; asking takes as long as asking the ffmpegs.
  const early = onSearchPath(env, 'ffprobe').then(tryBinary);
  const { source, ...ffmpeg } = await chooseFfmpeg(env, tryBinary).finally(() => early);
  const ffprobe = await chooseFfprobe(env, ffmpeg.path, tryBinary);
  return {
    ffmpeg: ffmpeg.path,
    version: ffmpeg.version,
    source,
    ffprobe: ffprobe.path,
    ffprobeVersion: ffprobe.version,
  };
}

async function chooseFfmpeg(env: NodeJS.ProcessEnv, tryBinary: TryBinary): Promise<Binary & { source: FfmpegSource }> {
  const named = await namedBinary(env, 'FFMPEG_PATH', 'ffmpeg', tryBinary);
  if (named !== null) return { ...named, source: 'FFMPEG_PATH' };
  const fetched = await tryBinary(ffmpegStaticPath());
  if (fetched !== null) return { ...fetched, source: 'ffmpeg-static' };
  const [onPath, bundled] = await Promise.all([
    onSearchPath(env, 'ffmpeg').then(tryBinary),
    installedFfmpegPath(env).then(tryBinary),
  ]);
  if (onPath !== null && (bundled === null || isNewer(onPath.version, bundled.version))) {
    return { ...onPath, source: 'PATH' };
  }
  if (bundled !== null) return { ...bundled, source: 'bundled' };
  throw new InputError(
    'No ffmpeg that runs was found: install it, or let FFMPEG_PATH hold the path of the ffmpeg program.',
  );
}

async function chooseFfprobe(env: NodeJS.ProcessEnv, ffmpegPath: string, tryBinary: TryBinary): Promise<Binary> {
  const named = await namedBinary(env, 'FFPROBE_PATH', 'ffprobe', tryBinary);
  if (named !== null) return named;
  const beside = await tryBinary(join(dirname(ffmpegPath), executableName('ffprobe')));
  if (beside !== null) return beside;
  const [onPath, bundled] = await Promise.all([
    onSearchPath(env, 'ffprobe').then(tryBinary),
    installedFfprobePath(env).then(tryBinary),
  ]);
  if (onPath !== null && (bundled === null || isNewer(onPath.version, bundled.version))) return onPath;
  if (bundled !== null) return bundled;
  throw new InputError(
    'No ffprobe that runs was found: install it, or let FFPROBE_PATH hold the path of the ffprobe program.',
  );
}

async function namedBinary(
  env: NodeJS.ProcessEnv,
  variable: string,
  program: string,
  tryBinary: TryBinary,
): Promise<Binary | null> {
  const path = env[variable];
  if (path === undefined || path === '') return null;
  const binary = isAbsolute(path) ? await tryBinary(path) : null;
  if (binary === null) {
    throw new InputError(`${variable} is "${path}", but the absolute path of a working ${program} was expected there.`);
  }
  return binary;
}

/** Runs the program for its version; null where there is none, or it is something else. */
type TryBinary = (path: string | null) => Promise<Binary | null>;

/** Tries each path once, whoever asks. */
function triedOnce(): TryBinary {
  const tried = new Map<string, Promise<Binary | null>>();
  return async (path) => {
    if (path === null) return null;
    const trying = tried.get(path) ?? tryBinary(path);
    tried.set(path, trying);
    return trying;
  };
}

async function tryBinary(path: string): Promise<Binary | null> {
  if (!(await isExecutable(path))) return null;
  const run = await childOutput(path, ['-version'], {
    deadlines: { whole_s: 20, silence_s: 20 },
    limit_bytes: 1 << 16,
  });
  const version = run.code === 0 ? parseFfmpegVersion(run.stdout.toString('utf8')) : null;
  return version === null ? null : { path, version };
}

async function onSearchPath(env: NodeJS.ProcessEnv, program: string): Promise<string | null> {
  for (const folder of (env.PATH ?? '').split(delimiter)) {
    const path = join(folder, executableName(program));
    if (isAbsolute(folder) && (await isExecutable(path))) return path;
  }
  return null;
}

async function isExecutable(path: string): Promise<boolean> {
  try {
    await access(path, constants.X_OK);
    return (await stat(path)).isFile();
  } catch {
    return false;
  }
}

function executableName(program: string): string {
  return process.platform === 'win32' ? `${program}.exe` : program;
}
