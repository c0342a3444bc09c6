import { access, constants } from 'node:fs/promises';
import { delimiter, join } from 'node:path';

const NAMES = [
  'chromium',
  'chromium-browser',
  'google-chrome',
  'google-chrome-stable',
  'chrome',
  'microsoft-edge',
  'microsoft-edge-stable',
  'msedge',
] as const;

/** Where installers put them that don't put them on the path. */
const USUAL: Readonly<Partial<Record<NodeJS.Platform, readonly string[]>>> = {
  darwin: [
    '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
    '/Applications/Chromium.app/Contents/MacOS/Chromium',
    '/Applications/Microsoft Edge.app/Contents/MacOS/Microsoft Edge',
  ],
  win32: ['Google\\Chrome\\Application\\chrome.exe', 'Microsoft\\Edge\\Application\\msedge.exe'].flatMap((tail) =>
    ['C:\\Program Files', 'C:\\Program Files (x86)'].map((folder) => `${folder}\\${tail}`),
  ),
};

/**
 * A browser of the Chromium family that can print a page: the one that CHROMIUM_PATH names, else the first on PATH, else one at
 * its usual place. Null where there is none (also where CHROMIUM_PATH names nothing that can be run).
 */
export async function findBrowser(env: NodeJS.ProcessEnv, platform: NodeJS.Platform): Promise<string | null> {
  if (env.CHROMIUM_PATH) return (await canRun(env.CHROMIUM_PATH)) ? env.CHROMIUM_PATH : null;
  const folders = (env.PATH ?? env.Path ?? '').split(delimiter).filter((folder) => folder !== '');
  const names = platform === 'win32' ? NAMES.map((name) => `${name}.exe`) : NAMES;
  const onPath = names.flatMap((name) => folders.map((folder) => join(folder, name)));
  for (const path of [...onPath, ...(USUAL[platform] ?? [])]) {
    if (await canRun(path)) return path;
  }
  return null;
}

async function canRun(path: string): Promise<boolean> {
  return access(path, constants.X_OK).then(
    () => true,
    () => false,
  );
}
