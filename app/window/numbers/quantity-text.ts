import { roundedText } from '../../../src/numerics/rounding.ts';

/** Shown where a number could not be had. */
export const NOTHING = '–';

/** A value with its standard uncertainty and unit as text; the parts are for columns that align, `both` is for a sentence. */
export interface QuantityText {
  readonly value: string;
  /** `± 0.012`, or empty. */
  readonly u: string;
  readonly unit: string;
  readonly both: string;
}

/**
 * Text of a quantity, rounded to its standard uncertainty; a dash where `value` is null.
 * @param factor the number shown is `value * factor`, e.g. 1e6 for teslas shown in µT.
 */
export function quantityText(
  value: number | null | undefined,
  u: number | null | undefined,
  unit: string,
  factor = 1,
): QuantityText {
  if (value === null || value === undefined || !Number.isFinite(value))
    return { value: NOTHING, u: '', unit: '', both: NOTHING };
  const text = roundedText(value * factor, u === null || u === undefined ? null : u * factor);
  return {
    value: text.value,
    u: text.u === '' ? '' : `± ${text.u}`,
    unit,
    both: unit === '' ? text.both : `${text.both}\u00A0${unit}`,
  };
}

/** A number without uncertainty to so many decimals, with a true minus sign; a dash where it is null. */
export function fixedText(value: number | null | undefined, decimals: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return NOTHING;
  const text = value.toFixed(decimals);
  return (/^-0\.?0*$/.test(text) ? text.slice(1) : text).replace('-', '\u2212');
}

/** The shortest decimal text of a number, with a true minus sign: what an entry field shows. */
export function entryText(value: number | null | undefined): string {
  if (value === null || value === undefined) return '';
  return String(Number(value.toPrecision(12))).replace('-', '\u2212');
}

const STEPS: readonly (readonly [number, string])[] = [
  [1e9, 'G'],
  [1e6, 'M'],
  [1e3, 'k'],
  [1, ''],
  [1e-3, 'm'],
  [1e-6, 'µ'],
  [1e-9, 'n'],
  [1e-12, 'p'],
];

/** Factor and prefixed unit that bring a value between 1 and 1000, e.g. 2.1e-5 T as 21 µT: shown = value * factor. */
export function prefixed(value: number, unit: string): { readonly factor: number; readonly unit: string } {
  const size = Math.abs(value);
  const step = size === 0 ? ([1, ''] as const) : (STEPS.find(([least]) => size >= least) ?? ([1e-12, 'p'] as const));
  return { factor: 1 / step[0], unit: `${step[1]}${unit}` };
}

/** Bytes as kB or MB, decimal. */
export function bytesText(bytes: number): string {
  if (bytes < 1e6) return `${(bytes / 1e3).toFixed(0)} kB`;
  return bytes < 1e9 ? `${(bytes / 1e6).toFixed(1)} MB` : `${(bytes / 1e9).toFixed(2)} GB`;
}

/** A length of time in words that fit a progress line: `4 s`, `1 min 20 s`. */
export function durationText(seconds: number): string {
  const whole = Math.max(0, Math.round(seconds));
  if (whole < 60) return `${whole} s`;
  return whole % 60 === 0 ? `${whole / 60} min` : `${Math.floor(whole / 60)} min ${whole % 60} s`;
}

/** The decimals that show every one of the numbers as it was typed, so that they align in a column; six at most. */
export function commonDecimals(values: readonly (number | null)[]): number {
  return values.reduce<number>((most, value) => {
    const [, exponent] = value === null ? [] : String(Number(value.toPrecision(12))).split('e');
    const decimals =
      value === null
        ? 0
        : (String(Number(value.toPrecision(12)))
            .split('e')[0]
            ?.split('.')[1]?.length ?? 0);
    return Math.min(6, Math.max(most, decimals - Number(exponent ?? 0)));
  }, 0);
}
