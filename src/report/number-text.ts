import { roundedText } from '../numerics/rounding.ts';

/** What stands for a value that is not to be had. */
export const NOTHING = '–';

/** A value with its standard uncertainty, rounded to it, and its unit: `18.42 ± 0.31 µT`, `(5.764 ± 0.012) × 10⁻⁶ kg m²`. */
export function estimateText(value: number | null, u: number | null, unit: string): string {
  if (value === null || !Number.isFinite(value)) return NOTHING;
  const power = threes(Math.max(Math.abs(value), u ?? 0));
  const scale = 10 ** -power;
  const { both } = roundedText(value * scale, u === null ? null : u * scale);
  const bracketed = both.includes('±') ? `(${both})` : both;
  const tail = unit === '' ? '' : unit === '°' ? '°' : ` ${unit}`;
  // A sign of degree or per cent belongs to both numbers.
  if (power === 0) return `${unit === '°' || unit === '%' ? bracketed : both}${tail}`;
  return `${bracketed} × 10${raised(power)}${tail}`;
}

/** A number with at most so many significant digits, without zeros at its end. */
export function shortText(value: number | null, digits = 6): string {
  return value === null || !Number.isFinite(value) ? NOTHING : typedText(Number(value.toPrecision(digits)));
}

/** A number with so many significant digits, in powers of ten where it is very large or small. */
export function numberText(value: number | null, digits = 4): string {
  if (value === null || !Number.isFinite(value)) return NOTHING;
  if (value === 0) return '0';
  const [lead = '', exponent = '0'] = value.toExponential(digits - 1).split('e');
  const power = Number(exponent);
  if (power >= -3 && power < 6) return minus(value.toFixed(Math.max(0, digits - 1 - power)));
  return `${minus(lead)} × 10${raised(power)}`;
}

/**
 * A standard or expanded uncertainty alone, with two significant digits and its unit; in the power of ten in which
 * `estimateText` shows `beside`, where that is given.
 */
export function uncertaintyText(u: number, unit: string, beside: number | null = null): string {
  if (!Number.isFinite(u)) return NOTHING;
  const tail = unit === '' || unit === '°' ? unit : ` ${unit}`;
  const power = threes(Math.max(Math.abs(beside ?? 0), u));
  const rounded = Number((u * 10 ** -power).toPrecision(2));
  const text = numberText(rounded, 2);
  return `${text}${power === 0 ? '' : ` × 10${raised(power)}`}${tail}`;
}

/** A number as it was typed: all its digits, no rounding, a true minus sign. */
export function typedText(value: number | null): string {
  if (value === null) return NOTHING;
  const [lead = '', exponent] = String(value).split('e');
  return exponent === undefined ? minus(lead) : `${minus(lead)} × 10${raised(Number(exponent))}`;
}

/** A whole number of degrees of freedom, or infinity where there is no limit. */
export function dofText(dof: number | null): string {
  return dof === null
    ? '∞'
    : dof >= 10_000
      ? '> 9999'
      : dof >= 100
        ? String(Math.floor(dof))
        : minus(dof.toFixed(1).replace(/\.0$/, ''));
}

/** A share as per cent with one decimal. */
export function percentText(share: number | null): string {
  return share === null || !Number.isFinite(share) ? NOTHING : `${minus((100 * share).toFixed(1))} %`;
}

/** The power of ten, a multiple of three, that brings a value into ordinary size; 0 where it is there. */
function threes(size: number): number {
  if (!(size > 0) || (size >= 1e-3 && size < 1e6)) return 0;
  return 3 * Math.floor(Math.log10(size) / 3);
}

function raised(power: number): string {
  return [...String(power)].map((c) => (c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(c)])).join('');
}

function minus(text: string): string {
  return text.replace('-', '\u2212');
}
