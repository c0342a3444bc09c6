import { readdir, readFile } from 'node:fs/promises';
import { extname, join } from 'node:path';

/** One file of the built window, held whole: they are few and small, and nothing is read from disk by a request. */
export interface PageFile {
  readonly bytes: Uint8Array;
  readonly type: string;
}

/** The built window by the path that asks for it; `/` is index.html. Whatever isn't in here doesn't exist. */
export type PageFiles = ReadonlyMap<string, PageFile>;

const types: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
  '.ico': 'image/x-icon',
  '.woff2': 'font/woff2',
};

/**
 * Reads the table of files once. Files of a type that the window doesn't need (source maps) are left out.
 * @throws Error where the folder holds no index.html, so was never built.
 */
export async function readPageFiles(folder: string): Promise<PageFiles> {
  const files = new Map<string, PageFile>();
  for (const name of await filesBelow(folder, '')) {
    const type = types[extname(name)];
    if (type !== undefined) files.set(`/${name}`, { bytes: await readFile(join(folder, name)), type });
  }
  const index = files.get('/index.html');
  if (!index) throw new Error('The window has not been built: run "npm run build" first.');
  return files.set('/', index);
}

/** Names of all files below a folder, with `/` between their parts. Level by level: inside a package's archive nothing else is sure to work. */
async function filesBelow(folder: string, below: string): Promise<string[]> {
  const entries = await readdir(join(folder, below), { withFileTypes: true }).catch(() => []);
  const names: string[] = [];
  for (const entry of entries) {
    const name = below === '' ? entry.name : `${below}/${entry.name}`;
    if (entry.isDirectory()) names.push(...(await filesBelow(folder, name)));
    else if (entry.isFile()) names.push(name);
  }
  return names;
}
