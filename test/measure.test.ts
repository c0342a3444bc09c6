import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { measureSession } from '../src/measure.ts';
import type { Results, SegmentResult } from '../src/report/results.ts';
import { readSession } from '../src/session/read-session.ts';

interface TrueSegment {
  readonly id: string;
  readonly f0_Hz: number;
  readonly expected_status: SegmentResult['status'];
}

interface Truth {
  readonly segments: readonly TrueSegment[];
  readonly apparatus: { readonly ambient_T: number; readonly moment_to_inertia: number };
}

const read = (path: string): Truth => JSON.parse(readFileSync(path, 'utf8'));

/** What is wrong with the row of a segment that is expected to be measured; empty for nothing. */
function shortcomings(row: SegmentResult | undefined, truth: TrueSegment): string[] {
  if (row?.status !== 'measured' || row.f0_Hz === null || row.u_f0_Hz === null) return [`${truth.id}: ${row?.status}`];
  const errors = Math.abs(row.f0_Hz - truth.f0_Hz) / row.u_f0_Hz;
  return [
    ...(errors > 3 ? [`${truth.id}: f0 is ${errors.toFixed(1)} u off`] : []),
    ...(row.u_f0_Hz > 3e-4 * row.f0_Hz ? [`${truth.id}: u is ${row.u_f0_Hz / row.f0_Hz} of f0`] : []),
  ];
}

/** Measures a session and lists what is wrong with the segments that are expected to be measured. */
async function judged(session: string, truth: Truth): Promise<{ results: Results; wrong: string[] }> {
  const { results } = await measureSession(await readSession(session));
  const rows = new Map(results.segments.map((row) => [row.id, row]));
  const good = truth.segments.filter((s) => s.expected_status === 'measured');
  expect(good.length).toBeGreaterThan(1);
  return { results, wrong: good.flatMap((s) => shortcomings(rows.get(s.id), s)) };
}

describe('the whole job on the sample', () => {
  let results: Results;
  let wrong: string[];
  const truth = read('samples/boathouse/boathouse.truth.json');
  beforeAll(async () => {
    ({ results, wrong } = await judged('samples/boathouse/boathouse.needlebeat.json', truth));
  }, 600_000);

  it('measures every segment within 3 u of the truth, u below 3e-4 of f0', () => expect(wrong).toEqual([]));

  it('accounts for every frame of every segment', () => {
    for (const row of results.segments) {
      expect(row.frames_lost).toBe(0);
      expect(row.frames_used + row.frames_refused).toBeLessThanOrEqual(row.frames);
      expect(row.frames_used).toBeGreaterThan(0.8 * row.frames);
    }
  });

  it('finds field and moment over inertia within 3 u', () => {
    const { ambient_T, u_ambient_T, moment_to_inertia, u_moment_to_inertia } = results.reduction;
    const errors = [
      ((ambient_T ?? Number.NaN) - truth.apparatus.ambient_T) / (u_ambient_T ?? Number.NaN),
      ((moment_to_inertia ?? Number.NaN) - truth.apparatus.moment_to_inertia) / (u_moment_to_inertia ?? Number.NaN),
    ];
    for (const error of errors) expect(Math.abs(error)).toBeLessThan(3);
  });
});

const SHARED = '../shared/recordings';
const present = existsSync(SHARED);
if (!present) console.log(`${SHARED} is not there: the checks on the development recordings are left out`);

describe.skipIf(!present)('the whole job on the development recordings', () => {
  const names = present ? readdirSync(SHARED).filter((name) => existsSync(join(SHARED, name, 'truth.json'))) : [];

  it.each(names)(
    '%s: every segment that should be measured is, within 3 u; the others are flagged',
    async (name) => {
      const truth = read(join(SHARED, name, 'truth.json'));
      const { results, wrong } = await judged(join(SHARED, name, 'session.needlebeat.json'), truth);
      expect(wrong).toEqual([]);
      for (const segment of truth.segments) {
        if (segment.expected_status === 'measured') continue;
        const row = results.segments.find((r) => r.id === segment.id);
        expect(row?.status).toBe(segment.expected_status);
        expect(row?.checks.map((c) => c.code)).toContain(
          segment.expected_status === 'unmeasured' ? 'too_few_cycles' : 'jump',
        );
      }
    },
    600_000,
  );
});
