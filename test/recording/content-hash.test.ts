import { createHash } from 'node:crypto';
import { mkdtemp, rename, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { contentHash } from '../../src/recording/content-hash.ts';

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-hash-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const mebibyte = 1 << 20;

test('is SHA-256 over size, first and last MiB', async () => {
  const content = Buffer.alloc(
    3 * mebibyte + 17,
    Uint8Array.from({ length: 251 }, (_, i) => i),
  );
  await writeFile(join(folder, 'a'), content);
  const size = Buffer.alloc(8);
  size.writeBigUInt64BE(BigInt(content.length));
  const expected = createHash('sha256')
    .update(Buffer.concat([size, content.subarray(0, mebibyte), content.subarray(-mebibyte)]))
    .digest('hex');
  expect(await contentHash(join(folder, 'a'))).toBe(expected);
});

test('stays when the file moves, and changes with size, beginning or end', async () => {
  const hashes = new Set<string>();
  const hashed = async (content: Buffer) => {
    await writeFile(join(folder, 'b'), content);
    return contentHash(join(folder, 'b'));
  };
  const base = Buffer.alloc(100, 7);
  hashes.add(await hashed(base));
  await rename(join(folder, 'b'), join(folder, 'c'));
  hashes.add(await contentHash(join(folder, 'c')));
  expect(hashes.size).toBe(1);
  hashes.add(await hashed(Buffer.alloc(101, 7)));
  hashes.add(await hashed(Buffer.concat([Buffer.of(8), base.subarray(1)])));
  hashes.add(await hashed(Buffer.concat([base.subarray(1), Buffer.of(8)])));
  expect(hashes.size).toBe(4);
});
