import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdir, mkdtemp, readdir, rm, utimes, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { SessionDocument } from '../../../app/host/session-document.ts';
import { claim, leftBehind, WorkingCopy } from '../../../app/host/working-copy.ts';

const built = (file: string) => new URL(`../../../dist/app/host/${file}`, import.meta.url);
const isBuilt = existsSync(built('working-copy.js'));
if (!isBuilt) console.log('Killing a process while it saves is not tested here: run "npm run build" first.');

const session = (title: string) => ({
  format: 'needlebeat/session' as const,
  version: 1 as const,
  title,
  recordings: [{ id: 'A', file: 'a.mp4' }],
  views: [],
  segments: [],
});
const documentOf = (title: string) =>
  new SessionDocument({ session: session(title), paths: new Map([['A', '/videos/a.mp4']]), place: null });

let work: string;
let child: ChildProcess | null;
beforeEach(async () => {
  work = await mkdtemp(join(tmpdir(), 'needlebeat-work-'));
  child = null;
});
afterEach(async () => {
  child?.kill('SIGKILL');
  await rm(work, { recursive: true });
});

/** A process that edits and saves without pause, each title longer than the last; prints the number of each save when it is safe. */
const EDITOR = `
  const { SessionDocument } = await import(process.argv[1]);
  const { WorkingCopy } = await import(process.argv[2]);
  const copy = await WorkingCopy.begin(process.argv[3]);
  const base = JSON.parse(process.argv[4]);
  const document = new SessionDocument({ session: base, paths: new Map([['A', '/videos/a.mp4']]), place: null });
  for (let n = 1; ; n++) {
    document.edit({ ...base, title: n + ' ' + 'x'.repeat((n * 997) % 9000) }, 'Title', null);
    await copy.save(document);
    process.stdout.write(n + '\\n');
  }`;

function startEditor(): { process: ChildProcess; saved: () => number } {
  const urls = [built('session-document.js').href, built('working-copy.js').href];
  const args = ['--input-type=module', '-e', EDITOR, ...urls, work, JSON.stringify(session('start'))];
  const editor = spawn(process.execPath, args, { stdio: ['ignore', 'pipe', 'inherit'] });
  child = editor;
  let text = '';
  editor.stdout?.on('data', (chunk) => {
    text += String(chunk);
  });
  return { process: editor, saved: () => Number(text.trimEnd().split('\n').at(-1) || 0) };
}

describe('the working copy', () => {
  it.skipIf(!isBuilt)('is whole after kill -9 at any moment and holds every edit that was answered', async () => {
    for (const [round, saves] of [1, 2, 5, 9].entries()) {
      const editor = startEditor();
      await expect.poll(editor.saved, { timeout: 30_000, interval: 3 }).toBeGreaterThanOrEqual(saves);
      await new Promise((resolve) => setTimeout(resolve, [0, 1, 4, 7][round]));
      const gone = new Promise((resolve) => editor.process.once('exit', resolve));
      editor.process.kill('SIGKILL');
      await gone;
      const answered = editor.saved();
      const [left, ...others] = await leftBehind(work);
      expect(others).toEqual([]);
      expect(left?.start.restored).toBe(true);
      const number = Number(left?.start.session.title?.split(' ')[0]);
      expect(number).toBeGreaterThanOrEqual(answered);
      expect(left?.start.session.title).toHaveLength(`${number} `.length + ((number * 997) % 9000));
      expect(left?.start.paths).toEqual(new Map([['A', '/videos/a.mp4']]));
      const release = left && (await claim(work, left.id));
      await release?.();
      expect(await readdir(work)).toEqual([]);
    }
  });

  it.skipIf(!isBuilt)('of a run that goes on is left alone', async () => {
    const editor = startEditor();
    await expect.poll(editor.saved, { timeout: 30_000 }).toBeGreaterThan(0);
    expect(await leftBehind(work)).toEqual([]);
  });

  it('brings back session, file and what was saved', async () => {
    const copy = await WorkingCopy.begin(work);
    const place = { path: '/b/s.json', sha256: 'abc', asWritten: new Map([['A', '../videos/a.mp4']]) };
    const document = new SessionDocument({ session: session('old'), paths: new Map([['A', '/videos/a.mp4']]), place });
    document.edit(session('new'), 'Title', null);
    await copy.save(document);
    await copy.end(true);
    const [left] = await leftBehind(work);
    const again = new SessionDocument(left!.start);
    expect([again.session.title, again.dirty, again.place, again.restored]).toEqual(['new', true, place, true]);
    expect(again.saved.title).toBe('old');
  });

  it('goes with a run that ends properly', async () => {
    const copy = await WorkingCopy.begin(work);
    await copy.save(documentOf('x'));
    await copy.end(false);
    expect(await readdir(work)).toEqual([]);
  });

  it('is taken over by one run alone', async () => {
    const copy = await WorkingCopy.begin(work);
    await copy.save(documentOf('x'));
    await copy.end(true);
    const [left] = await leftBehind(work);
    const claims = await Promise.all([claim(work, left!.id), claim(work, left!.id)]);
    expect(claims.filter((release) => release !== null)).toHaveLength(1);
    // Until it is saved elsewhere the copy stays on disk, as this run's.
    expect(await leftBehind(work)).toEqual([]);
    expect(await readdir(work)).toHaveLength(1);
  });

  it('that is damaged or strange is passed over, not thrown away', async () => {
    for (const [name, text] of [
      ['a', '{"format":'],
      ['b', '{}'],
      ['c', '{"format":"needlebeat/working-copy","version":2}'],
    ]) {
      await mkdir(join(work, name!));
      await writeFile(join(work, name!, 'copy.json'), text!);
    }
    expect(await leftBehind(work)).toEqual([]);
    expect((await readdir(work)).sort()).toEqual(['a', 'b', 'c']);
  });

  it('of a run whose number another program has now is found once it has been silent', async () => {
    const copy = await WorkingCopy.begin(work);
    await copy.save(documentOf('x'));
    const [id] = await readdir(work);
    expect(await leftBehind(work)).toEqual([]);
    const long = new Date(Date.now() - 60_000);
    await utimes(join(work, id!, 'run.json'), long, long);
    expect(await leftBehind(work)).toHaveLength(1);
    await copy.end(false);
  });

  it('writes what was wanted last when changes come fast', async () => {
    const copy = await WorkingCopy.begin(work);
    const document = documentOf('0');
    const saves = Array.from({ length: 50 }, (_, n) => {
      document.edit(session(String(n + 1)), 'Title', 'title');
      return copy.save(document);
    });
    await Promise.all(saves);
    await copy.end(true);
    expect((await leftBehind(work))[0]?.start.session.title).toBe('50');
  });
});
