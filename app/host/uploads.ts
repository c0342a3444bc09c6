import { readdir, rm, stat } from 'node:fs/promises';
import { join, sep } from 'node:path';
import type { UserFolder } from './user-folder.ts';
import { leftBehind } from './working-copy.ts';

const KEEP_DAYS = 14;

/** Removes files that came in through a browser two weeks ago or earlier and that no session at hand uses. */
export async function removeOldUploads(folder: UserFolder, inUse: ReadonlyMap<string, string>): Promise<void> {
  const used = [...inUse.values()];
  for (const left of await leftBehind(folder.work)) used.push(...left.start.paths.values());
  const oldest_ms = Date.now() - KEEP_DAYS * 86_400_000;
  for (const name of await readdir(folder.uploads).catch(() => [])) {
    const place = join(folder.uploads, name);
    const facts = await stat(place).catch(() => null);
    if (!facts || facts.mtimeMs > oldest_ms || used.some((path) => path.startsWith(place + sep))) continue;
    await rm(place, { recursive: true, force: true });
  }
}
