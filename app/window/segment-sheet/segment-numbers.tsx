import type { PreviewFit, SegmentResult } from '../../contract.ts';
import { fixedText } from '../numbers/quantity-text.ts';
import { QuantityRow } from '../parts/quantity.tsx';

/** Numbers of a segment, wherever they come from: units as in the results, lengths in `unit`. */
export interface SegmentNumbers {
  readonly f0: readonly [number | null, number | null];
  readonly fd: readonly [number | null, number | null];
  readonly gamma: readonly [number | null, number | null];
  readonly q: readonly [number | null, number | null];
  readonly rest: readonly [number | null, number | null];
  readonly amplitude: readonly [number | null, number | null];
  readonly cycles: number | null;
  readonly residualRms: number | null;
  readonly unit: '°' | 'px';
}

/** The numbers of a measured segment. */
export function numbersOfResult(r: SegmentResult): SegmentNumbers {
  return {
    f0: [r.f0_Hz, r.u_f0_Hz],
    fd: [r.fd_Hz, r.u_fd_Hz],
    gamma: [r.gamma_per_s, r.u_gamma_per_s],
    q: [r.q_factor, r.u_q_factor],
    rest: [r.equilibrium_deg, r.u_equilibrium_deg],
    amplitude: [r.amplitude_start_deg, r.amplitude_end_deg],
    cycles: r.cycles,
    residualRms: r.residual_rms_deg,
    unit: '°',
  };
}

/** The numbers of a quick fit. */
export function numbersOfPreview(fit: Extract<PreviewFit, { ok: true }>): SegmentNumbers {
  return {
    f0: [fit.f0_Hz.value, fit.f0_Hz.u],
    fd: [fit.fd_Hz.value, fit.fd_Hz.u],
    gamma: [fit.gamma_per_s.value, fit.gamma_per_s.u],
    q: [fit.q?.value ?? null, fit.q?.u ?? null],
    rest: [fit.equilibrium.value, fit.equilibrium.u],
    amplitude: [fit.amplitudeStart, fit.amplitudeEnd],
    cycles: fit.cycles,
    residualRms: fit.residualRms,
    unit: fit.unit === 'deg' ? '°' : 'px',
  };
}

/** Frequency, damping, amplitude and rest direction, aligned by columns. */
export function NumbersTable({ of: n, caption }: { of: SegmentNumbers; caption: string }) {
  return (
    <table class="numbers">
      <caption class="unseen">{caption}</caption>
      <tbody>
        <QuantityRow symbol="f_0" name="undamped, small swing" value={n.f0[0]} u={n.f0[1]} unit="Hz" />
        <QuantityRow symbol="f_d" name="as observed" value={n.fd[0]} u={n.fd[1]} unit="Hz" />
        <QuantityRow symbol="γ" name="damping" value={n.gamma[0]} u={n.gamma[1]} unit="1/s" />
        <QuantityRow symbol="Q" name="quality factor" value={n.q[0]} u={n.q[1]} unit="" />
        <QuantityRow symbol="θ_e" name="rest direction" value={n.rest[0]} u={n.rest[1]} unit={n.unit} />
        <tr>
          <th scope="row">
            <span class="symbol">a</span> <span class="quantity-name">amplitude, start to end</span>
          </th>
          <td class="value">{fixedText(n.amplitude[0], 2)}</td>
          <td class="u">→ {fixedText(n.amplitude[1], 2)}</td>
          <td class="unit">{n.unit}</td>
        </tr>
      </tbody>
    </table>
  );
}
