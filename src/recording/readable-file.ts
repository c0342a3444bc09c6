import { access, constants, open, stat } from 'node:fs/promises';
import { InputError } from './input-error.ts';

/** What can be said of a file before anything tries to understand it. */
export interface ReadableFile {
  readonly bytes: number;
  /** Its first bytes, at most 16. */
  readonly head: Buffer;
}

/** Makes sure that a path names a regular file with something in it that may be read. Throws InputError with one sentence naming it where not. */
export async function readableFile(path: string): Promise<ReadableFile> {
  const bytes = await sizeOfFile(path);
  return { bytes, head: await firstBytes(path) };
}

async function sizeOfFile(path: string): Promise<number> {
  const facts = await stat(path).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT' || error.code === 'ENOTDIR')
      throw new InputError(`"${path}" doesn't exist: a recording was expected there.`);
    throw new InputError(`"${path}" can't be read: ${error.message}.`);
  });
  if (facts.isDirectory()) throw new InputError(`"${path}" is a folder: a recording was expected there.`);
  if (!facts.isFile()) throw new InputError(`"${path}" isn't a regular file: a recording was expected there.`);
  if (facts.size === 0) throw new InputError(`"${path}" is empty (zero bytes): a recording was expected there.`);
  await access(path, constants.R_OK).catch(() => {
    throw new InputError(`"${path}" can't be read: its permissions don't allow it.`);
  });
  return facts.size;
}

async function firstBytes(path: string): Promise<Buffer> {
  const file = await open(path, 'r');
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(16), 0, 16, 0);
    return buffer.subarray(0, bytesRead);
  } finally {
    await file.close();
  }
}
