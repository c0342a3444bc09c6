import type { Motion } from './motion.ts';

/** Amplitude of an oscillation over a stretch: half of peak to peak between neighbouring turning points, at the middle of each pair. */
export interface Envelope {
  readonly time_s: readonly number[];
  readonly amplitude_rad: readonly number[];
}

/** Amplitudes of the twist between two times, from all turning points there. */
export function envelopeOf(motion: Motion, from_s: number, to_s: number): Envelope {
  const turns: (readonly [number, number])[] = [];
  const first = Math.max(1, Math.ceil(from_s / motion.step_s));
  const last = Math.min(motion.angle_rad.length - 2, Math.floor(to_s / motion.step_s));
  for (let i = first; i < last; i++) {
    const before = motion.rate_rad_per_s[i]!;
    const after = motion.rate_rad_per_s[i + 1]!;
    if (before === 0 || before * after >= 0) continue;
    const s = before / (before - after);
    // Between the grid points the rate is nearly straight, so the angle gains a quarter of its product with the time.
    turns.push([(i + s) * motion.step_s, motion.angle_rad[i]! + 0.5 * before * s * motion.step_s]);
  }
  const time_s: number[] = [];
  const amplitude_rad: number[] = [];
  for (let i = 0; i + 1 < turns.length; i++) {
    time_s.push((turns[i]![0] + turns[i + 1]![0]) / 2);
    amplitude_rad.push(Math.abs(turns[i + 1]![1] - turns[i]![1]) / 2);
  }
  return { time_s, amplitude_rad };
}

/** Amplitude at a time, straight in its logarithm between (and beyond) the known ones; null with fewer than two known. */
export function amplitudeAt(envelope: Envelope, time_s: number): number | null {
  const { time_s: times, amplitude_rad: amplitudes } = envelope;
  if (times.length < 2) return null;
  let i = 0;
  while (i + 2 < times.length && times[i + 1]! < time_s) i++;
  const share = (time_s - times[i]!) / (times[i + 1]! - times[i]!);
  return Math.exp(Math.log(amplitudes[i]!) * (1 - share) + Math.log(amplitudes[i + 1]!) * share);
}

/** Mean of the amplitude squared between two times, rad^2; null with fewer than two known amplitudes. */
export function meanSquareAmplitude(envelope: Envelope, from_s: number, to_s: number): number | null {
  const pieces = 400;
  let sum = 0;
  for (let k = 0; k < pieces; k++) {
    const amplitude = amplitudeAt(envelope, from_s + ((k + 0.5) / pieces) * (to_s - from_s));
    if (amplitude === null) return null;
    sum += amplitude * amplitude;
  }
  return sum / pieces;
}
