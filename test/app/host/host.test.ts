import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { copyFile, mkdir, mkdtemp, readdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { connectHost, type HostClient } from '../../../app/contract/client.ts';
import type { DocumentState, HostEvents, ResultsState, Session } from '../../../app/contract.ts';
import { directTransport } from '../../../app/host/direct-transport.ts';
import { type Host, startHost } from '../../../app/host/host.ts';
import type { Shell } from '../../../app/host/shell.ts';
import { measureSession } from '../../../src/measure.ts';
import { resultsText } from '../../../src/report/results-json.ts';
import { readSession } from '../../../src/session/read-session.ts';

const root = new URL('../../../', import.meta.url).pathname;
const sample = join(root, 'samples/boathouse');
const demo = join(sample, 'boathouse.needlebeat.json');
const ready = existsSync(demo) && existsSync(join(root, 'dist/app/host/calculator-worker.js'));
if (!ready) console.log('The host is not tested here: the sample or the build is missing ("npm run build").');

let home: string;
let host: Host;
let client: HostClient;
let reports: unknown[];

beforeEach(async () => {
  home = await mkdtemp(join(tmpdir(), 'needlebeat-host-'));
  reports = [];
});
afterEach(async () => {
  await host?.close();
  await rm(home, { recursive: true, force: true });
  expect(reports).toEqual([]);
  expect(children()).toEqual([]);
});

/** Command names of the processes that this one has started and that still run. */
function children(): string[] {
  if (process.platform !== 'linux') return [];
  const pids = readdirSync('/proc/self/task').flatMap((task) =>
    readFileSync(`/proc/self/task/${task}/children`, 'utf8').split(' ').filter(Boolean),
  );
  const names = pids.flatMap((pid) =>
    existsSync(`/proc/${pid}/comm`) ? readFileSync(`/proc/${pid}/comm`, 'utf8').trim() : [],
  );
  return names.filter((name) => name.startsWith('ff'));
}

async function start(shell: Shell | null = null, file: string | null = null): Promise<void> {
  const options = {
    userFolder: join(home, 'user'),
    env: process.env,
    cores: 2,
    shell,
    browser: shell === null,
    demo,
    runtime: [],
    report: (error: unknown) => reports.push(error),
  };
  host = await startHost(options, file);
  const ends = directTransport();
  host.connect(ends.host);
  client = connectHost(ends.window);
}

function next<K extends keyof HostEvents>(name: K, wanted: (value: HostEvents[K]) => boolean): Promise<HostEvents[K]> {
  return new Promise((resolve) => {
    const off = client.on(name, (value) => {
      if (!wanted(value)) return;
      off();
      resolve(value);
    });
  });
}

const allReady = (d: DocumentState) => d.recordings.length > 0 && d.recordings.every((r) => r.state === 'ready');
const settled = (r: ResultsState) => r.pending.length === 0 && (r.results?.segments.length ?? 0) > 0;

/** Opens the demo and leaves one short segment in it. */
async function openOneSegment(): Promise<Session> {
  const opened = next('document', allReady);
  await client.call('openDemo', {});
  const { session, revision } = await opened;
  const [first] = session?.segments ?? [];
  const segments = first ? [{ ...first, end_s: first.start_s + 9 }] : [];
  const one = { ...(session as Session), segments };
  await client.call('edit', { session: one, base: revision, label: 'One segment' });
  return one;
}

describe.skipIf(!ready)('the host', () => {
  it('opens the demo and shows it without a path anywhere', async () => {
    await start();
    const opened = next('document', allReady);
    await client.call('openDemo', {});
    const document = await opened;
    expect(document.recordings[0]?.facts).toMatchObject({ width_px: 1280, height_px: 720, rate_varies: true });
    expect(JSON.stringify(document)).not.toContain(root);
    expect([document.dirty, document.fileName]).toEqual([false, null]);

    const { time_s } = await client.call('frameTimes', { recording: 'A' });
    expect(time_s).toHaveLength(document.recordings[0]?.facts?.frames ?? -1);
    expect(time_s[0]).toBe(0);
    const picture = await client.call('picture', { recording: 'A', frame: 100, maxWidth_px: 320 });
    expect([picture.width_px, picture.height_px, picture.time_s]).toEqual([320, 180, time_s[100]]);
    expect([...picture.jpeg.slice(0, 2)]).toEqual([0xff, 0xd8]);
    const crop = { x: 1200, y: 600, width: 500, height: 500 };
    const lens = await client.call('picture', { recording: 'A', frame: 0, maxWidth_px: 640, crop });
    expect([lens.width_px, lens.height_px]).toEqual([80, 120]);
    const beyond = client.call('picture', { recording: 'A', frame: 1e6, maxWidth_px: 320 });
    await expect(beyond).rejects.toMatchObject({ reason: 'bad_input', message: expect.stringContaining('no frame') });
  });

  it('says what is wrong with a file, by its name alone', async () => {
    await start();
    const cases: [string, string, RegExp][] = [
      ['empty.mp4', '', /"empty\.mp4" is empty/],
      ['text.mp4', 'not a film at all', /"text\.mp4" is not a video recording/],
      ['cut.needlebeat.json', '{"format": "needle', /^cut\.needlebeat\.json: this is not valid JSON/],
      [
        'odd.needlebeat.json',
        '{"format": "needlebeat/session", "version": 2}',
        /^odd\.needlebeat\.json: version must be 1/,
      ],
    ];
    for (const [name, text, sentence] of cases) {
      const path = join(home, name);
      await writeFile(path, text);
      const { token } = host.addToken(path, 'read');
      const failure = (await client.call('openFile', { token }).catch((error: unknown) => error)) as Error;
      expect(failure).toMatchObject({ reason: 'bad_input', message: expect.stringMatching(sentence) });
      expect(failure.message).not.toContain(home);
    }
    expect((await client.call('getDocument', {})).session).toBeNull();
    await expect(client.call('openFile', { token: 'made-up' })).rejects.toMatchObject({ reason: 'bad_argument' });
    const place = host.addToken(join(home, 'empty.mp4'), 'write');
    await expect(client.call('openFile', { token: place.token })).rejects.toMatchObject({ reason: 'bad_argument' });
  });

  it('edits, refuses edits on an older state or outside the picture, and undoes', async () => {
    await start();
    const session = await openOneSegment();
    const { revision } = await client.call('getDocument', {});
    await expect(client.call('edit', { session, base: revision - 1, label: 'x' })).rejects.toMatchObject({
      reason: 'stale_revision',
    });
    const [view] = session.views;
    const outside = { ...session, views: [{ ...view!, region: { x: 1000, y: 0, width: 400, height: 400 } }] };
    await expect(
      client.call('edit', { session: outside as Session, base: revision, label: 'x' }),
    ).rejects.toMatchObject({
      reason: 'bad_input',
      message: expect.stringContaining('outside the picture'),
    });
    expect(await client.call('getDocument', {})).toMatchObject({ dirty: true, undoLabel: 'One segment' });
    await client.call('undo', {});
    expect(await client.call('getDocument', {})).toMatchObject({
      dirty: false,
      canUndo: false,
      redoLabel: 'One segment',
    });
  });

  it('measures in the background exactly what the command line measures', async () => {
    await start();
    const done = next('results', settled);
    await openOneSegment();
    const { results } = await done;
    expect(results?.segments.map((s) => s.status)).toEqual(['measured']);

    const saved = await client.call('exportItem', { item: { kind: 'session' } });
    const exported = await client.call('exportItem', { item: { kind: 'results.json' } });
    const text = (s: typeof saved) =>
      Buffer.from(host.downloads?.take(s.saved === 'download' ? s.address : '')?.bytes ?? []);
    const folder = join(home, 'elsewhere');
    await mkdir(folder);
    await copyFile(join(sample, 'boathouse.mp4'), join(folder, 'boathouse.mp4'));
    await writeFile(join(folder, 's.needlebeat.json'), text(saved));
    const { results: again } = await measureSession(await readSession(join(folder, 's.needlebeat.json')), { cores: 1 });
    const [ours, theirs] = [JSON.parse(text(exported).toString()), JSON.parse(resultsText(again))];
    expect(ours.segments).toEqual(theirs.segments);
    expect(ours.reduction).toEqual(theirs.reduction);
    expect(ours.recordings).toEqual(theirs.recordings);

    const curves = await client.call('segmentCurves', { segment: results?.segments[0]?.id ?? '' });
    expect(curves?.fitted).toHaveLength(curves?.time_s.length ?? -1);
    const used = curves?.used.reduce((sum, u) => sum + u, 0);
    expect(used).toBe(results?.segments[0]?.frames_used);
  });

  it('follows a stretch as it goes, fits parts of it at once, and keeps it', async () => {
    await start();
    const session = await openOneSegment();
    const [segment] = session.segments;
    const [start_s, end_s] = [segment?.start_s ?? 0, segment?.end_s ?? 0];
    const rows = new Map<number, number>();
    const totals: number[] = [];
    client.on('poses', ({ from_s, to_s, trace }) => {
      for (const t of rows.keys()) if (t >= from_s && t <= to_s) rows.delete(t);
      for (const [i, t] of trace.time_s.entries()) rows.set(t, trace.angle[i] ?? 0);
      totals.push(rows.size);
    });
    const { job } = await client.call('follow', { view: 'v1', start_s, end_s });
    await expect(client.call('follow', { view: 'v1' })).rejects.toMatchObject({ reason: 'bad_input' });
    expect(await next('jobEnded', (end) => end.job === job)).toEqual({ job, error: null });
    expect(totals.length).toBeGreaterThan(3);
    const overview = await client.call('overview', { view: 'v1' });
    expect(overview?.covered).toEqual([[start_s, end_s]]);
    expect([...rows.keys()].sort((a, b) => a - b)).toEqual([...(overview?.time_s ?? [])]);

    const fit = await client.call('previewFit', { view: 'v1', start_s, end_s, lane: 'edge' });
    const truth = JSON.parse(await readFile(join(sample, 'boathouse.truth.json'), 'utf8')) as {
      segments: { id: string; f0_Hz: number }[];
    };
    const f0_Hz = truth.segments.find((s) => s.id === segment?.id)?.f0_Hz ?? 0;
    if (!fit.ok) throw new Error(JSON.stringify(fit.checks));
    expect(Math.abs(fit.f0_Hz.value - f0_Hz)).toBeLessThan(Math.max(5 * fit.f0_Hz.u, 2e-3 * f0_Hz));
    expect(fit.curves.angle).toHaveLength(fit.curves.time_s.length);
    const dragged = Array.from({ length: 6 }, (_, i) =>
      client.call('previewFit', { view: 'v1', start_s, end_s: end_s - i / 10, lane: 'edge' }).then(
        () => 'done',
        (error: unknown) => (error as { reason: string }).reason,
      ),
    );
    const ends = await Promise.all(dragged);
    expect(ends.at(-1)).toBe('done');
    expect(ends.filter((end) => end === 'cancelled').length).toBeGreaterThan(0);
    const before = await client.call('previewFit', { view: 'v1', start_s: 100, end_s: 110, lane: 'edge' });
    expect(before).toMatchObject({ ok: false, checks: [{ code: 'not_followed' }] });

    const found = await client.call('findBar', {
      recording: 'A',
      frame: 200,
      view: { kind: 'plan', region: session.views[0]?.region ?? { x: 0, y: 0, width: 9, height: 9 } },
    });
    expect(found).toMatchObject({ found: true, unit: 'deg' });
  });

  it('stops following at once, leaves no process, and keeps what was finished', async () => {
    await start();
    await openOneSegment();
    const { job } = await client.call('follow', { view: 'v1' });
    await next('progress', (p) => p.job === job && p.done_s > 0.5);
    expect(children().length).toBeGreaterThan(0);
    const ended = next('jobEnded', (end) => end.job === job);
    await client.call('cancel', { job });
    expect((await ended).error).toMatchObject({ reason: 'cancelled' });
    expect(await client.call('jobs', {})).toEqual([]);
    await client.call('cancel', { job });
  });

  it('plays no faster than the window shows, and makes a film strip', async () => {
    await start();
    const opened = next('document', allReady);
    await client.call('openDemo', {});
    await opened;
    const shown: number[] = [];
    client.on('playFrame', ({ picture }) => shown.push(picture.index));
    const { job } = await client.call('play', { recording: 'A', start_s: 2, end_s: 3, maxWidth_px: 160 });
    await expect.poll(() => shown.length, { timeout: 20_000 }).toBe(8);
    await new Promise((resolve) => setTimeout(resolve, 150));
    expect(shown).toHaveLength(8);
    const over = next('jobEnded', (end) => end.job === job);
    client.on('playFrame', ({ picture }) => void client.call('playAck', { job, index: picture.index }));
    await client.call('playAck', { job, index: shown.at(-1) ?? 0 });
    expect((await over).error).toBeNull();
    expect(shown).toEqual(Array.from({ length: shown.length }, (_, i) => (shown[0] ?? 0) + i));
    expect(shown.length).toBeGreaterThan(20);

    const strip: number[] = [];
    client.on('filmStripPicture', ({ position, picture }) => {
      expect(picture.width_px).toBeLessThanOrEqual(96);
      strip.push(position);
    });
    const made = await client.call('filmStrip', { recording: 'A', start_s: 0, end_s: 20, count: 10, maxWidth_px: 96 });
    expect((await next('jobEnded', (end) => end.job === made.job)).error).toBeNull();
    expect(strip).toEqual(Array.from({ length: 10 }, (_, i) => i));
  });

  it('saves where it is told, and finds a recording that was renamed or moved by its content', async () => {
    const bench = join(home, 'bench');
    await mkdir(bench);
    await copyFile(join(sample, 'boathouse.mp4'), join(bench, 'evening.mp4'));
    await start(null, join(bench, 'evening.mp4'));
    const file = join(bench, 'run.needlebeat.json');
    const place = host.addToken(file, 'write');
    expect(await client.call('save', { token: place.token })).toEqual({ saved: 'file', name: 'run.needlebeat.json' });
    expect(JSON.parse(await readFile(file, 'utf8')).recordings).toEqual([{ id: 'A', file: 'evening.mp4' }]);
    const document = await client.call('getDocument', {});
    expect([document.dirty, document.fileName]).toEqual([false, 'run.needlebeat.json']);
    expect(await client.call('recentSessions', {})).toMatchObject([{ name: 'run.needlebeat.json', title: 'evening' }]);
    await host.close();

    await rename(join(bench, 'evening.mp4'), join(bench, 'renamed.mp4'));
    await start(null, file);
    // Whether it is opened before or after this window came is left open.
    await expect.poll(async () => allReady(await client.call('getDocument', {}))).toBe(true);
    expect((await client.call('getDocument', {})).recordings[0]?.name).toBe('renamed.mp4');
    await host.close();

    const away = join(home, 'away');
    await mkdir(away);
    await rename(join(bench, 'renamed.mp4'), join(away, 'x.mp4'));
    await writeFile(join(away, 'y.mp4'), Buffer.concat([await readFile(join(away, 'x.mp4')), Buffer.alloc(8)]));
    await start(null, file);
    await expect.poll(async () => (await client.call('getDocument', {})).recordings[0]?.state).toBe('missing');
    const locate = (name: string) =>
      client.call('locateRecording', { recording: 'A', token: host.addToken(join(away, name), 'read').token });
    expect(await locate('y.mp4')).toEqual({ recognised: 'different' });
    expect((await client.call('getDocument', {})).recordings[0]?.state).toBe('missing');
    expect(await locate('x.mp4')).toEqual({ recognised: 'same' });
    const found = await client.call('getDocument', {});
    expect([found.recordings[0]?.state, found.dirty]).toEqual(['ready', true]);
    await client.call('save', {});
    expect(JSON.parse(await readFile(file, 'utf8')).recordings[0].file).toBe('../away/x.mp4');

    await writeFile(file, `${await readFile(file, 'utf8')}\n`);
    await expect(client.call('save', {})).rejects.toMatchObject({
      message: expect.stringContaining('another program'),
    });
  });

  it('works through a shell’s dialogs, and the window gets tokens', async () => {
    const menus: unknown[] = [];
    const facts: { dirty: boolean }[] = [];
    const out = join(home, 'out');
    await start({
      chooseFile: async () => join(sample, 'boathouse.needlebeat.json'),
      choosePlace: async (name) => join(home, name),
      printPdf: async () => new Uint8Array(),
      chooseFolder: async () => out,
      menuState: (menu) => menus.push(menu),
      documentChanged: (next) => facts.push(next),
    });
    expect(await client.call('hello', { contract: 1 })).toMatchObject({ dialogs: true, uploads: false });
    const file = await client.call('chooseFile', { purpose: 'open' });
    expect(file).toEqual({ token: expect.any(String), name: 'boathouse.needlebeat.json' });
    const opened = next('document', allReady);
    await client.call('openFile', { token: file?.token ?? '' });
    await opened;
    expect(facts.at(-1)).toMatchObject({ dirty: false, hasPlace: true });
    const bytes = new Uint8Array([1, 2, 3]);
    expect(await client.call('saveBytes', { name: 'plot.png', bytes })).toEqual({
      saved: 'needs_place',
      suggestedName: 'plot.png',
    });
    // Asked before it is printed.
    expect(await client.call('exportItem', { item: { kind: 'report.pdf' } })).toEqual({
      saved: 'needs_place',
      suggestedName: 'report.pdf',
    });
    const place = await client.call('choosePlace', { suggestedName: 'plot.png' });
    expect(await client.call('saveBytes', { name: 'plot.png', bytes, token: place?.token })).toEqual({
      saved: 'file',
      name: 'plot.png',
    });
    expect([...(await readFile(join(home, 'plot.png')))]).toEqual([1, 2, 3]);
    await client.call('closeDocument', {});
    expect((await client.call('getDocument', {})).session).toBeNull();
    expect(await readdir(join(home, 'user', 'work', (await readdir(join(home, 'user', 'work')))[0] ?? ''))).toEqual([
      'run.json',
    ]);
  });
});
