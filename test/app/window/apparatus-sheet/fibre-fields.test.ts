import { describe, expect, test } from 'vitest';
import {
  type FibreDraft,
  fibreDraft,
  fibreLacks,
  fibreOf,
  NEW_LENGTH,
  syncedDraft,
} from '../../../../app/window/apparatus-sheet/fibre-fields.ts';
import { apparatusSchema } from '../../../../src/session/session.ts';

const empty = fibreDraft(undefined);
const typed = { origin: 'typed', values: { f0_Hz: 0.0704, u_f0_Hz: 1e-4 }, segment: '' } as const;
const parsed = (draft: FibreDraft) => apparatusSchema.parse({ fibre: fibreOf(draft) }).fibre;

describe('the fibre in the apparatus sheet', () => {
  test('holds nothing until something is complete', () => {
    expect(fibreOf(empty)).toBeUndefined();
    const begun: FibreDraft = { ...empty, free: { ...typed, values: {} }, lengths: [NEW_LENGTH] };
    expect(fibreOf(begun)).toBeUndefined();
    expect(fibreLacks(begun)).toEqual([
      'the frequency without field',
      'length and frequency of every run',
      'the fibre’s length in the sweep',
      'a second length',
    ]);
  });

  test('becomes what the session file takes, and back', () => {
    const whole: FibreDraft = {
      values: { stiffness_N_m_per_rad: 2.1e-6, u_stiffness_N_m_per_rad: 5e-8, length_m: 0.42, u_length_m: null },
      free: typed,
      body: 'cylinder',
      bodyValues: { mass_kg: 0.02, length_m: 0.05, u_length_m: 1e-4, diameter_m: 0.008 },
      lengths: [
        { origin: 'typed', values: { length_m: 0.1, u_length_m: 5e-4, f0_Hz: 0.9 }, segment: '' },
        { origin: 'segment', values: { length_m: 0.2 }, segment: 's12' },
      ],
    };
    const fibre = parsed(whole);
    expect(fibre).toEqual({
      stiffness_N_m_per_rad: 2.1e-6,
      u_stiffness_N_m_per_rad: 5e-8,
      length_m: 0.42,
      run_without_field: {
        f0_Hz: 0.0704,
        u_f0_Hz: 1e-4,
        body: { shape: 'cylinder', mass_kg: 0.02, length_m: 0.05, u_length_m: 1e-4, diameter_m: 0.008 },
      },
      runs_at_lengths: [
        { length_m: 0.1, u_length_m: 5e-4, f0_Hz: 0.9 },
        { length_m: 0.2, segment: 's12' },
      ],
    });
    expect(fibreLacks(whole)).toEqual([]);
    expect(fibreOf(fibreDraft(fibre))).toEqual(fibre);
  });

  test('the magnet itself needs no other body; a body of known inertia has only that', () => {
    const run = { ...empty, free: { ...typed, origin: 'segment', segment: 's03', values: {} } } as const;
    expect(parsed(run)).toEqual({ run_without_field: { segment: 's03' } });
    const other = { ...run, body: 'inertia', bodyValues: { inertia_kg_m2: 4e-6, length_m: 0.05 } } as const;
    expect(parsed(other)).toEqual({ run_without_field: { segment: 's03', body: { inertia_kg_m2: 4e-6 } } });
    expect(fibreLacks({ ...other, bodyValues: {} })).toEqual(['the other body’s mass and dimensions']);
  });

  test('keeps what is half typed while the session agrees, and follows an undo', () => {
    const half: FibreDraft = { ...empty, values: { stiffness_N_m_per_rad: 1e-6 }, lengths: [NEW_LENGTH] };
    expect(syncedDraft(half, { stiffness_N_m_per_rad: 1e-6 })).toBe(half);
    expect(syncedDraft(half, undefined)).toEqual(empty);
  });
});
