import { describe, expect, it } from 'vitest';
import { resultsCsv } from '../../src/report/results-csv.ts';
import { exampleResults, withSegment } from './support/results-fixture.ts';
import { parseRfc4180, rowsByName } from './support/rfc4180.ts';

/** The segment's keys in the order in which the contract of the results file gives them. */
const CONTRACT =
  'id recording start_s end_s current_A u_current_A sweep status f0_Hz u_f0_Hz fd_Hz u_fd_Hz gamma_per_s u_gamma_per_s amplitude_start_deg amplitude_end_deg equilibrium_deg u_equilibrium_deg cycles frames frames_lost residual_rms_deg swing_Hz swing_share checks'.split(
    ' ',
  );

const noteOf = (note: string) => rowsByName(resultsCsv(withSegment(0, { note })))[0]?.note;

describe('results.csv', () => {
  it('has the names of the contract in their order, then the added ones, each once', () => {
    const [header = []] = parseRfc4180(resultsCsv(exampleResults()));
    expect(header.slice(0, CONTRACT.length)).toEqual(CONTRACT);
    expect(new Set(header).size).toBe(header.length);
    expect([...header].sort()).toEqual(Object.keys(exampleResults().segments[0] ?? {}).sort());
  });

  it('has one record per segment and holds every number to the last digit', () => {
    const results = exampleResults();
    const rows = rowsByName(resultsCsv(results));
    expect(rows.map((row) => row.id)).toEqual(results.segments.map((s) => s.id));
    for (const [i, segment] of results.segments.entries()) {
      for (const [name, value] of Object.entries(segment)) {
        if (typeof value === 'number') expect(Number(rows[i]?.[name])).toBe(value);
        if (value === null) expect(rows[i]?.[name]).toBe('');
      }
    }
  });

  it('writes very large and small numbers with a point and no grouping', () => {
    const results = withSegment(0, { u_f0_Hz: 1.25e-9, dof_f0: 1.5e21, current_A: -0.25 });
    const [row] = rowsByName(resultsCsv(results));
    expect([row?.u_f0_Hz, row?.dof_f0, row?.current_A]).toEqual(['1.25e-9', '1.5e+21', '-0.25']);
  });

  it('writes nothing for null and for numbers that are not finite', () => {
    const [row] = rowsByName(
      resultsCsv(withSegment(0, { current_A: null, dof_f0: Number.POSITIVE_INFINITY, sweep: null })),
    );
    expect([row?.current_A, row?.dof_f0, row?.sweep]).toEqual(['', '', '']);
  });

  it('joins the codes of checks by semicolons', () => {
    const check = (code: string) => ({
      code,
      severity: 'note' as const,
      message: 'A sentence, with a comma; and more.',
    });
    const [row] = rowsByName(resultsCsv(withSegment(0, { checks: [check('few_cycles'), check('swing_close')] })));
    expect(row?.checks).toBe('few_cycles;swing_close');
  });

  it.each([
    ['quotes', 'he said "no"'],
    ['commas', 'a, b'],
    ['CRLF', 'one\r\ntwo'],
    ['a lone LF', 'one\ntwo'],
    ['a lone CR', 'one\rtwo'],
    ['a quote alone', '"'],
    ['blanks at both ends', '  x  '],
    ['other scripts', 'Übung Ωµ 磁石 🧲'],
  ])('keeps %s in a note', (_, note) => {
    expect(noteOf(note)).toBe(note);
  });

  it.each(['=1+2', '+SUM(A1)', '-cmd', '@x', '\t=1', '＝1'])('keeps a spreadsheet from computing %j', (note) => {
    expect(noteOf(note)).toBe(`'${note}`);
  });

  it('leaves ids and notes that are plain numbers alone', () => {
    expect(noteOf('-1.5')).toBe('-1.5');
    const [row] = rowsByName(resultsCsv(withSegment(0, { id: '-3' })));
    expect(row?.id).toBe('-3');
  });

  it('is a header alone where there are no segments', () => {
    expect(parseRfc4180(resultsCsv({ segments: [] }))).toHaveLength(1);
  });
});
