import { describe, expect, it } from 'vitest';
import {
  dofText,
  estimateText,
  numberText,
  percentText,
  shortText,
  typedText,
  uncertaintyText,
} from '../../src/report/number-text.ts';

describe('numbers as text', () => {
  it.each([
    [18.42, 0.31, 'µT', '18.42 ± 0.31 µT'],
    [-18.42, 0.31, 'µT', '−18.42 ± 0.31 µT'],
    [5.684e-6, 1.9e-8, 'kg m²', '(5.684 ± 0.019) × 10⁻⁶ kg m²'],
    [0, 2e-8, 'N m/rad', '(0 ± 20) × 10⁻⁹ N m/rad'],
    [3.21, 0.4, '°', '(3.21 ± 0.40)°'],
    [2.6, 0.17, '%', '(2.60 ± 0.17) %'],
    [0.912, null, 'A m²', '0.912000 A m²'],
    [null, null, 'T', '–'],
  ])('estimates: %d ± %d %s', (value, u, unit, text) => {
    expect(estimateText(value, u, unit)).toBe(text);
  });

  it('single numbers', () => {
    expect(numberText(0.00012345, 3)).toBe('1.23 × 10⁻⁴');
    expect(numberText(-1234.5, 3)).toBe('−1235');
    expect(numberText(999.96, 4)).toBe('1000');
    expect(numberText(0, 3)).toBe('0');
    expect(numberText(Number.NaN)).toBe('–');
    expect(shortText(0.15)).toBe('0.15');
    expect(typedText(-1e-7)).toBe('−1 × 10⁻⁷');
    expect(typedText(0.0005)).toBe('0.0005');
    expect(uncertaintyText(0.6234, 'µT')).toBe('0.62 µT');
    expect(dofText(null)).toBe('∞');
    expect(dofText(8)).toBe('8');
    expect(dofText(61.27)).toBe('61.3');
    expect(percentText(-0.0259)).toBe('−2.6 %');
  });
});
