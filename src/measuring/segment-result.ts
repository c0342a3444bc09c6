import type { Estimate } from '../numerics/estimate.ts';
import { statusOf } from '../oscillation/checks.ts';
import type { Check, RingDown } from '../oscillation/ring-down.ts';
import type { DecodeAccount } from '../recording/recording.ts';
import type { SessionSegment, SessionView } from '../session/session.ts';
import type { TrackOutcome } from '../tracking/trace.ts';
import type { MeasuredSegment } from './measured-segment.ts';
import type { OpenRecording } from './open-recordings.ts';

const DEG = 180 / Math.PI;

/** What was found out about one segment. */
export interface SegmentFindings {
  readonly segment: SessionSegment;
  readonly view: SessionView;
  readonly opened: OpenRecording;
  readonly outcome: TrackOutcome;
  readonly account: DecodeAccount;
  readonly ringDown: RingDown | null;
  readonly checks: readonly Check[];
}

/** Makes the row of the table from what was found out about a segment. */
export function segmentResult(found: SegmentFindings): MeasuredSegment {
  const { segment, view, opened, outcome, account, ringDown } = found;
  const checks = [...decodingChecks(account, opened.recording.remarks), ...found.checks];
  const status = ringDown ? statusOf(checks) : 'unmeasured';
  const r = status === 'unmeasured' ? null : ringDown;
  const angles = r?.unit === 'rad' ? r : null;
  const equilibrium = angles ? folded(angles.equilibrium, view.kind) : null;
  const result = {
    id: segment.id,
    recording: segment.recording,
    view: segment.view,
    view_kind: view.kind,
    start_s: segment.start_s,
    end_s: segment.end_s,
    current_A: segment.current_A,
    u_current_A: segment.u_current_A ?? 0,
    sweep: segment.sweep ?? null,
    status,
    ...pair('f0_Hz', r?.f0_Hz),
    dof_f0: r ? finiteOrNull(r.f0_Hz.dof) : null,
    ...pair('fd_Hz', r?.fd_Hz),
    ...pair('gamma_per_s', r?.gamma_per_s),
    ...pair('q_factor', r?.q ?? undefined),
    amplitude_start_deg: angles ? angles.amplitudeStart * DEG : null,
    amplitude_end_deg: angles ? angles.amplitudeEnd * DEG : null,
    equilibrium_deg: equilibrium ? equilibrium.value * DEG : null,
    u_equilibrium_deg: equilibrium ? equilibrium.u * DEG : null,
    cycles: r?.cycles ?? null,
    frames: account.claimed,
    frames_lost: account.lost,
    frames_refused: outcome.ok ? outcome.trace.refused.length : account.decoded,
    frames_used: r?.used ?? 0,
    residual_rms_deg: angles ? angles.residualRms * DEG : null,
    swing_Hz: r?.swing?.frequency_Hz ?? null,
    swing_share: r?.swing?.share ?? 0,
    u_time_scale: opened.u_time_scale,
    left_out: segment.left_out ?? null,
    note: segment.note ?? '',
    checks,
  };
  return { trace: outcome.ok ? outcome.trace : null, ringDown, result };
}

function decodingChecks(account: DecodeAccount, remarks: readonly string[]): Check[] {
  const checks: Check[] = remarks.map((message) => ({ code: 'recording_odd', severity: 'note', message }));
  if (account.claimed !== account.decoded + account.lost) {
    const message = `The container claims ${account.claimed} frames here, but ${account.decoded} decoded and ${account.lost} lost make another number; this is a mistake of the program.`;
    checks.push({ code: 'ledger_unbalanced', severity: 'fault', message });
  }
  if (account.problem !== null || account.lost > 0) {
    const share = account.lost / Math.max(1, account.claimed);
    const message =
      account.problem ?? `${account.lost} of ${account.claimed} frames could not be decoded; the others were used.`;
    checks.push({ code: 'frames_lost', severity: share > 0.1 ? 'doubt' : 'note', message });
  }
  return checks;
}

/** A value and its uncertainty under the contract's two names, null where there is none. */
function pair<K extends string>(name: K, estimate: Estimate | undefined): Record<K | `u_${K}`, number | null> {
  return { [name]: estimate?.value ?? null, [`u_${name}`]: estimate ? finiteOrNull(estimate.u) : null } as Record<
    K | `u_${K}`,
    number | null
  >;
}

function finiteOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}

/** A bar looks the same after half a turn: plan and oblique rest directions are brought into (-pi/2, pi/2]. */
function folded(estimate: Estimate, kind: SessionView['kind']): Estimate {
  if (kind === 'side') return estimate;
  const turns = Math.ceil(estimate.value / Math.PI - 0.5);
  return { ...estimate, value: estimate.value - turns * Math.PI };
}
