import { mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { InputError } from '../../src/recording/input-error.ts';
import { readResults } from '../../src/report/read-results.ts';
import { reportFromFiles } from '../../src/report/report-files.ts';
import { resultsCsv } from '../../src/report/results-csv.ts';
import { type SegmentTrace, writeResults } from '../../src/report/write-results.ts';
import { exampleResults, withSegment } from './support/results-fixture.ts';

const POSES = 829;

/** A trace that fits the first segment of the example. */
function traceOf(start_s: number, used = POSES) {
  const rows = Array.from({ length: used }, (_, i) => i);
  const time_s = Float64Array.from(rows, (i) => start_s + i / 30);
  const angle = time_s.map((t) => 0.17 * Math.cos(1.7 * t));
  return {
    trace: {
      time_s,
      angle,
      unit: 'rad' as const,
      x_px: angle.map(() => 640),
      y_px: angle.map(() => 360),
      quality: angle.map(() => 1),
      frame_index: Int32Array.from(rows),
    },
    ringDown: { fitted: angle, residual: angle.map(() => 0), usedRows: Uint8Array.from(rows, () => 1) },
  };
}

let dir = '';
beforeEach(async () => {
  dir = await mkdtemp(join(tmpdir(), 'needlebeat-write-'));
});
afterEach(() => rm(dir, { recursive: true }));

const text = (name: string) => readFile(join(dir, name), 'utf8');

describe('writing results', () => {
  it('puts table, its description and results into a folder that it makes', async () => {
    const out = join(dir, 'new', 'folder');
    await writeResults(out, exampleResults());
    expect((await readdir(out)).sort()).toEqual(['results.csv', 'results.csv-metadata.json', 'results.json']);
    expect(await readFile(join(out, 'results.csv'), 'utf8')).toBe(resultsCsv(exampleResults()));
    expect(await readResults(join(out, 'results.json'))).toEqual(exampleResults());
  });

  it('writes traces and the page where they are asked for', async () => {
    const traces = new Map<string, SegmentTrace>([
      ['s01', traceOf(3.2)],
      ['s05', { trace: null, ringDown: null }],
    ]);
    await writeResults(dir, exampleResults(), { traces, csvw: false, report: { madeOn: '2026-12-01' } });
    expect((await readdir(dir)).sort()).toEqual(['report.html', 'results.csv', 'results.json', 'trace-s01.csv']);
    expect((await text('trace-s01.csv')).split('\r\n')).toHaveLength(POSES + 2);
    expect((await text('report.html')).match(/<svg /g)).toHaveLength(2);
  });

  it('replaces what is there', async () => {
    await writeFile(join(dir, 'results.csv'), 'old');
    await writeResults(dir, exampleResults());
    expect(await text('results.csv')).toBe(resultsCsv(exampleResults()));
  });

  it('leaves nothing new behind where one file can’t be written', async () => {
    // A folder of that name is in the way of the last file.
    await mkdir(join(dir, 'results.json', 'x'), { recursive: true });
    await writeFile(join(dir, 'notes.txt'), 'mine');
    const attempt = writeResults(dir, exampleResults(), { traces: new Map([['s01', traceOf(3.2)]]) });
    await expect(attempt).rejects.toThrow(InputError);
    await expect(attempt).rejects.toThrow(/results\.json can't be written into this folder \(E\w+\)\.$/);
    expect((await readdir(dir)).sort()).toEqual(['notes.txt', 'results.json']);
  });

  it('says so where the folder is a file', async () => {
    await writeFile(join(dir, 'out'), '');
    await expect(writeResults(join(dir, 'out'), exampleResults())).rejects.toThrow(/^out: .* can't be written/);
  });
});

describe('making a report from files', () => {
  const now = new Date(2026, 11, 1, 23, 30);
  const report = (out = dir) => reportFromFiles(join(dir, 'results.json'), out, { now });

  it('needs the results file alone', async () => {
    await writeResults(dir, exampleResults());
    const out = join(dir, 'printed');
    expect(await report(out)).toEqual([join(out, 'report.html')]);
    const page = await readFile(join(out, 'report.html'), 'utf8');
    expect(page).toContain('page made on 2026-12-01');
    expect(page).not.toContain('Ring-downs');
  });

  it('writes the printed page beside it, or neither', async () => {
    await writeResults(dir, exampleResults());
    const printed = (out: string, print: (page: string) => Promise<Uint8Array>) =>
      reportFromFiles(join(dir, 'results.json'), join(dir, out), { now, print });
    const written = await printed('both', async (page) => Buffer.from(`printed ${page.slice(0, 15)}`));
    expect(written).toEqual(['report.html', 'report.pdf'].map((name) => join(dir, 'both', name)));
    expect(await readFile(join(dir, 'both', 'report.pdf'), 'utf8')).toBe('printed <!DOCTYPE html>');
    await expect(printed('neither', () => Promise.reject(new Error('no paper')))).rejects.toThrow('no paper');
    expect(await readdir(dir)).not.toContain('neither');
  });

  it('plots the ring-downs of traces that stand beside it', async () => {
    await writeResults(dir, exampleResults(), { traces: new Map([['s01', traceOf(3.2)]]) });
    await report();
    expect((await text('report.html')).match(/<svg /g)).toHaveLength(2);
  });

  it('does not take an older trace or another file of that name for the segment’s', async () => {
    const traces = new Map([
      ['s01', traceOf(3.2, 700)],
      ['s02', traceOf(3.2)],
    ]);
    await writeResults(dir, exampleResults(), { traces });
    await writeFile(join(dir, 'trace-s03.csv'), 'not a trace');
    await report();
    const page = await text('report.html');
    expect(page.match(/<svg /g)).toHaveLength(1);
    expect(page).toContain('trace-s01.csv, trace-s02.csv, trace-s03.csv');
  });

  it('finds traces of ids that no file can be called by', async () => {
    const id = '0.5 A / up';
    await writeResults(dir, withSegment(0, { id }), { traces: new Map([[id, traceOf(3.2)]]) });
    expect(await readdir(dir)).toContain('trace-0.5%20A%20%2F%20up.csv');
    await report();
    expect((await text('report.html')).match(/<svg /g)).toHaveLength(2);
  });
});
