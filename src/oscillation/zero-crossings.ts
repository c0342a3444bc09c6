import { linearLeastSquares } from '../numerics/linear-least-squares.ts';
import type { Series } from './series.ts';

/** Times of successive passages through zero, alternating up and down. */
export interface Crossings {
  readonly time_s: Float64Array;
  /** Half cycles from the first passage, counted by the period given (a gap may hide some). */
  readonly number: Float64Array;
}

/** Frequency by counting, and how it stands to a model's. */
export interface CrossingResult {
  /** Mean frequency from a straight line through passages against their number. */
  readonly frequency_Hz: number;
  readonly u_Hz: number;
  readonly dof: number;
  /** The same from the model's curve at the same instants, so that a chirp is no difference. */
  readonly model_Hz: number;
}

/**
 * Passages through zero of `value`, located by a straight line through the samples within a tenth of a period; `amplitude` guards against
 * noise: the curve must have swung past 0.3 of it since the last one. `valid` marks the rows where a passage may be counted at all.
 */
export function crossings(series: Series, period_s: number, amplitude: (t: number) => number): Crossings {
  const { time_s, value } = series;
  const times: number[] = [];
  let armed = 0;
  let last = -1;
  for (let i = 0; i < value.length; i++) {
    const threshold = 0.3 * amplitude(time_s[i]!);
    if (Math.abs(value[i]!) < threshold) continue;
    const sign = Math.sign(value[i]!);
    if (armed !== 0 && sign !== armed && time_s[i]! - time_s[last]! < 0.4 * period_s) {
      const at = locate(series, last, i, period_s);
      if (at !== null) times.push(at);
    }
    armed = sign;
    last = i;
  }
  const time = Float64Array.from(times);
  return { time_s: time, number: time.map((t) => Math.round((2 * (t - time[0]!)) / period_s)) };
}

/** Crossing between the rows `from` and `to`, which lie on different sides. */
function locate({ time_s, value }: Series, from: number, to: number, period_s: number): number | null {
  let before = from;
  while (before + 1 < to && Math.sign(value[before + 1]!) === Math.sign(value[from]!)) before++;
  const after = before + 1;
  const share = value[before]! / (value[before]! - value[after]!);
  const guess = time_s[before]! + share * (time_s[after]! - time_s[before]!);
  let n = 0;
  let st = 0;
  let sv = 0;
  let stt = 0;
  let stv = 0;
  for (let i = from; i <= to; i++) {
    const t = time_s[i]! - guess;
    if (Math.abs(t) > 0.1 * period_s && i !== before && i !== after) continue;
    n++;
    st += t;
    sv += value[i]!;
    stt += t * t;
    stv += t * value[i]!;
  }
  const determinant = n * stt - st * st;
  const slope = (n * stv - st * sv) / determinant;
  if (!(determinant > 0) || slope === 0 || !Number.isFinite(slope)) return null;
  return guess - (sv - slope * st) / n / slope;
}

/**
 * Compares passages of the data with those of a model's curve sampled at the same instants. A difference between up and down
 * passages (an offset) is fitted along with the period. Null for fewer than five common passages.
 */
export function compareCrossings(data: Crossings, model: Crossings, period_s: number): CrossingResult | null {
  const rows: { number: number; data: number; model: number }[] = [];
  let j = 0;
  for (let i = 0; i < data.time_s.length; i++) {
    while (j < model.time_s.length && model.time_s[j]! < data.time_s[i]! - period_s / 4) j++;
    if (j >= model.time_s.length) break;
    if (Math.abs(model.time_s[j]! - data.time_s[i]!) < period_s / 4) {
      rows.push({ number: model.number[j]!, data: data.time_s[i]!, model: model.time_s[j]! });
    }
  }
  if (rows.length < 5) return null;
  const columns = [
    Float64Array.from(rows, () => 1),
    Float64Array.from(rows, (row) => row.number),
    Float64Array.from(rows, (row) => (row.number % 2 === 0 ? 1 : -1)),
  ];
  const line = (pickTime: (row: (typeof rows)[number]) => number) =>
    linearLeastSquares(columns, Float64Array.from(rows, pickTime));
  const seen = line((row) => row.data);
  const expected = line((row) => row.model);
  const difference = line((row) => row.data - row.model);
  if (seen === null || expected === null || difference === null) return null;
  const half = seen.parameters[1]!;
  const scatter = Math.sqrt((difference.sumOfSquares / difference.dof) * difference.cofactor[4]!);
  return {
    frequency_Hz: 1 / (2 * half),
    u_Hz: scatter / (2 * half * half),
    dof: difference.dof,
    model_Hz: 1 / (2 * expected.parameters[1]!),
  };
}
