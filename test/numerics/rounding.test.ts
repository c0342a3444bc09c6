import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { roundedText } from '../../src/numerics/rounding.ts';

describe('roundedText', () => {
  it.each([
    [12.34512, 0.0123, '12.345 ± 0.012'],
    [12.34512, 0.0996, '12.35 ± 0.10'],
    [0.31234, 0.00002, '0.312340 ± 0.000020'],
    [-12.41, 0.01, '\u221212.410 ± 0.010'],
    [123456, 4321, '123500 ± 4300'],
    [1e6, 99.6, '1000000 ± 100'],
    [-0.0001, 0.25, '0.00 ± 0.25'],
    [5.4e-7, 1.26e-9, '0.0000005400 ± 0.0000000013'],
    [2.5, 25, '3 ± 25'],
  ])('%f and %f', (value, u, text) => {
    expect(roundedText(value, u).both).toBe(text);
  });

  it('gives a value without uncertainty six digits', () => {
    expect(roundedText(Math.PI, null).both).toBe('3.14159');
    expect(roundedText(Math.PI, 0).both).toBe('3.14159');
    expect(roundedText(0, null).both).toBe('0');
  });

  it('moves the value by less than the place of the uncertainty', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e4, max: 1e4, noNaN: true }),
        fc.double({ min: 1e-8, max: 1e4, noNaN: true }),
        (value, u) => {
          const text = roundedText(value, u);
          expect(Math.abs(Number(text.value.replace('\u2212', '-')) - value)).toBeLessThanOrEqual(0.0501 * u + 1e-12);
          expect(Math.abs(Number(text.u) / u - 1)).toBeLessThanOrEqual(0.0501);
        },
      ),
    );
  });
});
