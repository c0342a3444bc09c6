import { statSync } from 'node:fs';
import { isAbsolute, resolve } from 'node:path';

/**
 * The file named on a command line: the last argument that is one. Whatever begins with a dash is Electron's.
 * @param args without the program itself. @param cwd of whoever typed them.
 */
export function fileAmong(args: readonly string[], cwd: string): string | null {
  for (const arg of [...args].reverse()) {
    if (arg === '' || arg.startsWith('-') || arg.includes('\0') || arg.length > 4096) continue;
    const path = isAbsolute(arg) ? arg : resolve(cwd, arg);
    if (statSync(path, { throwIfNoEntry: false })?.isFile()) return path;
  }
  return null;
}
