import { describe, expect, it } from 'vitest';
import { blankRest, restAt } from '../../src/reduction/bar-on-fibre.ts';
import { magneticConstant_N_per_A2 } from '../../src/reduction/loop-field.ts';

/** f0² of a bar without fibre, in units of the field: its size. */
function square(along: number, across: number, current = 0): number {
  const rest = blankRest();
  const bar = { slope: 1, along_A: along, across_A: across, fibre_Hz2: 0, twist_rad: 0 };
  expect(restAt(current, bar, 'with the field', rest)).toBe(true);
  return rest.y;
}

describe('competition problems', () => {
  it('KöMaL P.4623 (March 2014): frequency goes with the root of the field’s part across the axle', () => {
    // Dip 60°: 24 swings a minute about a vertical axle. Printed: 32 about the horizontal axle along the meridian, 34 across it.
    const dip = Math.PI / 3;
    const horizontal = square(Math.cos(dip), 0);
    const along = 24 * Math.sqrt(square(Math.sin(dip), 0) / horizontal);
    const across = 24 * Math.sqrt(square(Math.cos(dip), Math.sin(dip)) / horizontal);
    expect(along).toBeCloseTo(31.586, 3);
    expect(across).toBeCloseTo(33.941, 3);
    expect(Math.round(along)).toBe(32);
    expect(Math.round(across)).toBe(34);
  });

  it('KöMaL P.4162 (April 2009): a coil across the meridian adds as a vector', () => {
    // 10 swings a minute in the horizontal field, 51 with a long coil of 100 turns on 25 cm at 1 A; long-coil result
    // 1.93397e-5 T (computed from the printed numbers; the official solution was not seen).
    const coil = magneticConstant_N_per_A2 * (100 / 0.25);
    const field = coil / Math.sqrt((51 / 10) ** 4 - 1);
    expect(Math.abs(field / 1.93397e-5 - 1)).toBeLessThan(1e-5);
    // The field of the place lies across the coil's axis here; the coil's is one current unit.
    const ratio = square(0, field / coil, 1) / square(0, field / coil, 0);
    expect(ratio ** 0.5).toBeCloseTo((51 / 10) ** 1, 9);
  });
});
