import { execFileSync } from 'node:child_process';
import { readFile, stat } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { boathouse } from '../../samples/boathouse-bench.ts';
import { runBench } from '../../samples/drawing/run.ts';
import { sessionOf } from '../../samples/drawing/session.ts';
import { truthOf } from '../../samples/drawing/truth.ts';
import { readCase } from '../../samples/truth-file.ts';
import { readSession } from '../../src/session/read-session.ts';

const folder = fileURLToPath(new URL('../../samples/boathouse/', import.meta.url));
const recording = `${folder}boathouse.mp4`;
const ffprobe = (createRequire(import.meta.url)('@ffprobe-installer/ffprobe') as { path: string }).path;

describe('the demo session', () => {
  it('reads as a session, says that it is invented, and has rising, falling, zero and reversed steps', async () => {
    const { session } = await readSession(`${folder}boathouse.needlebeat.json`);
    expect(session.title).toMatch(/invented/);
    const currents = session.segments.map((segment) => segment.current_A ?? Number.NaN);
    expect(currents.length).toBeGreaterThanOrEqual(8);
    expect(currents).toContain(0);
    expect(currents.filter((current) => current < 0).length).toBeGreaterThanOrEqual(2);
    expect(new Set(session.segments.map((segment) => segment.sweep))).toEqual(new Set(['rising', 'falling']));
  });

  it('has a truth for every segment, each of at least eight cycles', async () => {
    const { session } = await readSession(`${folder}boathouse.needlebeat.json`);
    const { truth } = await readCase(folder);
    expect(truth.segments.map((segment) => segment.id)).toEqual(session.segments.map((segment) => segment.id));
    for (const [i, segment] of session.segments.entries()) {
      expect((segment.end_s - segment.start_s) * truth.segments[i]!.f0_Hz).toBeGreaterThan(7.9);
    }
  });

  it('is what the script would draw: session and truth come out the same', async () => {
    const run = runBench(boathouse);
    expect(JSON.parse(await readFile(`${folder}boathouse.needlebeat.json`, 'utf8'))).toEqual(
      sessionOf(run, 'boathouse.mp4'),
    );
    expect(JSON.parse(await readFile(`${folder}boathouse.truth.json`, 'utf8'))).toEqual(truthOf(run, 'boathouse.mp4'));
  });

  it('is below 4 MB, H.264, and its frames stand where they were meant to, at an uneven rate', async () => {
    expect((await stat(recording)).size).toBeLessThan(4_000_000);
    const text = execFileSync(
      ffprobe,
      [
        '-v',
        'error',
        '-select_streams',
        'v:0',
        '-show_entries',
        'stream=codec_name:packet=pts',
        '-of',
        'csv=p=0',
        recording,
      ],
      {
        encoding: 'utf8',
        maxBuffer: 1e7,
      },
    );
    const lines = text
      .trim()
      .split('\n')
      .map((line) => line.replace(/,+$/, ''));
    expect(lines).toContain('h264');
    const ticks = lines
      .filter((line) => /^\d+$/.test(line))
      .map(Number)
      .sort((a, b) => a - b);
    const intended = runBench(boathouse).times.ticks;
    expect(ticks).toEqual(intended);
    const gaps = ticks.slice(1).map((tick, i) => tick - ticks[i]!);
    const typical = [...gaps].sort((a, b) => a - b)[gaps.length >> 1]!;
    expect(new Set(gaps).size).toBeGreaterThan(50);
    expect(gaps.filter((gap) => gap > 1.8 * typical).length).toBeGreaterThan(10);
  });
});
