import { expect, test } from 'vitest';
import type { SegmentResult } from '../../../../app/contract.ts';
import { tableText } from '../../../../app/window/field-sheet/table-text.ts';

const row = {
  id: '=1+1',
  recording: 'A',
  view: 'v1',
  view_kind: 'plan',
  start_s: 1,
  end_s: 2,
  current_A: null,
  u_current_A: 0,
  sweep: null,
  status: 'unmeasured',
  f0_Hz: null,
  u_f0_Hz: null,
  dof_f0: null,
  fd_Hz: null,
  u_fd_Hz: null,
  gamma_per_s: null,
  u_gamma_per_s: null,
  q_factor: null,
  u_q_factor: null,
  amplitude_start_deg: null,
  amplitude_end_deg: null,
  equilibrium_deg: null,
  u_equilibrium_deg: null,
  cycles: null,
  frames: 30,
  frames_lost: 0,
  frames_refused: 30,
  frames_used: 0,
  residual_rms_deg: null,
  swing_Hz: null,
  swing_share: 0,
  u_time_scale: 2e-5,
  left_out: null,
  note: 'one\ttwo\nthree',
  checks: [
    { code: 'no_bar', severity: 'fault', message: 'No bar.' },
    { code: 'short', severity: 'doubt', message: 'Short.' },
  ],
} satisfies SegmentResult;

test('the copied table has a header, one line per segment, as many cells in each, and no formulas', () => {
  const lines = tableText([row, row]).split('\n');
  expect(lines).toHaveLength(3);
  const cells = lines.map((line) => line.split('\t'));
  expect(cells[0]).toEqual(expect.arrayContaining(['id', 'current_A', 'f0_Hz', 'u_f0_Hz', 'checks']));
  expect(cells[1]).toHaveLength(cells[0]!.length);
  const value = (name: string) => cells[1]![cells[0]!.indexOf(name)];
  expect(value('id')).toBe("'=1+1");
  expect(value('current_A')).toBe('');
  expect(value('checks')).toBe('no_bar;short');
  expect(value('note')).toBe('one two three');
});
