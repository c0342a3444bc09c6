import { describe, expect, it } from 'vitest';
import { resultsTable } from '../../src/report/results-table.ts';
import { width } from '../../src/report/text-table.ts';
import { exampleResults, withSegment } from './support/results-fixture.ts';

const lines = (results = exampleResults()) => resultsTable(results).split('\n');
const rowOf = (id: string, results = exampleResults()) => lines(results).find((line) => line.startsWith(id)) ?? '';

describe('the table on the terminal', () => {
  it('has no line wider than 118 columns', () => {
    for (const line of lines()) expect(width(line)).toBeLessThanOrEqual(118);
  });

  it('stays narrow with long ids, wide characters and very exact numbers', () => {
    const results = withSegment(0, {
      id: '磁'.repeat(64),
      f0_Hz: 23.456789012,
      u_f0_Hz: 1.2e-6,
      gamma_per_s: 0.00123,
      u_gamma_per_s: 0.000045,
      frames: 36_000,
      frames_used: 36_000,
    });
    for (const line of lines(results)) expect(width(line)).toBeLessThanOrEqual(120);
  });

  it('shows each segment with values rounded to their uncertainties', () => {
    const row = rowOf(
      's01',
      withSegment(0, { f0_Hz: 0.312344, u_f0_Hz: 0.000021, gamma_per_s: 0.01234, u_gamma_per_s: 0.00031 }),
    );
    expect(row).toContain('0.312344 ± 0.000021');
    expect(row).toContain('0.01234 ± 0.00031');
    expect(row).toContain('measured');
    expect(row).toContain('829/834');
    expect(row).toMatch(/9\.\d → 6\.\d/);
    expect(row).toContain('−12.41');
  });

  it('aligns currents at their decimal points, with true minus signs', () => {
    const results = withSegment(0, { current_A: -0.325 });
    const ends = results.segments.map((s) => {
      const row = rowOf(s.id, results);
      return row.indexOf(s.status) - (row.slice(4).search(/\.\d{3} /) + 4);
    });
    expect(new Set(ends)).toEqual(new Set([6]));
    expect(rowOf('s01', results)).toContain('−0.325');
  });

  it('shows dashes for what a segment doesn’t have', () => {
    expect(rowOf('s05')).toMatch(/^s05 +0\.6 +unmeasured +– +– +– +– +– +– +0\/834$/);
    expect(rowOf('s01', withSegment(0, { current_A: null }))).toContain('not typed');
  });

  it('says each check as a sentence after its segment, faults first', () => {
    const text = resultsTable(exampleResults());
    expect(text).toContain('s05: No bar was found in the region of view v1');
    expect(text.indexOf('s05: No bar')).toBeLessThan(text.indexOf('s03: The swing'));
    expect(text.indexOf('s03: The swing')).toBeLessThan(text.indexOf('s10: The amplitude'));
  });

  it('shows the reduction with uncertainties and units', () => {
    const text = resultsTable(exampleResults());
    expect(text).toMatch(/Ambient horizontal field +B +18\.42 ± 0\.31 µT/);
    expect(text).toMatch(/Magnetic moment +m +0\.9120 ± 0\.0051 A m²/);
    expect(text).toMatch(/Moment of inertia +J +\(5\.685 ± 0\.019\) × 10⁻⁶ kg m²/);
    expect(text).toMatch(/Coil constant +k +743\.3 ± 2\.5 µT\/A/);
  });

  it('names what is not to be had and says why', () => {
    const text = resultsTable(exampleResults());
    expect(text).toMatch(/Not to be had: misalignment, fibre stiffness\./);
    expect(text).toContain('Fibre stiffness and field can’t be told apart');
    expect(text).toContain('s10 is left out: left out by the user: meter was still settling');
  });

  it('lets no control character of a file reach the terminal', () => {
    const results = withSegment(0, {
      id: 'a\u001b[31m',
      checks: [{ code: 'x', severity: 'note', message: 'bell \u0007, red \u001b[31m, up\u009b1A, turned \u202e' }],
    });
    const text = resultsTable({ ...results, session: { title: '\u001b]0;title\u0007', sha256: '' } });
    // biome-ignore lint/suspicious/noControlCharactersInRegex: their absence is what is tested.
    expect(text.replaceAll('\n', '')).not.toMatch(/[\u0000-\u001f\u007f-\u009f\u202a-\u202e]/);
  });

  it('says so where there are no segments', () => {
    expect(resultsTable({ ...exampleResults(), segments: [] })).toContain('No segments.');
  });
});
