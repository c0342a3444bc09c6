import type { RingDown } from '../../src/oscillation/ring-down.ts';
import { spectrum } from '../../src/oscillation/spectrum.ts';
import type { Trace } from '../../src/tracking/trace.ts';
import type { Spectra } from './calculator-protocol.ts';

/** Spectra of a trace and of its residuals for drawing; null where the trace is too short for one. */
export function spectraOf(trace: Trace, ringDown: RingDown | null): Spectra | null {
  const data = spectrum(trace.time_s, trace.angle);
  if (data === null) return null;
  const left = ringDown ? spectrum(trace.time_s, ringDown.residual) : null;
  return {
    frequency_Hz: Float64Array.from(data.amplitude, (_, k) => k * data.step_Hz),
    amplitude: data.amplitude,
    residualAmplitude: left && left.amplitude.length === data.amplitude.length ? left.amplitude : null,
  };
}
