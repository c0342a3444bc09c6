import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/recording/input-error.ts';
import { parseSession } from '../../src/session/read-session.ts';

const good = () => ({
  format: 'needlebeat/session',
  version: 1,
  title: 'Boathouse bench, evening run',
  recordings: [{ id: 'A', file: 'evening.mp4', time_scale: 1, u_time_scale: 2e-5 }],
  apparatus: {
    coil: { turns_per_coil: 124, radius_m: 0.15, u_radius_m: 0.0005, spacing_m: 0.15 },
    magnet: { shape: 'cylinder', mass_kg: 0.0187, length_m: 0.06, diameter_m: 0.008 },
  },
  views: [
    { id: 'v1', recording: 'A', kind: 'plan', region: { x: 412, y: 220, width: 460, height: 460 } },
    {
      id: 'v2',
      recording: 'A',
      kind: 'side',
      region: { x: 300, y: 310, width: 700, height: 140 },
      axis_x_px: 655,
      half_length_px: 210,
      facing_deg: 5,
    },
  ],
  segments: [
    {
      id: 's01',
      recording: 'A',
      view: 'v1',
      start_s: 3.2,
      end_s: 31,
      current_A: 0,
      u_current_A: 0.003,
      sweep: 'rising',
      note: '',
    },
    { id: 's02', recording: 'A', view: 'v2', start_s: 33, end_s: 40, current_A: null },
  ],
});

/** The sentence with which a changed session is refused. */
function refusal(change: (session: ReturnType<typeof good> & Record<string, never>) => unknown): string {
  const session = structuredClone(good()) as ReturnType<typeof good> & Record<string, never>;
  change(session);
  try {
    parseSession(JSON.stringify(session), 'evening.needlebeat.json');
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  return 'accepted';
}

// biome-ignore lint/suspicious/noExplicitAny: the point is to write what the type forbids.
type Anything = any;

describe('a session file', () => {
  it('is read as it stands', () => {
    expect(parseSession(JSON.stringify(good()), 'x')).toEqual(good());
  });

  const cases: [string, (s: Anything) => unknown, string][] = [
    ['unknown key at the top', (s) => (s.colour = 1), 'the top level has an unknown key "colour".'],
    ['unknown key in a segment', (s) => (s.segments[1].colour = 1), 'segments[1] (s02) has an unknown key "colour".'],
    ['two unknown keys', (s) => Object.assign(s.views[0], { a: 1, b: 2 }), 'views[0] (v1) has unknown keys "a", "b".'],
    ['wrong type', (s) => (s.segments[0].start_s = '3'), 'segments[0] (s01).start_s must be a number; not "3".'],
    [
      'missing field',
      (s) => delete s.segments[0].current_A,
      'segments[0] (s01).current_A must be a number; it is missing.',
    ],
    ['another version', (s) => (s.version = 2), 'version must be 1; not 2.'],
    ['another format', (s) => (s.format = 'x'), 'format must be "needlebeat/session"; not "x".'],
    ['no recordings', (s) => (s.recordings = []), 'recordings must be of length 1 or more; not [].'],
    [
      'negative radius',
      (s) => (s.apparatus.coil.radius_m = -1),
      'apparatus.coil.radius_m must be a number above 0; not -1.',
    ],
    ['unknown key in the coil', (s) => (s.apparatus.coil.wire = 1), 'apparatus.coil has an unknown key "wire".'],
    [
      'constant and dimensions',
      (s) => (s.apparatus.coil.constant_T_per_A = 1e-4),
      'apparatus.coil has an unknown key "constant_T_per_A".',
    ],
    [
      'unknown shape',
      (s) => (s.apparatus.magnet.shape = 'ball'),
      'apparatus.magnet.shape must be "cylinder" or "bar"; not "ball".',
    ],
    [
      'view of unknown kind',
      (s) => (s.views[0].kind = 'top'),
      'views[0] (v1).kind must be "plan" or "oblique" or "side"; not "top".',
    ],
    [
      'empty region',
      (s) => (s.views[0].region.width = 0),
      'views[0] (v1).region.width must be a number above 0; not 0.',
    ],
    [
      'two segments with one id',
      (s) => (s.segments[1].id = 's01'),
      'segments: two entries have the id "s01"; each id must be unique.',
    ],
    ['unknown view', (s) => (s.segments[0].view = 'v9'), 'segment s01: there is no view with the id "v9".'],
    ['unknown recording', (s) => (s.views[0].recording = 'B'), 'view v1: there is no recording with the id "B".'],
    ['reversed times', (s) => (s.segments[0].end_s = 3), 'segment s01: end_s (3) must be later than start_s (3.2).'],
    [
      'overlap',
      (s) => (s.segments[1].start_s = 30.5),
      'segments s01 and s02 overlap: s02 starts at 30.5 s, before s01 ends at 31 s.',
    ],
    [
      'a web address',
      (s) => (s.recordings[0].file = 'https://x/y.mp4'),
      'recording A: file must be a path on this computer, not "https://x/y.mp4".',
    ],
    [
      'a bad date',
      (s) => (s.place = { latitude_deg: 1, longitude_deg: 2, height_m: 3, date: '1.2.2026' }),
      'place.date must be a date as YYYY-MM-DD; not "1.2.2026".',
    ],
    [
      'a fibre’s run without a frequency',
      (s) => (s.apparatus.fibre = { run_without_field: { u_f0_Hz: 1e-4 } }),
      'apparatus.fibre.run_without_field.f0_Hz must be a number; it is missing.',
    ],
    [
      'a fibre’s run of an unknown segment',
      (s) => (s.apparatus.fibre = { run_without_field: { segment: 's09', body: { inertia_kg_m2: 1e-6 } } }),
      'apparatus.fibre.run_without_field.segment: there is no segment with the id "s09".',
    ],
    [
      'two runs of one segment',
      (s) => {
        const runs = [0.1, 0.2].map((length_m) => ({ length_m, segment: 's01' }));
        s.apparatus.fibre = { length_m: 0.3, runs_at_lengths: runs };
      },
      'apparatus.fibre.runs_at_lengths[1].segment: segment s01 stands for two runs; each must have its own.',
    ],
    [
      'fibre lengths without that of the sweep',
      (s) => (s.apparatus.fibre = { runs_at_lengths: [{ length_m: 0.1, f0_Hz: 1 }] }),
      'apparatus.fibre.length_m must be a number above 0 where runs_at_lengths is given; it is missing.',
    ],
    [
      'a fibre of no length',
      (s) => (s.apparatus.fibre = { length_m: 0.3, runs_at_lengths: [{ length_m: 0, f0_Hz: 1 }] }),
      'apparatus.fibre.runs_at_lengths[0].length_m must be a number above 0; not 0.',
    ],
    [
      'a list instead of a number',
      (s) => (s.segments[0].current_A = [0]),
      'segments[0] (s01).current_A must be a number; not [0].',
    ],
  ];
  it.each(cases)('is refused for: %s', (_what, change, sentence) => {
    expect(refusal(change)).toBe(`evening.needlebeat.json: ${sentence}`);
  });

  it('is refused when it holds NaN or an infinite number', () => {
    const text = JSON.stringify(good());
    expect(() => parseSession(text.replace('3.2', 'NaN'), 'a.json')).toThrow(/^a\.json: this is not valid JSON/);
    expect(() => parseSession(text.replace('3.2', '1e999'), 'a.json')).toThrow(
      /segments\[0\] \(s01\)\.start_s must be a number/,
    );
  });
});
