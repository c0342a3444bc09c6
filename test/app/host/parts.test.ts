import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { ContentCache } from '../../../app/host/content-cache.ts';
import { Downloads } from '../../../app/host/downloads.ts';
import { Jobs } from '../../../app/host/jobs.ts';
import { jpegSize } from '../../../app/host/jpeg-size.ts';
import { KnownRecordings } from '../../../app/host/known-recordings.ts';
import { LayoutFile } from '../../../app/host/layout-file.ts';
import { rateMeter } from '../../../app/host/rate-meter.ts';
import { RecentSessions } from '../../../app/host/recent-sessions.ts';
import { Tokens } from '../../../app/host/tokens.ts';
import { readPageFiles } from '../../../app/page/page-files.ts';
import { writeWhole } from '../../../src/session/write-session.ts';

const folders: string[] = [];
async function folder(): Promise<string> {
  const path = await mkdtemp(join(tmpdir(), 'needlebeat-parts-'));
  folders.push(path);
  return path;
}
afterEach(async () => {
  for (const path of folders.splice(0)) await rm(path, { recursive: true, force: true });
});

describe('tokens', () => {
  it('stand for one path and one use', () => {
    const tokens = new Tokens();
    const { token, name } = tokens.add('/videos/a.mp4', 'read');
    expect(name).toBe('a.mp4');
    expect(tokens.path(token, 'read')).toBe('/videos/a.mp4');
    expect(tokens.path(token, 'write')).toBeNull();
    expect(tokens.path('', 'read')).toBeNull();
    for (let i = 0; i < 2000; i++) tokens.add(`/x/${i}`, 'read');
    expect(tokens.path(token, 'read')).toBeNull();
  });
});

describe('downloads', () => {
  it('work once and not for ever', () => {
    let now_ms = 0;
    const downloads = new Downloads(() => now_ms);
    const thing = { name: 'a', type: 't', bytes: new Uint8Array(1) };
    const [first, second] = [downloads.offer(thing), downloads.offer(thing)];
    expect(downloads.take(first)).toMatchObject(thing);
    expect(downloads.take(first)).toBeNull();
    now_ms = 11 * 60_000;
    expect(downloads.take(second)).toBeNull();
  });
});

describe('the cache', () => {
  const isNumber = (value: unknown): value is { x: Float64Array } =>
    typeof value === 'object' && value !== null && 'x' in value;
  it('gives back what was put in, and nothing where the file is damaged or of another shape', async () => {
    const place = await folder();
    const cache = new ContentCache(place);
    const key = 'ab'.repeat(20);
    await cache.put(key, { x: new Float64Array([1, 2]) });
    expect(await cache.get(key, isNumber)).toEqual({ x: new Float64Array([1, 2]) });
    expect(await cache.get(key, (v): v is string => typeof v === 'string')).toBeNull();
    expect(await cache.get('cd'.repeat(20), isNumber)).toBeNull();
    await writeWhole(join(place, `${key}.bin`), 'rubbish');
    expect(await cache.get(key, isNumber)).toBeNull();
  });
  it('takes no key that could be a path', async () => {
    expect(await new ContentCache('/tmp').get('../../etc/passwd', isNumber)).toBeNull();
  });
});

describe('what is remembered between runs', () => {
  it('of recordings survives, and a damaged list counts as empty', async () => {
    const file = join(await folder(), 'recordings.json');
    const seen = { path: '/videos/a.mp4', content: 'c', bytes: 7 };
    await (await KnownRecordings.read(file)).remember('sha', { A: seen });
    const again = await KnownRecordings.read(file);
    expect([again.seen('sha', 'A'), again.seen('sha', 'B'), again.seen('sha', 'constructor')]).toEqual([
      seen,
      null,
      null,
    ]);
    await writeWhole(file, '{"format":');
    expect((await KnownRecordings.read(file)).seen('sha', 'A')).toBeNull();
  });

  it('of sessions names those that are still there, newest first, and no path', async () => {
    const place = await folder();
    const recent = await RecentSessions.read(join(place, 'recent.json'));
    for (const name of ['a', 'b', 'a', 'gone']) {
      const path = join(place, `${name}.needlebeat.json`);
      if (name !== 'gone') await writeWhole(path, '{}');
      await recent.add(path, `Title ${name}`, '2026-05-04T03:02:01Z');
    }
    const list = await (await RecentSessions.read(join(place, 'recent.json'))).list();
    expect(list.map((s) => s.name)).toEqual(['a.needlebeat.json', 'b.needlebeat.json']);
    expect(JSON.stringify(list)).not.toContain(place);
    expect(recent.path(list[1]?.id ?? '')).toBe(join(place, 'b.needlebeat.json'));
    expect(recent.path('made up')).toBeNull();
  });
});

describe('the layout', () => {
  const shares = { view: 0.3, segment: 0.4, field: 0.5, apparatus: 0.3 };

  it('is what was kept last, and none where the file is missing or damaged', async () => {
    const path = join(await folder(), 'layout.json');
    const file = new LayoutFile(path);
    expect(await file.read()).toBeNull();
    const boards = [0.2, 0.3, 0.4];
    await Promise.all(boards.map((board) => file.keep({ sheets: shares, board, sheet: 'field' })));
    expect(await new LayoutFile(path).read()).toEqual({ sheets: shares, board: 0.4, sheet: 'field' });
    await writeWhole(path, '{"format":"needlebeat/layout","version":1,"layout":{"board":7}}');
    expect(await file.read()).toBeNull();
  });
});

describe('jobs', () => {
  it('end once, also when cancelled or when their window goes', async () => {
    const reports: unknown[] = [];
    const jobs = new Jobs((error) => reports.push(error));
    const ends: unknown[] = [];
    const forever = (_job: string, signal: AbortSignal) =>
      new Promise<void>((_, reject) => signal.addEventListener('abort', () => reject(signal.reason)));
    const ended = (job: string, error: unknown) => ends.push([job, error && (error as { reason: string }).reason]);
    const window = new AbortController();
    const one = jobs.start('follow', 'v1', null, forever, ended);
    const two = jobs.start('play', null, window.signal, forever, ended);
    const three = jobs.start('play', null, null, async () => undefined, ended);
    const four = jobs.start('play', null, null, async () => Promise.reject(new Error('bug')), ended);
    expect(jobs.list().map((j) => j.job)).toEqual([one, two, three, four]);
    await new Promise((resolve) => setTimeout(resolve, 20));
    window.abort();
    jobs.cancel(one);
    await expect.poll(() => jobs.list()).toEqual([]);
    expect(ends).toEqual([
      [three, null],
      [four, 'internal'],
      [two, 'cancelled'],
      [one, 'cancelled'],
    ]);
    expect(reports).toHaveLength(1);
  });
});

it('progress says how fast and how long still', () => {
  let now_ms = 0;
  const meter = rateMeter('j', 100, () => now_ms);
  expect(meter(0, 0)).toMatchObject({ rate: null, frameRate_Hz: null, remaining_s: null });
  now_ms = 5000;
  expect(meter(25, 750)).toEqual({ job: 'j', done_s: 25, total_s: 100, rate: 5, frameRate_Hz: 150, remaining_s: 15 });
});

it('the size of a JPEG is read from its frame header', () => {
  // Start, an application segment of 4 bytes, then SOF0: length 11, 8 bits, height 0x0102, width 0x0304.
  const jpeg = [0xff, 0xd8, 0xff, 0xe0, 0, 4, 1, 2, 0xff, 0xc0, 0, 11, 8, 1, 2, 3, 4, 1, 1, 0x11, 0];
  expect(jpegSize(Uint8Array.from(jpeg))).toEqual({ width_px: 0x0304, height_px: 0x0102 });
  expect(jpegSize(Uint8Array.from(jpeg.slice(0, 9)))).toBeNull();
});

it('the page’s table holds the built files and no source map', async () => {
  const place = await folder();
  await expect(readPageFiles(place)).rejects.toThrow(/npm run build/);
  for (const name of ['index.html', 'assets/a-1.js', 'assets/a-1.js.map', '.secret'])
    await writeWhole(join(place, name), name);
  const files = await readPageFiles(place);
  expect([...files.keys()].sort()).toEqual(['/', '/assets/a-1.js', '/index.html']);
  expect(files.get('/assets/a-1.js')?.type).toBe('text/javascript; charset=utf-8');
});
