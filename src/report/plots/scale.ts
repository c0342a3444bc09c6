/** A straight map from values to drawing units, with ticks at round values. */
export interface Scale {
  readonly low: number;
  readonly high: number;
  /** Drawing unit of a value; null where the value can't be placed (not finite; not positive on a logarithmic scale). */
  readonly place: (value: number) => number | null;
  readonly ticks: readonly Tick[];
}

/** A tick: its value and how it is written. */
export interface Tick {
  readonly value: number;
  readonly text: string;
}

/** A domain that holds all finite values with a margin (share of the span) on both sides; a single value is given room round it. */
export function domainOf(values: Iterable<number | null>, margin = 0.05): readonly [number, number] {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const value of values) {
    if (value === null || !Number.isFinite(value)) continue;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (low > high) return [0, 1];
  const span = high - low;
  // Below the last few digits of a double a span is rounding, not data: ticks could not be told apart.
  const least = 1e-12 * Math.max(Math.abs(low), Math.abs(high));
  const room = span > least ? margin * span : Math.max(least, Math.abs(low) * 0.1) || 1;
  return [low - room, high + room];
}

/**
 * Scale from `domain` to `range` (drawing units, either way up) with about `count` ticks at 1, 2 or 5 times a power of ten.
 */
export function linearScale(domain: readonly [number, number], range: readonly [number, number], count: number): Scale {
  const [low, high] = domain;
  const factor = (range[1] - range[0]) / (high - low || 1);
  return {
    low,
    high,
    place: (value) => (Number.isFinite(value) ? range[0] + (value - low) * factor : null),
    ticks: niceTicks(low, high, count),
  };
}

/** Logarithmic scale with a tick at every power of ten, thinned to about `count`; `domain` must be positive. */
export function logScale(domain: readonly [number, number], range: readonly [number, number], count: number): Scale {
  const low = Math.log10(domain[0]);
  const high = Math.log10(domain[1]);
  const factor = (range[1] - range[0]) / (high - low || 1);
  const step = Math.max(1, Math.ceil((high - low) / count));
  const ticks: Tick[] = [];
  for (let power = Math.ceil(low - 1e-9); power <= high + 1e-9; power++) {
    if (power % step === 0) ticks.push({ value: 10 ** power, text: powerText(power) });
  }
  return {
    low: domain[0],
    high: domain[1],
    place: (value) => (value > 0 && Number.isFinite(value) ? range[0] + (Math.log10(value) - low) * factor : null),
    ticks,
  };
}

/** Ticks within [low, high], about `count` of them, at whole multiples of 1, 2 or 5 times a power of ten. */
export function niceTicks(low: number, high: number, count: number): readonly Tick[] {
  if (!(high > low) || !Number.isFinite(high - low)) return [];
  const step = niceStep((high - low) / Math.max(1, count));
  const largest = Math.max(Math.abs(low), Math.abs(high));
  const ticks: Tick[] = [];
  for (let i = Math.ceil(low / step - 1e-9); i <= high / step + 1e-9; i++) {
    const value = i * step;
    ticks.push({ value, text: tickText(value, step, largest) });
  }
  return ticks;
}

/** Whichever of 1, 2, 5 times a power of ten is nearest to `rough` by ratio. */
export function niceStep(rough: number): number {
  const power = 10 ** Math.floor(Math.log10(rough));
  const lead = rough / power;
  const nice = lead < Math.SQRT2 ? 1 : lead < Math.sqrt(10) ? 2 : lead < Math.sqrt(50) ? 5 : 10;
  return nice * power;
}

/** With as many decimals as the step needs; with a power of ten where steps are very large or all values very small. */
function tickText(value: number, step: number, largest: number): string {
  if (value !== 0 && (step >= 1e5 || largest < 1e-5)) {
    const digits = Math.max(0, Math.floor(Math.log10(Math.abs(value)) + 1e-9) - Math.floor(Math.log10(step) + 1e-9));
    const [lead = '', power = ''] = value.toExponential(digits).split('e');
    return minus(`${lead.includes('.') ? lead.replace(/\.?0+$/, '') : lead}e${power.replace('+', '')}`);
  }
  return minus(value.toFixed(Math.max(0, -Math.floor(Math.log10(step) + 1e-9))));
}

function powerText(power: number): string {
  if (power >= -3 && power <= 3) return power >= 0 ? String(10 ** power) : (10 ** power).toFixed(-power);
  return `10${[...String(power)].map((c) => (c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(c)])).join('')}`;
}

function minus(text: string): string {
  return /^-[0.]+$/.test(text) ? text.slice(1) : text.replace('-', '\u2212').replace('e-', 'e\u2212');
}
