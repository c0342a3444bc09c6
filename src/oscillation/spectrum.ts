import FFT from 'fft.js';

/** A line of a spectrum: frequency and amplitude (half of peak to peak, in the unit of the data) if it lasted undamped all the time. */
export interface SpectralLine {
  readonly frequency_Hz: number;
  readonly amplitude: number;
}

/** One-sided amplitude spectrum of an evenly resampled record; `amplitude[k]` belongs to frequency k times `step_Hz`. */
export interface Spectrum {
  readonly step_Hz: number;
  readonly amplitude: Float64Array;
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/**
 * Spectrum of samples taken at ascending, possibly uneven times: resampled by straight lines to a power of two of even
 * steps (at least as many as there are samples), less the mean, no window and no padding, so that line k has exactly k
 * cycles. Frequencies run up to half the mean sampling rate. Null for fewer than 8 samples or no time span.
 */
export function spectrum(time_s: Float64Array, value: Float64Array): Spectrum | null {
  const n = time_s.length;
  const span = n < 8 ? 0 : time_s[n - 1]! - time_s[0]!;
  if (!(span > 0)) return null;
  const size = 2 ** Math.ceil(Math.log2(n));
  const duration = (span * n) / (n - 1);
  const even = resample(time_s, value, duration / size, size);
  let sum = 0;
  for (const sample of even) sum += sample;
  const fft = transformOf(size);
  const out = fft.createComplexArray();
  for (let k = 0; k < size; k++) even[k] = even[k]! - sum / size;
  fft.realTransform(out, even);
  const lines = Math.floor(n / 2);
  const re = Float64Array.from({ length: lines }, (_, k) => out[2 * k]!);
  const im = Float64Array.from({ length: lines }, (_, k) => out[2 * k + 1]!);
  const amplitude = re.map((x, k) => (2 * Math.hypot(x, im[k]!)) / size);
  return { step_Hz: 1 / duration, amplitude, re, im };
}

/** Transforms by their size: each has tables of its own, and a fit asks for the same size again and again. */
const transforms = new Map<number, FFT>();

function transformOf(size: number): FFT {
  const known = transforms.get(size);
  if (known !== undefined) return known;
  const made = new FFT(size);
  transforms.set(size, made);
  return made;
}

function resample(time_s: Float64Array, value: Float64Array, step_s: number, size: number): Float64Array {
  const even = new Float64Array(size);
  let at = 0;
  for (let k = 0; k < size; k++) {
    const t = time_s[0]! + k * step_s;
    while (at < time_s.length - 2 && time_s[at + 1]! < t) at++;
    const share = Math.min(1, (t - time_s[at]!) / (time_s[at + 1]! - time_s[at]!));
    even[k] = value[at]! + share * (value[at + 1]! - value[at]!);
  }
  return even;
}

/**
 * The strongest local maxima of a spectrum, strongest first, at most `count`; the frequency between bins from the complex ratio
 * of three of them, delta = Re[(X- - X+) / (2 X0 - X- - X+)] (Jacobsen and Kootsookos 2007, IEEE Signal Process. Mag. 24 (3), 123),
 * which damping biases far less than ratios of magnitudes.
 */
export function spectralLines({ step_Hz, amplitude, re, im }: Spectrum, count: number): SpectralLine[] {
  const peaks: number[] = [];
  for (let k = 1; k < amplitude.length - 1; k++) {
    if (amplitude[k]! > amplitude[k - 1]! && amplitude[k]! >= amplitude[k + 1]!) peaks.push(k);
  }
  // The mean is gone, so that the first line has no lower neighbour to be compared with.
  if (peaks[0] !== 1 && amplitude.length > 2 && amplitude[1]! > amplitude[2]!) peaks.push(1);
  peaks.sort((a, b) => amplitude[b]! - amplitude[a]!);
  return peaks.slice(0, count).map((k) => {
    const topRe = re[k - 1]! - re[k + 1]!;
    const topIm = im[k - 1]! - im[k + 1]!;
    const lowRe = 2 * re[k]! - re[k - 1]! - re[k + 1]!;
    const lowIm = 2 * im[k]! - im[k - 1]! - im[k + 1]!;
    const square = lowRe * lowRe + lowIm * lowIm;
    const delta = square > 0 ? (topRe * lowRe + topIm * lowIm) / square : 0;
    return { frequency_Hz: (k + Math.max(-0.6, Math.min(0.6, delta))) * step_Hz, amplitude: amplitude[k]! };
  });
}
