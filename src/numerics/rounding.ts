/** A value and its standard uncertainty as text, rounded alike. */
export interface RoundedText {
  readonly value: string;
  /** Empty where there is no uncertainty. */
  readonly u: string;
  /** Both in one: `12.345 ± 0.012`; the value alone where there is no uncertainty. */
  readonly both: string;
}

/**
 * Rounds the uncertainty to `digits` significant digits (two, as JCGM 100:2008 7.2.6 recommends) and the value to the
 * same place, never in exponent notation. A `u` of zero, null or beyond numbers rounds to nothing: the value is then given with six
 * significant digits. Minus signs are true minus signs (U+2212).
 */
export function roundedText(value: number, u: number | null, digits = 2): RoundedText {
  if (u === null || !(u > 0) || !Number.isFinite(u)) {
    const text = minus(plain(value, 6));
    return { value: text, u: '', both: text };
  }
  let place = digits - 1 - Math.floor(Math.log10(u));
  // 0.0996 rounds up to 0.10: one place fewer then, so that two digits stay two.
  if (Number(u.toPrecision(digits)) >= 10 ** (digits - place)) place -= 1;
  const rounded = minus(toPlace(value, place));
  const spread = toPlace(u, place);
  return { value: rounded, u: spread, both: `${rounded} ± ${spread}` };
}

function toPlace(value: number, place: number): string {
  if (place >= 0) return value.toFixed(Math.min(place, 100));
  const unit = 10 ** -place;
  return String(Math.round(value / unit) * unit);
}

function plain(value: number, digits: number): string {
  if (value === 0 || !Number.isFinite(value)) return String(value);
  const place = digits - 1 - Math.floor(Math.log10(Math.abs(value)));
  return toPlace(value, Math.max(place, 0));
}

function minus(text: string): string {
  return /^-[0.]*$/.test(text) ? text.slice(1) : text.replace('-', '\u2212');
}
