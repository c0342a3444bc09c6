import { readFileSync } from 'node:fs';

/** Finds the package file above this module, whether it runs from its source or from the build. */
function packageVersion(): string {
  for (const up of ['../../package.json', '../../../package.json']) {
    try {
      const text = readFileSync(new URL(up, import.meta.url), 'utf8');
      const value: unknown = JSON.parse(text);
      if (typeof value === 'object' && value !== null && 'name' in value && value.name === 'needlebeat') {
        return 'version' in value ? String(value.version) : '0';
      }
    } catch {
      // Not there: one more level up.
    }
  }
  return '0';
}

/** Version of this program, as its package states it. */
export const programVersion = packageVersion();

/** Name and version, as results files carry them. */
export const programName = `needlebeat ${programVersion}`;
