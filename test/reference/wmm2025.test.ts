import { describe, expect, it } from 'vitest';
import { expectedField } from '../../src/reduction/expected-field.ts';

/**
 * World Magnetic Model 2025, official test values (report table 6, NOAA/NCEI and British Geological Survey): height above the
 * ellipsoid in km, latitude, longitude, then X, Y, Z, H in nT, inclination and declination in degrees. Dates are 2025.0 and
 * 2027.5; the day that stands for the latter is 2 July.
 */
const table = [
  ['2025-01-01', 0, 80, 0, 6521.6, 145.9, 54791.5, 6523.2, 83.21, 1.28],
  ['2025-01-01', 0, 0, 120, 39677.8, -109.6, -10580.2, 39677.9, -14.93, -0.16],
  ['2025-01-01', 0, -80, 240, 6117.5, 15751.9, -52022.5, 16898.1, -72.0, 68.78],
  ['2025-01-01', 100, 80, 0, 6216.0, 92.4, 52598.8, 6216.7, 83.26, 0.85],
  ['2025-01-01', 100, 0, 120, 37688.6, -96.2, -10152.1, 37688.7, -15.08, -0.15],
  ['2025-01-01', 100, -80, 240, 5907.6, 14780.3, -49540.7, 15917.1, -72.19, 68.21],
  ['2027-07-02', 0, 80, 0, 6500.8, 294.5, 54869.4, 6507.5, 83.24, 2.59],
  ['2027-07-02', 0, 0, 120, 39701.6, -167.4, -10381.8, 39702.0, -14.65, -0.24],
  ['2027-07-02', 0, -80, 240, 6200.7, 15730.3, -51783.7, 16908.3, -71.92, 68.49],
  ['2027-07-02', 100, 80, 0, 6196.7, 233.8, 52670.5, 6201.1, 83.29, 2.16],
  ['2027-07-02', 100, 0, 120, 37711.5, -148.7, -9969.8, 37711.8, -14.81, -0.23],
  ['2027-07-02', 100, -80, 240, 5984.0, 14760.1, -49317.7, 15927.0, -72.1, 67.93],
] as const;

function fieldAt(date: string, height_m: number, latitude_deg: number, longitude_deg: number) {
  const outcome = expectedField({ date, height_m, latitude_deg, longitude_deg });
  if (!outcome.ok) throw new Error(outcome.reason);
  return outcome.field;
}

describe('World Magnetic Model 2025', () => {
  it('gives the official test values to their rounding', () => {
    for (const [date, km, latitude, longitude, , , z, h, inclination, declination] of table) {
      const field = fieldAt(date, km * 1000, latitude, longitude);
      // Noon of the day stands for the day: half a day of secular variation (below 0.15 nT) on top of the rounding.
      expect(Math.abs(field.horizontal_T * 1e9 - h)).toBeLessThan(0.2);
      expect(Math.abs(field.vertical_T * 1e9 - z)).toBeLessThan(0.2);
      expect(Math.abs(field.inclination_deg - inclination)).toBeLessThan(0.006);
      expect(Math.abs(field.declination_deg - declination)).toBeLessThan(0.006);
    }
  });

  it('gives a high-precision row', () => {
    // NCEI's WMM2025 test values: 2025.0, 65 km, 43 N 93 E: H 24300.764692, Z 50037.923998 nT.
    const field = fieldAt('2025-01-01', 65_000, 43, 93);
    expect(Math.abs(field.horizontal_T * 1e9 - 24300.764692)).toBeLessThan(0.1);
    expect(Math.abs(field.vertical_T * 1e9 - 50037.923998)).toBeLessThan(0.15);
  });

  it('carries WMM2025 on to the end of 2029, where the package alone would refuse', () => {
    const before = fieldAt('2029-11-12', 0, 51.5, -0.1);
    const after = fieldAt('2029-11-14', 0, 51.5, -0.1);
    const last = fieldAt('2029-12-31', 0, 51.5, -0.1);
    expect(last.model).toContain('2025');
    // Two days, and forty-nine: the field changes evenly.
    const perDay = (after.horizontal_T - before.horizontal_T) / 2;
    expect((last.horizontal_T - before.horizontal_T) / 49 / perDay).toBeCloseTo(1, 2);
  });

  it('gives WMM2020 for its years', () => {
    // Official WMM2020 values, 2020.0 at 0 km, 80 N 0 E: H 6572.0, Z 54606.0 nT.
    const field = fieldAt('2020-01-01', 0, 80, 0);
    expect(Math.abs(field.horizontal_T * 1e9 - 6572.0)).toBeLessThan(0.2);
    expect(Math.abs(field.vertical_T * 1e9 - 54606.0)).toBeLessThan(0.2);
  });

  it('gives a reason instead of throwing outside its years and for no place on Earth', () => {
    const place = { latitude_deg: 50, longitude_deg: 10, height_m: 0 };
    expect(expectedField({ ...place, date: '2031-01-01' })).toEqual({ ok: false, reason: 'date' });
    expect(expectedField({ ...place, date: '1999-01-01' })).toEqual({ ok: false, reason: 'date' });
    expect(expectedField({ ...place, date: 'soon' })).toEqual({ ok: false, reason: 'date' });
    expect(expectedField({ ...place, latitude_deg: 95, date: '2026-01-01' })).toEqual({ ok: false, reason: 'place' });
    expect(expectedField({ ...place, latitude_deg: 90, date: '2026-01-01' }).ok).toBe(true);
  });
});
