import { type ChildProcess, spawn } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { findBrowser } from '../src/report/pdf/find-browser.ts';
import type { Session } from '../src/session/session.ts';

const CLI = resolve('dist/src/cli.js');
const SAMPLE = resolve('samples/boathouse');

interface Ended {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

function start(args: readonly string[], env = process.env): { child: ChildProcess; ended: Promise<Ended> } {
  const child = spawn(process.execPath, [CLI, ...args], { stdio: ['ignore', 'pipe', 'pipe'], env });
  let stdout = '';
  let stderr = '';
  child.stdout.setEncoding('utf8').on('data', (text) => {
    stdout += text;
  });
  child.stderr.setEncoding('utf8').on('data', (text) => {
    stderr += text;
  });
  const ended = new Promise<Ended>((done) => child.on('close', (status) => done({ status, stdout, stderr })));
  return { child, ended };
}

const needlebeat = (...args: string[]) => start(args).ended;

let dir: string;
let sample: Session;

beforeAll(() => {
  dir = mkdtempSync(join(tmpdir(), 'needlebeat-cli-'));
  cpSync(join(SAMPLE, 'boathouse.mp4'), join(dir, 'boathouse.mp4'));
  sample = JSON.parse(readFileSync(join(SAMPLE, 'boathouse.needlebeat.json'), 'utf8'));
});
afterAll(() => rmSync(dir, { recursive: true, force: true }));

/** Writes a session made from the sample's and returns its path. */
function session(name: string, change: (s: Session) => unknown): string {
  const changed = structuredClone(sample);
  change(changed);
  const path = join(dir, `${name}.needlebeat.json`);
  writeFileSync(path, JSON.stringify(changed));
  return path;
}

const onlyFirst = (s: Session) => {
  s.segments = s.segments.slice(0, 1);
};
const firstView = (s: Session) => s.views[0] as Session['views'][number];
const firstSegment = (s: Session) => s.segments[0] as Session['segments'][number];
const firstRecording = (s: Session) => s.recordings[0] as Session['recordings'][number];

describe('needlebeat measure', () => {
  it('measures a segment of the sample, writes the files of the contract and prints the table', async () => {
    const path = session('one', onlyFirst);
    const out = join(dir, 'out-one');
    const { status, stdout, stderr } = await needlebeat('measure', path, '--out', out, '--traces');
    expect(stderr).toMatch(/100 % followed, 1 of 1 segments done/);
    expect(status).toBe(0);
    const id = firstSegment(sample).id;
    expect(readdirSync(out)).toEqual(expect.arrayContaining(['results.csv', 'results.json', `trace-${id}.csv`]));
    const results = JSON.parse(readFileSync(join(out, 'results.json'), 'utf8'));
    const truth = JSON.parse(readFileSync(join(SAMPLE, 'boathouse.truth.json'), 'utf8'));
    const [row] = results.segments;
    expect(row.status).toBe('measured');
    expect(Math.abs(row.f0_Hz - truth.segments[0].f0_Hz)).toBeLessThan(4 * row.u_f0_Hz);
    expect(row.u_f0_Hz / row.f0_Hz).toBeLessThan(1e-3);
    expect(stdout).toContain(id);
    expect(readFileSync(join(out, 'results.csv'), 'utf8').split('\r\n')).toHaveLength(3);
  });

  it('gives the same bytes again, and the same whatever the number of segments beside it', async () => {
    const outs = [join(dir, 'again-1'), join(dir, 'again-2')];
    await needlebeat('measure', session('again', onlyFirst), '--out', outs[0] as string, '--quiet');
    const both = session('again-both', (s) => {
      s.segments = s.segments.slice(0, 2);
    });
    await needlebeat('measure', both, '--out', outs[1] as string, '--quiet');
    const rows = outs.map((out) => JSON.parse(readFileSync(join(out, 'results.json'), 'utf8')).segments[0]);
    expect(rows[1]).toEqual(rows[0]);
  });

  it('leaves a segment without a bar unmeasured, with the reason, and measures the others', async () => {
    const path = session('no-bar', (s) => {
      const second = structuredClone(s.segments[1]) as Session['segments'][number];
      const corner = { ...firstView(s), id: 'corner', region: { x: 2, y: 2, width: 64, height: 48 } };
      s.views = [firstView(s), corner as Session['views'][number]];
      s.segments = [firstSegment(s), { ...second, view: 'corner' }];
    });
    const out = join(dir, 'out-no-bar');
    const { status } = await needlebeat('measure', path, '--out', out, '--quiet');
    expect(status).toBe(1);
    const { segments } = JSON.parse(readFileSync(join(out, 'results.json'), 'utf8'));
    expect(segments[0].status).toBe('measured');
    expect(segments[1]).toMatchObject({ status: 'unmeasured', f0_Hz: null, u_f0_Hz: null });
    expect(segments[1].checks).toEqual(
      expect.arrayContaining([
        expect.objectContaining({ severity: 'fault', message: expect.stringMatching(/\w+ .*\.$/) }),
      ]),
    );
  });

  const refused: [string, (s: Session) => unknown, RegExp][] = [
    ['a missing recording', (s) => (firstRecording(s).file = 'nowhere.mp4'), /nowhere\.mp4/],
    ['a region outside the picture', (s) => (firstView(s).region.x = 5000), /view .*region.*outside the picture/],
    ['a region that is too small', (s) => Object.assign(firstView(s).region, { width: 3 }), /view .*too small/],
    [
      'a segment outside the recording',
      (s) => {
        onlyFirst(s);
        firstSegment(s).end_s = 9999;
      },
      /segment .* ends at 9999 s, but recording .* ends at/,
    ],
    [
      'overlapping segments',
      (s) => ((s.segments[1] as { start_s: number }).start_s = firstSegment(s).start_s + 1),
      /overlap/,
    ],
    ['a session of another version', (s) => Object.assign(s, { version: 7 }), /version must be 1; not 7/],
    ['unknown keys', (s) => Object.assign(firstSegment(s), { colour: 'red' }), /unknown key "colour"/],
  ];
  it.each(refused)('refuses %s with one sentence and writes nothing', async (what, change, sentence) => {
    const out = join(dir, `refused ${what}`);
    const { status, stdout, stderr } = await needlebeat('measure', session('refused', change), '--out', out);
    expect(status).toBe(2);
    expect(stderr).toMatch(sentence);
    expect(stderr.trim().split('\n')).toHaveLength(1);
    expect(stdout).toBe('');
    expect(() => readdirSync(out)).toThrow();
  });

  const notVideos: [string, string][] = [
    ['empty.mp4', ''],
    ['text.mp4', 'This is a shopping list, not a recording.\n'.repeat(50)],
  ];
  it.each(notVideos)('refuses %s as a recording, in measure and in inspect', async (file, content) => {
    writeFileSync(join(dir, file), content);
    const path = session('not-a-video', (s) => (firstRecording(s).file = file));
    for (const args of [
      ['measure', path, '--out', join(dir, 'never')],
      ['inspect', join(dir, file)],
    ]) {
      const { status, stderr } = await needlebeat(...args);
      expect(status).toBe(2);
      expect(stderr).toContain(file);
      expect(stderr.trim().split('\n')).toHaveLength(1);
    }
    expect(() => readdirSync(join(dir, 'never'))).toThrow();
  });

  it('refuses a missing session, a folder and a wrong command line with status 2', async () => {
    mkdirSync(join(dir, 'folder'), { recursive: true });
    expect(await needlebeat('measure', join(dir, 'none.json'))).toMatchObject({ status: 2, stdout: '' });
    expect((await needlebeat('measure', join(dir, 'folder'))).stderr).toMatch(/folder: this is not a file/);
    expect(await needlebeat('measure')).toMatchObject({ status: 2 });
    expect(await needlebeat('meazure', 'x')).toMatchObject({ status: 2 });
  });

  it('ends with 130 when interrupted and leaves nothing half-written', async () => {
    const out = join(dir, 'interrupted');
    const { child, ended } = start(['measure', session('whole', () => undefined), '--out', out]);
    await new Promise((going) => child.stderr?.once('data', going));
    child.kill('SIGINT');
    expect((await ended).status).toBe(130);
    expect(() => readdirSync(out)).toThrow();
  });
});

describe('needlebeat inspect, reduce and report', () => {
  it('prints the facts of a recording as JSON', async () => {
    const { status, stdout } = await needlebeat('inspect', join(dir, 'boathouse.mp4'));
    expect(status).toBe(0);
    const facts = JSON.parse(stdout);
    expect(facts).toMatchObject({ codec: 'h264', rotation_deg: 0 });
    expect(facts.frames).toBeGreaterThan(1000);
  });

  it('repeats the reduction from a results file to the last digit, and makes a page to print', async () => {
    const path = session('three', (s) => {
      s.segments = s.segments.slice(0, 3);
    });
    const out = join(dir, 'out-three');
    await needlebeat('measure', path, '--out', out, '--quiet');
    const first = JSON.parse(readFileSync(join(out, 'results.json'), 'utf8'));
    const again = join(dir, 'out-again');
    expect((await needlebeat('reduce', join(out, 'results.json'), '--out', again)).status).toBe(0);
    expect(JSON.parse(readFileSync(join(again, 'results.json'), 'utf8'))).toEqual(first);
    expect((await needlebeat('report', join(out, 'results.json'), '--out', again)).status).toBe(0);
    expect(readFileSync(join(again, 'report.html'), 'utf8')).toMatch(/^<!doctype html>/i);
  });

  it('prints the page as PDF where there is a browser, else says what is missing and writes nothing', async () => {
    const path = session('first', onlyFirst);
    const out = join(dir, 'out-first');
    await needlebeat('measure', path, '--out', out, '--quiet');
    const report = (folder: string, env: NodeJS.ProcessEnv) =>
      start(['report', join(out, 'results.json'), '--out', join(dir, folder), '--pdf'], { ...process.env, ...env })
        .ended;
    const none = await report('never', { CHROMIUM_PATH: join(dir, 'no-browser') });
    expect(none.status).toBe(2);
    expect(none.stderr).toMatch(
      /^needlebeat: report\.pdf needs a Chromium.*; without --pdf the page report\.html is written.*\n$/,
    );
    expect(readdirSync(dir)).not.toContain('never');
    if ((await findBrowser(process.env, process.platform)) === null) {
      console.warn('Printing left out: no Chromium found (set CHROMIUM_PATH, or install Debian’s chromium).');
      return;
    }
    const printed = await report('printed', {});
    expect(printed).toMatchObject({ status: 0, stderr: '' });
    expect(readdirSync(join(dir, 'printed')).sort()).toEqual(['report.html', 'report.pdf']);
  });

  it('refuses what is no results file', async () => {
    writeFileSync(join(dir, 'bad.json'), '{"format": "needlebeat/results", "version": 3}');
    for (const command of ['reduce', 'report']) {
      const { status, stderr } = await needlebeat(command, join(dir, 'bad.json'), '--out', join(dir, 'never'));
      expect(status).toBe(2);
      expect(stderr).toMatch(/^needlebeat: bad\.json: version must be 1; not 3\.\n$/);
    }
  });
});
