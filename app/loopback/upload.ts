import { randomBytes } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, rename, rm, statfs } from 'node:fs/promises';
import type { IncomingMessage } from 'node:http';
import { join } from 'node:path';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';

/** An upload that was refused: HTTP status and the sentence for the user. */
export class UploadRefused extends Error {
  override readonly name = 'UploadRefused';
  readonly status: number;
  constructor(status: number, message: string) {
    super(message);
    this.status = status;
  }
}

/** Room that an upload must leave on the disk. */
const KEEP_FREE_BYTES = 256 * 1024 * 1024;

/**
 * Streams the body of a request into a file of its own folder. The file has its name only when it is whole; what was cut short is removed.
 * @param folder private folder for uploads. @param limit_bytes largest body taken.
 * @returns absolute path and the name to show.
 * @throws UploadRefused
 */
export async function receiveUpload(
  request: IncomingMessage,
  folder: string,
  limit_bytes: number,
): Promise<{ path: string; name: string }> {
  const name = fileName(request.headers['x-file-name']);
  const stated = request.headers['content-length'];
  const length = stated === undefined ? null : Number(stated);
  if (length !== null && length > limit_bytes) throw tooLarge(name, limit_bytes);
  const place = join(folder, randomBytes(12).toString('hex'));
  await mkdir(place, { recursive: true, mode: 0o700 });
  const disk = await statfs(place);
  const free_bytes = Math.max(0, disk.bavail * disk.bsize - KEEP_FREE_BYTES);
  const partial = join(place, 'partial');
  const path = join(place, name);
  try {
    if (length !== null && length > free_bytes) throw noRoom(name);
    await pipeline(
      request,
      bounded(
        () => tooLarge(name, limit_bytes),
        limit_bytes,
        () => noRoom(name),
        free_bytes,
      ),
      createWriteStream(partial, { mode: 0o600, flags: 'wx' }),
    );
    await rename(partial, path);
    return { path, name };
  } catch (error) {
    await rm(place, { recursive: true, force: true });
    if (error instanceof UploadRefused) throw error;
    throw new UploadRefused(400, `${name}: it did not arrive whole; choose it again.`);
  }
}

function bounded(tooMuch: () => Error, limit_bytes: number, noRoomLeft: () => Error, free_bytes: number): Transform {
  let count = 0;
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      count += chunk.length;
      if (count > limit_bytes) done(tooMuch());
      else if (count > free_bytes) done(noRoomLeft());
      else done(null, chunk);
    },
  });
}

/** The base name that the browser gave, made harmless as a file name of this computer. */
function fileName(header: string | string[] | undefined): string {
  let name = '';
  try {
    name = decodeURIComponent(typeof header === 'string' ? header : '');
  } catch {
    // Not encoded as it should be: no name.
  }
  const base = name.split(/[\\/]/).at(-1) ?? '';
  // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is to be kept out.
  const clean = base.replace(/[\u0000-\u001f\u007f<>:"|?*]/g, '_').replace(/^\.+|[. ]+$/g, '');
  const kept = Buffer.byteLength(clean) > 200 ? shortened(clean) : clean;
  if (kept === '') throw new UploadRefused(400, 'The upload names no file: X-File-Name was expected.');
  return kept === 'partial' ? '_partial' : kept;
}

/** File systems count bytes: the end of a long name, with its extension, is kept. */
function shortened(name: string): string {
  let kept = name;
  while (Buffer.byteLength(kept) > 200) kept = kept.slice(1);
  return kept;
}

const tooLarge = (name: string, limit_bytes: number) =>
  new UploadRefused(
    413,
    `${name}: it is larger than the ${Math.floor(limit_bytes / 2 ** 30)} GiB that can be taken in through the browser; open it with "needlebeat open".`,
  );
const noRoom = (name: string) => new UploadRefused(507, `${name}: there is not enough room on the disk for a copy.`);
