import { appendFile, chmod, mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { decodeFrames } from '../../src/recording/decode-frames.ts';
import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { InputError } from '../../src/recording/input-error.ts';
import { openRecording } from '../../src/recording/open-recording.ts';
import { hasEncoder, numberRegion, readNumber, runFfmpeg, writeNumberedVideo } from './numbered-video.ts';

const tools = await findFfmpeg(process.env);
const encoder = hasEncoder(tools, 'libx264') ? 'libx264' : 'mpeg4';
const output = ['-c:v', encoder, '-pix_fmt', 'yuv420p', '-g', '20', '-q:v', '3'];
let folder: string;
const inFolder = (file: string) => join(folder, file);
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-damaged-'));
  await writeNumberedVideo(inFolder('sound.mp4'), tools, { frames: 60, output });
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function sentence(path: string): Promise<string> {
  const error = await openRecording(path, tools).then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(error).toBeInstanceOf(InputError);
  const { message } = error as InputError;
  expect(message.startsWith(`"${path}" `)).toBe(true);
  expect(message.endsWith('.')).toBe(true);
  expect(message).not.toContain('\n');
  return message.slice(path.length + 3);
}

describe('what is no recording is refused with one sentence', () => {
  const notVideo = 'is not a video recording that can be read (mp4, mov, mkv, webm or avi was expected).';

  test('missing, a folder, empty', async () => {
    expect(await sentence(inFolder('none.mp4'))).toBe("doesn't exist: a recording was expected there.");
    await mkdir(inFolder('folder.mp4'));
    expect(await sentence(inFolder('folder.mp4'))).toBe('is a folder: a recording was expected there.');
    await writeFile(inFolder('zero.mp4'), '');
    expect(await sentence(inFolder('zero.mp4'))).toBe('is empty (zero bytes): a recording was expected there.');
  });

  test.skipIf(process.getuid?.() === 0 || process.platform === 'win32')('not allowed to be read', async () => {
    await writeFile(inFolder('secret.mp4'), 'x');
    await chmod(inFolder('secret.mp4'), 0);
    expect(await sentence(inFolder('secret.mp4'))).toMatch(/^can't be read/);
  });

  test('text, and lists that name a good file beside them', async () => {
    await writeFile(inFolder('text.mp4'), 'a line of text\n'.repeat(500));
    await writeFile(inFolder('concat.mp4'), "ffconcat version 1.0\nfile 'sound.mp4'\n");
    await writeFile(inFolder('list.mkv'), '#EXTM3U\n#EXT-X-TARGETDURATION:4\n#EXTINF:4,\nsound.mp4\n#EXT-X-ENDLIST\n');
    for (const file of ['text.mp4', 'concat.mp4', 'list.mkv']) expect(await sentence(inFolder(file))).toBe(notVideo);
  });

  test('a picture, and sound without pictures', async () => {
    await runFfmpeg(tools, ['-f', 'lavfi', '-i', 'testsrc=d=0.04', '-frames:v', '1', inFolder('picture.png')]);
    expect(await sentence(inFolder('picture.png'))).toBe(notVideo);
    await runFfmpeg(tools, ['-f', 'lavfi', '-i', 'sine=d=1', '-c:a', 'aac', inFolder('sound.m4a')]);
    expect(await sentence(inFolder('sound.m4a'))).toBe('holds no moving picture: a video recording was expected.');
    const cover = ['-i', inFolder('sound.m4a'), '-i', inFolder('picture.png'), '-map', '0', '-map', '1', '-c', 'copy'];
    await runFfmpeg(tools, [...cover, '-disposition:v:0', 'attached_pic', inFolder('cover.m4a')]);
    expect(await sentence(inFolder('cover.m4a'))).toBe('holds no moving picture: a video recording was expected.');
  });

  test('an mp4 whose index at the end is missing', async () => {
    const whole = await readFile(inFolder('sound.mp4'));
    await writeFile(inFolder('cut.mp4'), whole.subarray(0, whole.length / 2));
    expect(await sentence(inFolder('cut.mp4'))).toBe(
      'is cut short: the index at its end is missing, so no frame can be found.',
    );
  });

  test('a decoder that is not among those allowed', async () => {
    await runFfmpeg(tools, ['-f', 'lavfi', '-i', 'testsrc=d=0.2', '-c:v', 'flv', inFolder('old.avi')]);
    expect(await sentence(inFolder('old.avi'))).toMatch(/^holds a track \(flv\) of a kind that is not read here/);
  });
});

describe('what is damaged is used as far as it goes, and the account says how far', () => {
  async function decoded(file: string) {
    const recording = await openRecording(inFolder(file), tools);
    const stream = decodeFrames(recording, { region: numberRegion, start_s: 0, end_s: 1e6, timeScale: 1 }, tools);
    const numbers: (number | null)[] = [];
    for await (const frame of stream) numbers.push(readNumber(frame));
    const account = stream.account();
    expect(account.claimed).toBe(recording.ticks.length);
    expect(account.claimed).toBe(account.decoded + account.lost);
    expect(account.decoded).toBe(numbers.length);
    return { recording, numbers, account };
  }

  test('an mp4 with its index in front, cut short', async () => {
    await runFfmpeg(tools, [
      '-i',
      inFolder('sound.mp4'),
      '-c',
      'copy',
      '-movflags',
      '+faststart',
      inFolder('fast.mp4'),
    ]);
    const whole = await readFile(inFolder('fast.mp4'));
    await writeFile(inFolder('half.mp4'), whole.subarray(0, Math.round(whole.length * 0.8)));
    const { recording, numbers } = await decoded('half.mp4');
    expect(recording.remarks).toEqual([
      `The container states 60 frames but only ${recording.ticks.length} can be read: the file is cut short.`,
    ]);
    expect(recording.ticks.length).toBeLessThan(60);
    // The last packet is cut, and with it goes what leans on it.
    expect(numbers.length).toBeGreaterThanOrEqual(recording.ticks.length - 3);
    expect(numbers.slice(0, 10)).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8, 9]);
  });

  test('frames of an avi overwritten: those are lost, the others keep their places', async () => {
    await writeNumberedVideo(inFolder('intra.avi'), tools, { frames: 40, output: ['-c:v', 'mjpeg', '-q:v', '2'] });
    const file = await readFile(inFolder('intra.avi'));
    // Every packet begins with its chunk's name and size; this goes to the one of frame 20.
    let at = file.indexOf('movi');
    for (let frame = 0; frame <= 20; frame++) at = file.indexOf('00dc', at + 4);
    const broken = [20, 21, 22];
    for (const _ of broken) {
      file.fill(0, at + 8, file.indexOf('00dc', at + 4));
      at = file.indexOf('00dc', at + 4);
    }
    await writeFile(inFolder('broken.avi'), file);
    const { numbers, account } = await decoded('broken.avi');
    expect(account).toEqual({
      ...{ claimed: 40, decoded: 37, lost: 3 },
      problem: '3 of 40 frames could not be decoded: the recording is damaged there.',
    });
    expect(numbers).toEqual(Array.from({ length: 40 }, (_, i) => i).filter((i) => !broken.includes(i)));
  });

  test.skipIf(encoder !== 'libx264')('pictures that change size: decoding ends there', async () => {
    const parts = ['192x112', '96x64'].map((name) => inFolder(`${name}.h264`));
    await writeNumberedVideo(parts[0]!, tools, { frames: 30, output: [...output, '-bf', '0'] });
    await writeNumberedVideo(parts[1]!, tools, {
      frames: 30,
      output: [...output, '-bf', '0'],
      filter: 'scale=384:224',
    });
    await appendFile(parts[0]!, await readFile(parts[1]!));
    await runFfmpeg(tools, ['-f', 'h264', '-framerate', '30', '-i', parts[0]!, '-c', 'copy', inFolder('sizes.mkv')]);
    const { numbers, account } = await decoded('sizes.mkv');
    expect(account.claimed).toBe(60);
    expect(account.problem).toMatch(
      /^Decoding ended at .* s, \d+ of 60 frames short: the size of the picture changes there\.$/,
    );
    // Not a single picture of the other size; a decoder may give up a frame or two early.
    expect(numbers.length).toBeLessThanOrEqual(30);
    expect(numbers.length).toBeGreaterThanOrEqual(25);
    expect(numbers).toEqual(Array.from({ length: numbers.length }, (_, i) => i));
  });

  test.skipIf(encoder !== 'libx264')('noise in the middle of H.264', async () => {
    const file = await readFile(inFolder('sound.mp4'));
    const start = file.indexOf('mdat');
    const length = file.readUInt32BE(start - 4);
    // A run of a fixed linear congruential generator over a tenth of the picture data.
    let random = 1;
    for (let at = start + Math.round(length * 0.4); at < start + length * 0.5; at++) {
      random = (random * 1103515245 + 12345) % 2147483648;
      file[at] = random >> 16;
    }
    await writeFile(inFolder('noise.mp4'), file);
    const { account, numbers } = await decoded('noise.mp4');
    expect(account.problem).not.toBeNull();
    expect(numbers.slice(-5)).toEqual([55, 56, 57, 58, 59]);
  });
});
