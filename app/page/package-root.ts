import { readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** Folder of the program's package: the first above this module that has our package file. */
export function packageRoot(): string | null {
  for (let folder = dirname(fileURLToPath(import.meta.url)); ; folder = dirname(folder)) {
    try {
      const facts: unknown = JSON.parse(readFileSync(join(folder, 'package.json'), 'utf8'));
      if (typeof facts === 'object' && facts !== null && 'name' in facts && facts.name === 'needlebeat') return folder;
    } catch {
      // Not here: one further up.
    }
    if (folder === dirname(folder)) return null;
  }
}
