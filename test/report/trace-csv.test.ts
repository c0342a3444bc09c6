import { describe, expect, it } from 'vitest';
import { traceCsv, traceFileName, traceFileNames } from '../../src/report/trace-csv.ts';
import { parseTraceCsv } from '../../src/report/trace-reading.ts';
import { parseRfc4180, rowsByName } from './support/rfc4180.ts';

const trace = {
  time_s: Float64Array.of(3.2, 3.2333, 3.2667),
  angle: Float64Array.of(Math.PI / 4, -0.1, 0.1 / 3),
  unit: 'rad' as const,
  x_px: Float64Array.of(640.25, 640.5, 640.75),
  y_px: Float64Array.of(360, 360.125, 360.25),
  quality: Float64Array.of(1, 0.5, 0.25),
  frame_index: Int32Array.of(96, 97, 98),
};
const fit = {
  fitted: Float64Array.of(Math.PI / 4, -0.09, 0.03),
  residual: Float64Array.of(0, -0.01, 0.1 / 3 - 0.03),
  usedRows: Uint8Array.of(1, 0, 1),
};

describe('a trace file', () => {
  it('has its columns in order, angles in degrees', () => {
    const text = traceCsv(trace, fit);
    expect(parseRfc4180(text)[0]?.join(' ')).toBe(
      'time_s angle_deg x_px y_px quality frame_index fitted_deg residual_deg used',
    );
    const rows = rowsByName(text);
    expect(rows).toHaveLength(3);
    expect(rows[0]).toMatchObject({ time_s: '3.2', angle_deg: '45', frame_index: '96', fitted_deg: '45', used: '1' });
    expect(Number(rows[1]?.residual_deg)).toBeCloseTo(-0.5729577951308232, 14);
    expect(rows[1]?.used).toBe('0');
  });

  it('calls the motion position_px where it is not scaled to degrees', () => {
    const text = traceCsv({ ...trace, unit: 'px' }, fit);
    expect(parseRfc4180(text)[0]?.slice(1, 2)).toEqual(['position_px']);
    expect(parseRfc4180(text)[0]?.slice(6)).toEqual(['fitted_px', 'residual_px', 'used']);
    expect(rowsByName(text)[1]?.position_px).toBe('-0.1');
  });

  it('leaves the fit’s columns empty where there is none', () => {
    expect(rowsByName(traceCsv(trace, null))[2]).toMatchObject({ fitted_deg: '', residual_deg: '', used: '' });
  });

  it('is read back as it was written', () => {
    const curves = parseTraceCsv(traceCsv(trace, fit), 's01');
    expect(curves?.time_s).toEqual(trace.time_s);
    expect(curves?.angle).toEqual(trace.angle.map((a) => a * (180 / Math.PI)));
    expect(Array.from(curves?.used ?? [])).toEqual([1, 0, 1]);
    expect(parseTraceCsv(traceCsv(trace, null), 's01')).toMatchObject({ fitted: null, residual: null, used: null });
  });

  it.each([
    ['an empty file', ''],
    ['another table', 'a,b\r\n1,2\r\n'],
    ['words for numbers', 'time_s,angle_deg\r\n1,two\r\n'],
    ['time running backwards', 'time_s,angle_deg\r\n2,1\r\n1,1\r\n'],
  ])('is refused when it is %s', (_, text) => {
    expect(parseTraceCsv(text, 's01')).toBeNull();
  });
});

describe('the name of a trace file', () => {
  it.each([
    ['s01', 'trace-s01.csv'],
    ['S01', 'trace-S01.csv'],
    ['rising 0.5 A', 'trace-rising%200.5%20A.csv'],
    ['../../etc/passwd', 'trace-..%2F..%2Fetc%2Fpasswd.csv'],
    ['a\\b:c*d?e"f<g>h|i', 'trace-a%5Cb%3Ac%2Ad%3Fe%22f%3Cg%3Eh%7Ci.csv'],
    ['50%', 'trace-50%25.csv'],
    ['ä', 'trace-%C3%A4.csv'],
    ['CON', 'trace-CON.csv'],
  ])('of segment %s is %s', (id, name) => {
    expect(traceFileName(id)).toBe(name);
  });

  it('is short enough for any file system and still its own', () => {
    const long = '磁'.repeat(64);
    expect(traceFileName(long).length).toBeLessThan(255);
    expect(traceFileName(long)).not.toBe(traceFileName(`${'磁'.repeat(63)}石`));
  });

  it('differs from every other one even where capitals don’t count', () => {
    const ids = ['a', 'A', 'b', 'Ab', 'aB', 'AB', '%41', 'É', 'é'];
    const names = [...traceFileNames(ids).values()].map((name) => name.toLowerCase());
    expect(new Set(names).size).toBe(ids.length);
    expect(traceFileNames(['S01', 'S02']).get('S01')).toBe('trace-S01.csv');
  });
});
