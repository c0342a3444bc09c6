/** A ring-down as far as the bound of its frequency depends on it. */
export interface DampedRecord {
  /** Amplitude at the start and scatter of one sample, in one unit. */
  readonly amplitude: number;
  readonly noise: number;
  /** Samples per second. */
  readonly rate_Hz: number;
  readonly duration_s: number;
  /** Amplitude falls as exp(-gamma t); 0 allowed. */
  readonly gamma_per_s: number;
}

/**
 * Cramér-Rao bound of the frequency of a damped sine with white noise, Hz: with x = 2γT and E = exp(-x),
 * var(ω) = (2σ² / (A² fs)) (2γ)³ (1 - E) / (1 - (2 + x²) E + E²) for many swings, amplitude, damping, frequency and phase unknown
 * (equivalent to Yao and Pandit, IEEE Trans. Signal Process. 43 (1995) 878); its limit for γ → 0 is 24σ² / (A² fs T³).
 */
export function uDampedFrequency({ amplitude, noise, rate_Hz, duration_s, gamma_per_s }: DampedRecord): number {
  const x = 2 * gamma_per_s * duration_s;
  const base = (2 * noise ** 2) / (amplitude ** 2 * rate_Hz * duration_s ** 3);
  return Math.sqrt(base * shape(x)) / (2 * Math.PI);
}

/** x³ (1 - E) / (1 - (2 + x²) E + E²); for small x, where that cancels, as x³ (e^x - 1) / ((2 sinh(x/2) - x) (2 sinh(x/2) + x)); 12 at 0. */
function shape(x: number): number {
  if (x === 0) return 12;
  if (x >= 0.5) {
    const e = Math.exp(-x);
    return (x ** 3 * (1 - e)) / (1 - (2 + x * x) * e + e * e);
  }
  const gap = (x ** 3 / 24) * (1 + (x * x) / 80 + x ** 4 / 13440 + x ** 6 / 3870720);
  return (x ** 3 * Math.expm1(x)) / (gap * (2 * Math.sinh(x / 2) + x));
}
