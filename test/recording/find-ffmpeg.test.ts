import { chmod, mkdir, mkdtemp, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { basename, dirname, join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import {
  installedFfmpegPath,
  installedFfprobePath,
  madeExecutable,
  outsideArchive,
} from '../../src/recording/bundled-binaries.ts';
import { isNewer, parseFfmpegVersion, passthroughOption } from '../../src/recording/ffmpeg-version.ts';
import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-find-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const printed = (version: string, years: string, libavcodec: string) =>
  `ffmpeg version ${version} Copyright (c) ${years} the FFmpeg developers\nbuilt with gcc\nlibavutil      1.  2.100 /  1.  2.100\nlibavcodec     ${libavcodec} / ${libavcodec}\n`;
const development2018 = printed('N-47683-g0e8eb07980-static', '2000-2018', '58. 42.100');
const development2023 = printed('N-66595-gc2b38619c0-static', '2007-2023', '60. 22.100');
const distribution = printed('5.1.9-0+deb12u1', '2000-2026', '59. 37.100');
const future = printed('n8.0', '2000-2025', '62. 11.100');

describe('what a build says of itself', () => {
  test('releases and development builds', () => {
    expect(parseFfmpegVersion(distribution)).toEqual({
      ...{ text: '5.1.9-0+deb12u1', major: 5, libavcodec: [59, 37], year: 2026 },
    });
    expect(parseFfmpegVersion(development2018)).toEqual({
      ...{ text: 'N-47683-g0e8eb07980-static', major: null, libavcodec: [58, 42], year: 2018 },
    });
    expect(parseFfmpegVersion(future)?.major).toBe(8);
    expect(parseFfmpegVersion('GNU bash, version 5.2.15\n')).toBeNull();
  });

  test('which is newer: the code counts, not the year of a rebuild', () => {
    const [a, b, c] = [development2018, distribution, development2023].map((text) => parseFfmpegVersion(text)!);
    expect([isNewer(b!, a!), isNewer(c!, b!), isNewer(a!, b!), isNewer(a!, a!)]).toEqual([true, true, false, false]);
  });

  test('how frames are handed on as they are', () => {
    const option = (text: string) => passthroughOption(parseFfmpegVersion(text)!)[0];
    expect(option(development2018)).toBe('-vsync');
    expect(option(printed('5.0', '2000-2022', '59. 18.100'))).toBe('-vsync');
    expect(option(distribution)).toBe('-fps_mode');
    expect(option(future)).toBe('-fps_mode');
  });
});

describe.skipIf(process.platform === 'win32')('where it is looked for', () => {
  async function program(name: string, output: string): Promise<string> {
    const path = join(folder, name);
    await mkdir(dirname(path), { recursive: true });
    const label = output.replace('ffmpeg version', `${basename(name)} version`);
    await writeFile(path, `#!/bin/sh\n/bin/cat <<'END'\n${label}END\n`);
    await chmod(path, 0o755);
    return path;
  }

  test('the variables come first', async () => {
    const FFMPEG_PATH = await program('named/ffmpeg', development2018);
    const FFPROBE_PATH = await program('apart/ffprobe', development2018);
    expect(await findFfmpeg({ FFMPEG_PATH, FFPROBE_PATH, PATH: '' })).toMatchObject({
      ...{ source: 'FFMPEG_PATH', ffmpeg: FFMPEG_PATH, ffprobe: FFPROBE_PATH },
    });
  });

  test('ffprobe: the one beside ffmpeg', async () => {
    const FFMPEG_PATH = await program('pair/ffmpeg', development2018);
    const ffprobe = await program('pair/ffprobe', development2018);
    expect((await findFfmpeg({ FFMPEG_PATH, PATH: '' })).ffprobe).toBe(ffprobe);
  });

  test('a variable that names something else is an error that names it', async () => {
    const wrong = await program('wrong/ffmpeg', 'something else\n');
    for (const FFMPEG_PATH of [wrong, join(folder, 'missing'), 'relative/ffmpeg']) {
      await expect(findFfmpeg({ FFMPEG_PATH, PATH: '' })).rejects.toThrow(
        `FFMPEG_PATH is "${FFMPEG_PATH}", but the absolute path of a working ffmpeg was expected there.`,
      );
    }
    await expect(findFfmpeg({ FFPROBE_PATH: wrong, PATH: '' })).rejects.toThrow(/^FFPROBE_PATH is /);
  });

  test('between PATH and the bundled one the newer is taken; the answer is kept', async () => {
    const bundled = await installedFfmpegPath(process.env);
    const newer = await program('newer/ffmpeg', future);
    await program('older/ffmpeg', printed('2.8', '2000-2015', '56. 60.100'));
    const withNewer = findFfmpeg({ PATH: join(folder, 'newer') });
    expect(findFfmpeg({ PATH: join(folder, 'newer') })).toBe(withNewer);
    const { source, ffmpeg } = await withNewer;
    // An ffmpeg-static that has its binary comes before both.
    if (source === 'ffmpeg-static') return;
    expect({ source, ffmpeg }).toEqual({ source: 'PATH', ffmpeg: newer });
    expect(await findFfmpeg({ PATH: join(folder, 'older') })).toMatchObject({ source: 'bundled', ffmpeg: bundled });
  });
});

test('a program in an Electron archive is looked for beside it', () => {
  const inside = '/opt/Needlebeat/resources/app.asar/node_modules/x/ffmpeg';
  const beside = '/opt/Needlebeat/resources/app.asar.unpacked/node_modules/x/ffmpeg';
  expect([inside, beside].map(outsideArchive)).toEqual([beside, beside]);
  expect(outsideArchive('C:\\Needlebeat\\app.asar\\x\\ffmpeg.exe')).toBe(
    'C:\\Needlebeat\\app.asar.unpacked\\x\\ffmpeg.exe',
  );
});

describe.skipIf(process.platform === 'win32')('the packed ffprobe', () => {
  test('is given the right to run where it lacks it', async () => {
    const path = join(folder, 'ffprobe-without');
    await writeFile(path, '#!/bin/sh\n');
    await chmod(path, 0o644);
    expect(await madeExecutable(path, { HOME: folder })).toBe(path);
    expect((await stat(path)).mode & 0o111).toBe(0o111);
  });

  test('is found and runs', async () => {
    const path = await installedFfprobePath({ HOME: folder });
    const tools = await findFfmpeg({
      FFMPEG_PATH: (await installedFfmpegPath({ HOME: folder }))!,
      PATH: '',
      HOME: folder,
    });
    expect(tools.ffprobe).toBe(path);
    expect(tools.ffprobeVersion.libavcodec[0]).toBeGreaterThan(57);
  });
});
