import { open } from 'node:fs/promises';
import { basename } from 'node:path';
import { InputError } from '../../src/recording/input-error.ts';

/**
 * Whether a file is to be read as a session or as a recording: sessions are JSON objects, and nothing that ffmpeg reads begins like one.
 * @throws InputError where it can't be read.
 */
export async function fileKind(path: string): Promise<'session' | 'recording'> {
  const name = basename(path);
  const file = await open(path, 'r').catch((error: NodeJS.ErrnoException) => {
    const why = error.code === 'ENOENT' ? 'there is no such file' : `it can't be read (${error.code ?? 'unknown'})`;
    throw new InputError(`${name}: ${why}; a recording or a session file was expected.`);
  });
  try {
    if (!(await file.stat()).isFile()) {
      throw new InputError(`${name}: this is not a file; a recording or a session file was expected.`);
    }
    const { buffer, bytesRead } = await file.read(Buffer.alloc(64), 0, 64, 0);
    const start = buffer
      .subarray(0, bytesRead)
      .toString('latin1')
      .replace(/^\u00ef\u00bb\u00bf/, '')
      .trimStart();
    return start.startsWith('{') || /\.json$/i.test(name) ? 'session' : 'recording';
  } finally {
    await file.close();
  }
}
