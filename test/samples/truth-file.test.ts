import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { readCase } from '../../samples/truth-file.ts';

let folder = '';
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-truth-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

const put = (name: string, text: string) => writeFile(join(folder, name), text);
const TRUTH = JSON.stringify({ view: 'plan', apparatus: {}, segments: [{ id: 's01', f0_Hz: 1 }] });

describe('a folder with a session and its truth', () => {
  it('says what is missing', async () => {
    await expect(readCase(join(folder, 'nowhere'))).rejects.toThrow(/nowhere: a folder/);
    await expect(readCase(folder)).rejects.toThrow(/no session file/);
    await put('a.needlebeat.json', '{}');
    await expect(readCase(folder)).rejects.toThrow(/no truth file/);
    await put('truth.json', '{"segments": 3}');
    await expect(readCase(folder)).rejects.toThrow(/truth\.json: a truth file with "apparatus" and "segments"/);
    await put('truth.json', '{');
    await expect(readCase(folder)).rejects.toThrow(/truth\.json: this is not JSON/);
  });

  it('takes true angles by frame number, whatever the order of columns', async () => {
    await put('a.needlebeat.json', '{}');
    await put('a.truth.json', TRUTH);
    expect((await readCase(folder)).frames).toBeNull();
    await put('frames.csv', 'time_s,angle_deg,frame\n0,10.5,0\n0.1,11.25,1\n');
    expect([...(await readCase(folder)).frames!]).toEqual([10.5, 11.25]);
    await put('frames.csv', 'time_s,degrees\n0,1\n');
    await expect(readCase(folder)).rejects.toThrow(/columns "frame" and "angle_deg"/);
  });
});
