import { createHash } from 'node:crypto';
import { open } from 'node:fs/promises';

const part_bytes = 1 << 20;

/**
 * A name for a recording's content by which a moved or renamed file is recognised: SHA-256 (hex) over the file's size as 8 bytes big-endian, its
 * first MiB and its last MiB (the whole file where it is shorter than both). Rejects where the file can't be read.
 */
export async function contentHash(path: string): Promise<string> {
  const file = await open(path, 'r');
  try {
    const { size } = await file.stat();
    const sizeBytes = Buffer.alloc(8);
    sizeBytes.writeBigUInt64BE(BigInt(size));
    const hash = createHash('sha256').update(sizeBytes);
    const parts =
      size <= 2 * part_bytes
        ? [[0, size] as const]
        : [[0, part_bytes] as const, [size - part_bytes, part_bytes] as const];
    for (const [position, length] of parts) {
      const bytes = Buffer.alloc(length);
      const { bytesRead } = await file.read(bytes, 0, length, position);
      hash.update(bytes.subarray(0, bytesRead));
    }
    return hash.digest('hex');
  } finally {
    await file.close();
  }
}
