import type { BarLayers, Outline } from './layers.ts';

/** The bar's own axis in its frame. */
export interface BarAxis {
  /** Angle of the axis from the u direction, radians (towards +v). */
  readonly turn_rad: number;
  /** Its standard uncertainty. */
  readonly u_turn_rad: number;
  /** v of the axis at u = 0, pixels. */
  readonly v_px: number;
}

interface Line {
  readonly slope: number;
  readonly at0: number;
  readonly u_slope: number;
}

/**
 * The axis as the middle line between the two long edges, each a robust straight line through the places where the
 * averaged picture is steepest. Null where an edge can't be followed.
 */
export function findAxis(layers: BarLayers, outline: Outline): BarAxis | null {
  const upper = edgeLine(layers, outline, outline.top);
  const lower = edgeLine(layers, outline, outline.bottom);
  if (upper === null || lower === null) return null;
  const slope = (upper.slope + lower.slope) / 2;
  const apart = upper.slope - lower.slope;
  return {
    turn_rad: Math.atan(slope),
    u_turn_rad: Math.sqrt((upper.u_slope ** 2 + lower.u_slope ** 2) / 4 + apart ** 2 / 12),
    v_px: (upper.at0 + lower.at0) / 2,
  };
}

function edgeLine(layers: BarLayers, outline: Outline, edge: number): Line | null {
  const { columns, rows, halfU, halfV, mean, noise } = layers;
  const trim = 0.06 * (outline.right - outline.left) + 1;
  const reach = Math.max(2, Math.min(4, 0.25 * (outline.bottom - outline.top)));
  const us: number[] = [];
  const vs: number[] = [];
  const ws: number[] = [];
  for (let u = Math.ceil(outline.left + trim); u <= outline.right - trim; u++) {
    let centre = edge;
    let strength = 0;
    for (let pass = 0; pass < 3; pass++) {
      let sum = 0;
      let moment = 0;
      for (let row = Math.ceil(centre - reach) + halfV; row <= centre + reach + halfV; row++) {
        if (row < 1 || row > rows - 2) continue;
        const at = row * columns + u + halfU;
        const slope = (mean[at + columns]! - mean[at - columns]!) / 2;
        const distance = row - halfV - centre;
        // A window that fades out keeps the centroid from jumping by whole rows.
        const fade = Math.max(0, 1 - (distance / reach) ** 2);
        sum += slope * slope * fade;
        moment += slope * slope * fade * distance;
      }
      if (sum <= 0) break;
      strength = sum;
      centre += moment / sum;
      if (Math.abs(centre - edge) > 2 * reach) break;
    }
    if (strength < 4 * noise || Math.abs(centre - edge) > 2 * reach) continue;
    us.push(u);
    vs.push(centre);
    ws.push(strength / (strength + 100 * noise));
  }
  if (us.length < 8) return null;
  return robustLine(us, vs, ws);
}

/** Weighted straight line with Tukey's weights; its uncertainty counts residuals as correlated over four places. */
function robustLine(us: readonly number[], vs: readonly number[], ws: readonly number[]): Line {
  let slope = 0;
  let at0 = 0;
  let u_slope = 0;
  let limit = Number.POSITIVE_INFINITY;
  for (let pass = 0; pass < 6; pass++) {
    let w = 0;
    let x = 0;
    let y = 0;
    let xx = 0;
    let xy = 0;
    const keep = us.map((u, i) => {
      const r = (vs[i]! - slope * u - at0) / limit;
      return ws[i]! * (Math.abs(r) < 1 ? (1 - r * r) ** 2 : 0);
    });
    for (const [i, k] of keep.entries()) {
      w += k;
      x += k * us[i]!;
      y += k * vs[i]!;
      xx += k * us[i]! ** 2;
      xy += k * us[i]! * vs[i]!;
    }
    const mx = x / w;
    const my = y / w;
    const sxx = xx - w * mx * mx;
    slope = (xy - w * mx * my) / sxx;
    at0 = my - slope * mx;
    const rest = us.map((u, i) => Math.abs(vs[i]! - slope * u - at0)).sort((a, b) => a - b);
    limit = Math.max(0.05, 4.685 * 1.4826 * rest[rest.length >> 1]!);
    let squares = 0;
    for (const [i, k] of keep.entries()) squares += k * (vs[i]! - slope * us[i]! - at0) ** 2;
    u_slope = Math.sqrt((4 * squares) / w / sxx);
  }
  return { slope, at0, u_slope };
}
