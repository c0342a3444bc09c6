import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { InputError } from '../../src/recording/input-error.ts';
import { parseResults, readResults } from '../../src/report/read-results.ts';
import { resultsText } from '../../src/report/results-json.ts';
import { exampleResults, withSegment } from './support/results-fixture.ts';

// biome-ignore lint/suspicious/noExplicitAny: the point is to write what the type forbids.
type Anything = any;

/** The sentence with which a changed file is refused. */
function refusal(change: (value: Anything) => void): string {
  const value = JSON.parse(resultsText(exampleResults()));
  change(value);
  return refusedText(JSON.stringify(value));
}

function refusedText(text: string): string {
  try {
    parseResults(text, 'results.json');
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  return 'accepted';
}

/** A file as the first version of the format had it: nothing that was added later. */
const first = () => ({
  format: 'needlebeat/results',
  version: 1,
  program: 'needlebeat 0.1.0',
  session: { title: 'Boathouse bench', sha256: '00' },
  segments: [
    {
      id: 's01',
      recording: 'A',
      start_s: 3.2,
      end_s: 31,
      current_A: 0,
      u_current_A: 0.003,
      sweep: 'rising',
      status: 'measured',
      f0_Hz: 0.31234,
      u_f0_Hz: 0.00002,
      fd_Hz: 0.3119,
      u_fd_Hz: 0.00002,
      gamma_per_s: 0.0123,
      u_gamma_per_s: 0.0003,
      amplitude_start_deg: 9.8,
      amplitude_end_deg: 7.1,
      equilibrium_deg: -12.41,
      u_equilibrium_deg: 0.01,
      cycles: 8.7,
      frames: 834,
      frames_lost: 0,
      residual_rms_deg: 0.021,
      swing_Hz: null,
      swing_share: 0,
      checks: [{ code: 'few_cycles', severity: 'note', message: 'Few cycles.' }],
    },
  ],
  reduction: {},
});

describe('results.json', () => {
  it('comes back as it was written', () => {
    const results = exampleResults();
    expect(parseResults(resultsText(results), 'results.json')).toEqual(results);
  });

  it('is the same text however the object was put together', () => {
    const results = exampleResults();
    const shuffled = Object.fromEntries(Object.entries(results).reverse()) as unknown as typeof results;
    const segments = results.segments.map(
      (s) => Object.fromEntries(Object.entries(s).reverse()) as unknown as typeof s,
    );
    expect(resultsText({ ...shuffled, segments })).toBe(resultsText(results));
  });

  it('begins with the contract’s keys in its order, indented by two, and ends in a line break', () => {
    const text = resultsText(exampleResults());
    expect(Object.keys(JSON.parse(text)).slice(0, 4)).toEqual(['format', 'version', 'program', 'session']);
    expect(Object.keys(JSON.parse(text).segments[0]).slice(0, 3)).toEqual(['id', 'recording', 'start_s']);
    expect(text).toMatch(/^\{\n {2}"format": "needlebeat\/results",\n/);
    expect(text.endsWith('}\n')).toBe(true);
  });

  it('keeps numbers to the last digit and writes degrees of freedom without limit as null', () => {
    const results = withSegment(0, { f0_Hz: 0.1 + 0.2, dof_f0: Number.POSITIVE_INFINITY });
    const [segment] = parseResults(resultsText(results), 'results.json').segments;
    expect(segment?.f0_Hz).toBe(0.30000000000000004);
    expect(segment?.dof_f0).toBeNull();
  });

  it('is read where it holds only what the first version of the format had', () => {
    const results = parseResults(JSON.stringify(first()), 'results.json');
    expect(results.segments[0]).toMatchObject({
      f0_Hz: 0.31234,
      view_kind: null,
      dof_f0: null,
      left_out: null,
      note: '',
    });
    expect(results.reduction).toMatchObject({ ambient_T: null, points: [], budget: {}, curve: null });
    expect(results).not.toHaveProperty('apparatus');
  });

  it('keeps keys of others in segments, and lets none change an object’s nature', () => {
    const text = JSON.stringify(first()).replace('"id":"s01"', '"id":"s01","lamp":"left","__proto__":{"status":"x"}');
    const [segment] = parseResults(text, 'results.json').segments;
    expect(segment).toMatchObject({ lamp: 'left', status: 'measured' });
    expect(Object.getPrototypeOf(segment)).toBe(Object.prototype);
  });

  it.each<[string, (value: Anything) => void, RegExp]>([
    ['a field is missing', (v) => delete v.segments[0].f0_Hz, /segments\[0\] \(s01\)\.f0_Hz must be .*missing/],
    [
      'a number is a text',
      (v) => Object.assign(v.segments[1], { end_s: '61' }),
      /segments\[1\] \(s02\)\.end_s must be a number; not "61"/,
    ],
    [
      'a status is unknown',
      (v) => Object.assign(v.segments[0], { status: '<b>' }),
      /\(s01\)\.status must be "measured" or "doubtful"/,
    ],
    [
      'a frequency is negative',
      (v) => Object.assign(v.segments[0], { f0_Hz: -1 }),
      /\(s01\)\.f0_Hz must be a number above 0; not -1/,
    ],
    ['the version is another', (v) => Object.assign(v, { version: 2 }), /version must be 1; not 2/],
    [
      'the apparatus has an unknown key',
      (v) => Object.assign(v.apparatus.coil, { colour: 1 }),
      /apparatus\.coil has an unknown key "colour"/,
    ],
    [
      'a severity is unknown',
      (v) => Object.assign(v.segments[2].checks[0], { severity: 'bad' }),
      /checks\[0\]\.severity must be "note"/,
    ],
    [
      'the reduction holds a text for a number',
      (v) => Object.assign(v.reduction, { ambient_T: '1' }),
      /reduction\.ambient_T must be a number; not "1"/,
    ],
    ['two segments have one id', (v) => Object.assign(v.segments[1], { id: 's01' }), /two entries have the id "s01"/],
    [
      'a measured segment has no frequency',
      (v) => Object.assign(v.segments[0], { f0_Hz: null }),
      /segment s01: its status is "measured"/,
    ],
  ])('is refused with one sentence when %s', (_, change, sentence) => {
    const said = refusal(change);
    expect(said).toMatch(sentence);
    expect(said).toMatch(/^results\.json: [^\n]*\.$/);
  });

  it('is refused when it is not JSON, or a session', () => {
    expect(refusedText('{"format": NaN}')).toMatch(/^results\.json: this is not valid JSON/);
    expect(refusedText('{"format":"needlebeat/session","version":1}')).toMatch(/this is a session file/);
    expect(refusedText('[]')).toMatch(/^results\.json: the top level must be an object/);
  });
});

describe('reading a results file', () => {
  let dir = '';
  beforeAll(async () => {
    dir = await mkdtemp(join(tmpdir(), 'needlebeat-results-'));
  });
  afterAll(() => rm(dir, { recursive: true }));

  it('takes a file with a byte order mark', async () => {
    const path = join(dir, 'results.json');
    await writeFile(path, `\uFEFF${resultsText(exampleResults())}`);
    expect(await readResults(path)).toEqual(exampleResults());
  });

  it('names the file that is missing', async () => {
    await expect(readResults(join(dir, 'none.json'))).rejects.toThrow(
      'none.json: there is no such file; a results file (results.json) was expected.',
    );
  });
});
