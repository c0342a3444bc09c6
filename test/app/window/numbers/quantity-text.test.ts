import { expect, test } from 'vitest';
import {
  commonDecimals,
  durationText,
  fixedText,
  prefixed,
  quantityText,
} from '../../../../app/window/numbers/quantity-text.ts';

test('a quantity is rounded to its standard uncertainty and carries its unit', () => {
  expect(quantityText(0.889797123, 0.0000541, 'Hz').both).toBe('0.889797 ± 0.000054\u00a0Hz');
  expect(quantityText(2.0631e-5, 1.234e-6, 'µT', 1e6)).toMatchObject({ value: '20.6', u: '± 1.2', unit: 'µT' });
  expect(quantityText(-7.98, 0.015, '°').value).toBe('\u22127.980');
  expect(quantityText(null, 1, 'Hz').both).toBe('–');
});

test('numbers without uncertainty have a true minus sign and no negative zero', () => {
  expect(fixedText(-1.25, 1)).toBe('\u22121.3');
  expect(fixedText(-0.001, 1)).toBe('0.0');
  expect(fixedText(null, 2)).toBe('–');
});

test('prefixes bring a value between 1 and 1000', () => {
  expect(prefixed(2.1e-9, 'N m/rad').unit).toBe('nN m/rad');
  expect(2.1e-9 * prefixed(2.1e-9, 'N m/rad').factor).toBeCloseTo(2.1, 12);
  expect(prefixed(0, 'T')).toEqual({ factor: 1, unit: 'T' });
});

test('currents in a column get the decimals that the longest was typed with', () => {
  expect(commonDecimals([0, 0.05, 0.6, null, -0.24])).toBe(2);
  expect(commonDecimals([2e-5])).toBe(5);
  expect(commonDecimals([null])).toBe(0);
});

test('durations are said in minutes and seconds', () => {
  expect(durationText(4.4)).toBe('4 s');
  expect(durationText(80)).toBe('1 min 20 s');
  expect(durationText(120)).toBe('2 min');
});
