import { mkdir } from 'node:fs/promises';
import { dirname } from 'node:path';
import writeFileAtomic from 'write-file-atomic';
import type { Session } from './session.ts';

/** The text of a session file: two-space JSON with a final line break. */
export function sessionText(session: Session): string {
  return `${JSON.stringify(session, null, 2)}\n`;
}

/** Writes a text so that at any moment the file holds either the whole old or the whole new text. Makes the folder where it is missing. */
export async function writeWhole(path: string, content: string | Uint8Array): Promise<void> {
  await mkdir(dirname(path), { recursive: true });
  await writeFileAtomic(path, typeof content === 'string' ? content : Buffer.from(content));
}
