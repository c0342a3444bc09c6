import type { RingDown } from '../../src/oscillation/ring-down.ts';
import type { Trace } from '../../src/tracking/trace.ts';
import type { FitCurves, PreviewFit } from '../contract.ts';
import type { Fit } from './calculator-protocol.ts';

/** A fit drawn over its data, in the unit of the window's border. */
export function fitCurves(trace: Trace, fit: Fit): FitCurves {
  const toUnit = factor(trace.unit);
  const scaled = (column: Float64Array) => column.map((a) => a * toUnit);
  const { ringDown, spectra } = fit;
  return {
    unit: trace.unit === 'rad' ? 'deg' : 'px',
    time_s: trace.time_s,
    angle: scaled(trace.angle),
    fitted: ringDown ? scaled(ringDown.fitted) : null,
    residual: ringDown ? scaled(ringDown.residual) : null,
    used: ringDown ? new Uint8Array(ringDown.usedRows) : new Uint8Array(trace.time_s.length),
    spectrum: spectra && {
      frequency_Hz: spectra.frequency_Hz,
      amplitude: scaled(spectra.amplitude),
      residualAmplitude: spectra.residualAmplitude && scaled(spectra.residualAmplitude),
    },
  };
}

/** The quick fit of a stretch as the window shows it. */
export function shownFit(trace: Trace, fit: Fit): PreviewFit {
  const curves = fitCurves(trace, fit);
  const checks = [...fit.checks];
  if (!fit.ringDown) return { ok: false, checks, curves };
  return { ok: true, unit: curves.unit, ...numbers(fit.ringDown), checks, curves };
}

function numbers(r: RingDown) {
  const toUnit = factor(r.unit);
  return {
    f0_Hz: pair(r.f0_Hz),
    fd_Hz: pair(r.fd_Hz),
    gamma_per_s: pair(r.gamma_per_s),
    q: r.q && pair(r.q),
    amplitudeStart: r.amplitudeStart * toUnit,
    amplitudeEnd: r.amplitudeEnd * toUnit,
    equilibrium: pair(r.equilibrium, toUnit),
    residualRms: r.residualRms * toUnit,
    cycles: r.cycles,
  };
}

function pair({ value, u }: { readonly value: number; readonly u: number }, scale = 1): { value: number; u: number } {
  return { value: value * scale, u: u * scale };
}

function factor(unit: 'rad' | 'px'): number {
  return unit === 'rad' ? 180 / Math.PI : 1;
}
