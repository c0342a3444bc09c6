import type { BarLayers, Outline } from './layers.ts';
import type { Quarters } from './quarters.ts';
import { NEITHER, quarterOf, quartersOf } from './quarters.ts';

/** The bar's own axis in its frame. */
export interface BarAxis {
  /** Angle of the axis from the u direction, radians (towards +v). */
  readonly turn_rad: number;
  /** Its standard uncertainty. */
  readonly u_turn_rad: number;
  /** v of the axis at the bar's middle, pixels. */
  readonly v_px: number;
}

interface Line {
  readonly slope: number;
  readonly u_slope: number;
  /** v at the bar's middle. */
  readonly v_px: number;
}

/**
 * The axis as the middle line between the two long edges, each a robust straight line through the places where the
 * averaged picture is steepest. The halves of an edge may be offset against each other, since shading makes the edge of
 * a bright half seem to lie elsewhere than that of a dark one. Null where an edge can't be followed.
 */
export function findAxis(layers: BarLayers, outline: Outline): BarAxis | null {
  const quarters = quartersOf(layers, outline);
  const upper = edgeLine(layers, outline, outline.top, quarters);
  const lower = edgeLine(layers, outline, outline.bottom, quarters);
  if (upper === null || lower === null) return null;
  const slope = (upper.slope + lower.slope) / 2;
  const apart = upper.slope - lower.slope;
  return {
    turn_rad: Math.atan(slope),
    u_turn_rad: Math.sqrt((upper.u_slope ** 2 + lower.u_slope ** 2) / 4 + apart ** 2 / 12),
    v_px: (upper.v_px + lower.v_px) / 2,
  };
}

function edgeLine(layers: BarLayers, outline: Outline, edge: number, quarters: Quarters): Line | null {
  const { columns, rows, halfU, halfV, mean, noise, pictures } = layers;
  const trim = 0.06 * (outline.right - outline.left) + 1;
  const reach = Math.max(2, Math.min(4, 0.25 * (outline.bottom - outline.top)));
  const us: number[] = [];
  const vs: number[] = [];
  const ws: number[] = [];
  const halves: number[] = [];
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
    if (strength < (16 * noise) / pictures || Math.abs(centre - edge) > 2 * reach) continue;
    const quarter = quarterOf(quarters, u, edge);
    if (quarter === NEITHER) continue;
    us.push(u);
    halves.push(quarter % 2);
    vs.push(centre);
    ws.push(strength / (strength + 100 * noise));
  }
  if (us.length < 8) return null;
  return robustLine(us, vs, ws, halves);
}

/** Straight line with an offset for each half, by Tukey's weights; residuals count as correlated over four places. */
function robustLine(
  us: readonly number[],
  vs: readonly number[],
  ws: readonly number[],
  halves: readonly number[],
): Line {
  let slope = 0;
  let u_slope = 0;
  let offsets = [0, 0];
  let limit = Number.POSITIVE_INFINITY;
  for (let pass = 0; pass < 6; pass++) {
    const rest = us.map((u, i) => vs[i]! - slope * u - offsets[halves[i]!]!);
    const keep = rest.map((r, i) => ws[i]! * (Math.abs(r) < limit ? (1 - (r / limit) ** 2) ** 2 : 0));
    const sums = [0, 1].map((half) => {
      let w = 0;
      let x = 0;
      let y = 0;
      for (const [i, k] of keep.entries()) {
        if (halves[i] !== half) continue;
        w += k;
        x += k * us[i]!;
        y += k * vs[i]!;
      }
      return { x: w > 0 ? x / w : 0, y: w > 0 ? y / w : 0, w };
    });
    let sxx = 0;
    let sxy = 0;
    for (const [i, k] of keep.entries()) {
      const { x, y } = sums[halves[i]!]!;
      sxx += k * (us[i]! - x) ** 2;
      sxy += k * (us[i]! - x) * (vs[i]! - y);
    }
    slope = sxy / sxx;
    offsets = sums.map(({ x, y }) => y - slope * x);
    const after = us.map((u, i) => vs[i]! - slope * u - offsets[halves[i]!]!);
    const sizes = after.map(Math.abs).sort((a, b) => a - b);
    limit = Math.max(0.05, 4.685 * 1.4826 * sizes[sizes.length >> 1]!);
    let squares = 0;
    let w = 0;
    for (const [i, k] of keep.entries()) {
      squares += k * after[i]! ** 2;
      w += k;
    }
    u_slope = Math.sqrt((4 * squares) / w / sxx);
  }
  return { slope, u_slope, v_px: (offsets[0]! + offsets[1]!) / 2 };
}
