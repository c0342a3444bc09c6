/** Where a ray first meets a solid: distance along the ray (in units of its direction) and the outward normal there. */
export interface Hit {
  distance: number;
  nx: number;
  ny: number;
  nz: number;
}

/** A hit to be written into. */
export function emptyHit(): Hit {
  return { distance: 0, nx: 0, ny: 0, nz: 0 };
}

/** A body that stands still on the bench. `meet` writes into `hit` and says whether the ray meets it beyond `from`. */
export interface Solid {
  readonly meet: (ox: number, oy: number, oz: number, dx: number, dy: number, dz: number, hit: Hit) => boolean;
  /** Reflectance at a place on it. */
  readonly paint: (x: number, y: number, z: number, hit: Hit, out: Float64Array) => void;
  readonly gloss: number;
}

const NEAR = 1e-6;

/** A ring about the x axis (through y = 0, z = `z0`), from `x0` to `x1` and between two radii; metres. */
export function meetRing(x0: number, x1: number, z0: number, inner: number, outer: number): Solid['meet'] {
  const inner2 = inner * inner;
  const outer2 = outer * outer;
  return (ox, oy, oz, dx, dy, dz, hit) => {
    // The stretch of the ray between the two faces: most rays pass outside or through the hole and end here.
    let from = NEAR;
    let to = Number.POSITIVE_INFINITY;
    if (Math.abs(dx) > 1e-14) {
      const t0 = (x0 - ox) / dx;
      const t1 = (x1 - ox) / dx;
      from = Math.max(from, Math.min(t0, t1));
      to = Math.max(t0, t1);
      if (to <= from) return false;
    } else if (ox < x0 || ox > x1) return false;
    const pz = oz - z0;
    const a = dy * dy + dz * dz;
    const b = oy * dy + pz * dz;
    const c = oy * oy + pz * pz;
    const atFrom = c + from * (2 * b + from * a);
    const atTo = to < 1e9 ? c + to * (2 * b + to * a) : 1e9;
    if (atFrom < inner2 && atTo < inner2) return false;
    if (atFrom >= inner2 && atFrom <= outer2 && from > NEAR) {
      hit.distance = from;
      hit.nx = -Math.sign(dx);
      hit.ny = 0;
      hit.nz = 0;
      return true;
    }
    const outside = atFrom > outer2;
    const root = b * b - a * (c - (outside ? outer2 : inner2));
    if (root < 0 || a < 1e-14) return false;
    // From outside the near meeting with the outer wall counts, from within the hole the far one with the inner wall.
    const t = outside ? (-b - Math.sqrt(root)) / a : (-b + Math.sqrt(root)) / a;
    if (t < from || t > to) return false;
    const radius = outside ? outer : -inner;
    hit.distance = t;
    hit.nx = 0;
    hit.ny = (oy + t * dy) / radius;
    hit.nz = (pz + t * dz) / radius;
    return true;
  };
}

/** A box standing on the board: middle (x, y), turned about z, from z = 0 to its height. */
export function meetBox(
  x: number,
  y: number,
  turn_rad: number,
  width: number,
  depth: number,
  height: number,
): Solid['meet'] {
  const cos = Math.cos(turn_rad);
  const sin = Math.sin(turn_rad);
  const half = [width / 2, depth / 2, height / 2] as const;
  const o = new Float64Array(3);
  const d = new Float64Array(3);
  return (ox, oy, oz, dx, dy, dz, hit) => {
    o[0] = cos * (ox - x) + sin * (oy - y);
    o[1] = -sin * (ox - x) + cos * (oy - y);
    o[2] = oz - height / 2;
    d[0] = cos * dx + sin * dy;
    d[1] = -sin * dx + cos * dy;
    d[2] = dz;
    let enter = NEAR;
    let leave = Number.POSITIVE_INFINITY;
    let axis = -1;
    for (let i = 0; i < 3; i++) {
      if (Math.abs(d[i]!) < 1e-14) {
        if (Math.abs(o[i]!) > half[i]!) return false;
        continue;
      }
      const t0 = (-Math.sign(d[i]!) * half[i]! - o[i]!) / d[i]!;
      const t1 = (Math.sign(d[i]!) * half[i]! - o[i]!) / d[i]!;
      if (t0 > enter) {
        enter = t0;
        axis = i;
      }
      leave = Math.min(leave, t1);
    }
    if (axis < 0 || enter > leave) return false;
    const side = -Math.sign(d[axis]!);
    hit.distance = enter;
    hit.nx = axis === 0 ? side * cos : axis === 1 ? -side * sin : 0;
    hit.ny = axis === 0 ? side * sin : axis === 1 ? side * cos : 0;
    hit.nz = axis === 2 ? side : 0;
    return true;
  };
}
