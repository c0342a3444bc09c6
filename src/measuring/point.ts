import type { Estimate } from '../numerics/estimate.ts';
import type { Point } from '../reduction/reduction.ts';
import type { SegmentResult } from '../report/results.ts';

const RAD = Math.PI / 180;

/**
 * A row of the table as the reduction sees it. Made from the row alone, so that a reduction repeated from a results
 * file agrees with the first one to the last digit.
 */
export function pointOf(row: SegmentResult): Point {
  return {
    id: row.id,
    current_A: row.current_A,
    u_current_A: row.u_current_A,
    sweep: row.sweep,
    status: row.status,
    f0_Hz: estimate(row.f0_Hz, row.u_f0_Hz, row.dof_f0, 1),
    torsion_Hz: estimate(undamped(row.fd_Hz, row.gamma_per_s), row.u_fd_Hz, row.dof_f0, 1),
    // Rest directions of views that the file doesn't describe have no zero in common.
    equilibrium_rad:
      row.view_kind === null ? null : estimate(row.equilibrium_deg, row.u_equilibrium_deg, row.dof_f0, RAD),
    u_time_scale: row.u_time_scale,
    viewFrame: `${row.recording} ${row.view_kind}`,
    ...(row.left_out !== null && { leftOut: row.left_out }),
  };
}

/** f0 from the observed frequency and the damping: f0² = fd² + (γ/2π)². */
function undamped(fd_Hz: number | null, gamma_per_s: number | null): number | null {
  return fd_Hz === null || gamma_per_s === null ? null : Math.hypot(fd_Hz, gamma_per_s / (2 * Math.PI));
}

function estimate(value: number | null, u: number | null, dof: number | null, unit: number): Estimate | null {
  if (value === null || u === null) return null;
  return { value: value * unit, u: u * unit, dof: dof ?? Number.POSITIVE_INFINITY };
}
