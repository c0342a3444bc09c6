import type { Series } from './series.ts';

/** Slowest lines looked at: 1, 2 and 3 cycles in the whole record. The fit takes away part of the first with the rest direction and its drift. */
const LINES = 3;
/** What is below one cycle can't be seen. Wander is stronger there (as a random walk's, 1/f², it would be); it is taken to be this many times as strong. */
const BELOW = 5;

/**
 * Standard uncertainty of the mean of a record from its slow wander: from the mean power of its three slowest lines,
 * less what noise of variance `level` per sample has there.
 */
export function wanderOfMean({ time_s, value }: Series, level: number): number {
  const n = time_s.length;
  const duration = (time_s[n - 1]! * n) / (n - 1);
  let power = 0;
  for (let k = 1; k <= LINES; k++) {
    let re = 0;
    let im = 0;
    for (let i = 0; i < n; i++) {
      const phase = (2 * Math.PI * k * time_s[i]!) / duration;
      re += value[i]! * Math.cos(phase);
      im += value[i]! * Math.sin(phase);
    }
    power += (re * re + im * im) / (n * n);
  }
  return Math.sqrt(Math.max(0, BELOW * (power / LINES - (2 * level) / n)));
}
