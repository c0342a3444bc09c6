import { expect, test } from 'vitest';
import type { Session } from '../../../../app/contract.ts';
import {
  COIL_FIELDS,
  coilKind,
  MAGNET_FIELDS,
  magnetKind,
  partOf,
  valuesOf,
  withPart,
} from '../../../../app/window/apparatus-sheet/apparatus-fields.ts';
import { coilSchema, magnetSchema } from '../../../../src/session/session.ts';

const session: Session = {
  format: 'needlebeat/session',
  version: 1,
  recordings: [{ id: 'A', file: 'a.mp4' }],
  views: [],
  segments: [],
};

test('a part of the rig is complete once its needed fields are there, without what was left empty', () => {
  expect(partOf(COIL_FIELDS.dimensions, { turns_per_coil: 124, radius_m: 0.15, spacing_m: null })).toBeNull();
  const coil = partOf(COIL_FIELDS.dimensions, {
    turns_per_coil: 124,
    radius_m: 0.15,
    u_radius_m: 0.0005,
    spacing_m: 0.15,
    u_spacing_m: null,
  });
  expect(coil).toEqual({ turns_per_coil: 124, radius_m: 0.15, u_radius_m: 0.0005, spacing_m: 0.15 });
  expect(coilSchema.safeParse(coil).success).toBe(true);
});

test('every way of describing coil and magnet makes what the session file takes', () => {
  for (const kind of ['dimensions', 'constant'] as const) {
    const part = partOf(
      COIL_FIELDS[kind],
      Object.fromEntries(
        COIL_FIELDS[kind].flatMap(({ key }) => [
          [key, 1],
          [`u_${key}`, 0.1],
        ]),
      ),
    );
    expect(coilKind(coilSchema.parse(part))).toBe(kind);
  }
  for (const kind of ['cylinder', 'bar', 'inertia'] as const) {
    const values = Object.fromEntries(
      MAGNET_FIELDS[kind].flatMap(({ key }) => [
        [key, 1],
        [`u_${key}`, 0.1],
      ]),
    );
    const part = partOf(MAGNET_FIELDS[kind], values, kind === 'inertia' ? {} : { shape: kind });
    expect(magnetKind(magnetSchema.parse(part))).toBe(kind);
    expect(valuesOf(part!)).toEqual(values);
  }
});

test('a part taken away takes an empty apparatus with it', () => {
  const with_ = withPart(session, 'fibre', { stiffness_N_m_per_rad: 1e-9 });
  expect(with_.apparatus).toEqual({ fibre: { stiffness_N_m_per_rad: 1e-9 } });
  expect(withPart(with_, 'fibre', undefined)).toEqual(session);
});
