import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { readDecimal } from '../../../../app/window/numbers/decimal-entry.ts';
import { readList } from '../../../../app/window/numbers/list-entry.ts';

const rule = { name: 'Current', unit: 'A' };
const value = (typed: string) => {
  const read = readDecimal(typed, rule);
  return read.kind === 'number' ? read.value : read.kind;
};

describe('a number as people type it', () => {
  test.each([
    ['0.25', 0.25],
    ['0,25', 0.25],
    ['-0,25', -0.25],
    ['\u22120.25', -0.25],
    ['\u20130,25', -0.25],
    ['+1', 1],
    ['.5', 0.5],
    ['5,', 5],
    ['0.25 A', 0.25],
    ['0,25A', 0.25],
    ['1 234,5', 1234.5],
    ['1\u202f234,5', 1234.5],
    ['1.234,5', 1234.5],
    ['1,234.5', 1234.5],
    ['2e-5', 2e-5],
    ['-0', 0],
  ])('%s', (typed, expected) => {
    expect(value(typed)).toBe(expected);
  });

  test.each(['much', '1,2,3', '1.2.3', '12,34.5', '--1', '0x10', '1 V', 'Infinity', '1,23.4,5'])(
    '%s is refused',
    (typed) => {
      expect(value(typed)).toBe('mistake');
    },
  );

  test('nothing is nothing', () => {
    expect(value('  ')).toBe('empty');
    expect(value('A')).toBe('empty');
  });

  test('bounds are said with the unit', () => {
    const read = readDecimal('-1', { name: 'Radius', unit: 'mm', least: 0, aboveLeast: true });
    expect(read).toEqual({ kind: 'mistake', message: 'Radius must be above 0 mm.' });
    expect(readDecimal('91', { name: 'Elevation', unit: '°', most: 90 })).toEqual({
      kind: 'mistake',
      message: 'Elevation must be 90 ° at most.',
    });
  });

  test('comma and point mean the same for every number', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (x) => {
        const text = x.toFixed(6);
        expect(value(text.replace('.', ','))).toBe(value(text));
        expect(value(text.replace('-', '\u2212'))).toBe(Number(text) === 0 ? 0 : Number(text));
      }),
    );
  });
});

test('a list of numbers is parted by semicolons, spaces, or commas with a space', () => {
  expect(readList('0; 0,1; 0,2')).toEqual([0, 0.1, 0.2]);
  expect(readList('0, 0.1, 0.2')).toEqual([0, 0.1, 0.2]);
  expect(readList('0 0,1\n0,2')).toEqual([0, 0.1, 0.2]);
  expect(readList('0; x')).toBeNull();
  expect(readList('')).toEqual([]);
});
