import type { Lamp } from './bench.ts';
import type { Random } from './random.ts';
import { emptyHit, type Solid } from './solids.ts';

/** Light that falls on a place with a normal, and the highlight it makes towards a viewer; linear, per colour. */
export interface Lighting {
  /**
   * Writes light for a matt surface into `out` [0..2] and the strength of a highlight into `out` [3].
   * `lit` is the share of the lamp that is seen from the place.
   */
  readonly at: (
    x: number,
    y: number,
    z: number,
    nx: number,
    ny: number,
    nz: number,
    viewX: number,
    viewY: number,
    viewZ: number,
    lit: number,
    out: Float64Array,
  ) => void;
  /** 1 when a random point of the lamp is seen from the place past the solids, else 0. */
  readonly visible: (x: number, y: number, z: number, random: Random) => number;
}

/** The light of one lamp, with the solids that can stand in its way. View directions are towards the viewer, unit length. */
export function lightingOf(lamp: Lamp, solids: readonly Solid[]): Lighting {
  const [lx, ly, lz] = lamp.place_m;
  const below = lx * lx + ly * ly + lz * lz;
  const scale = (lamp.strength * below * Math.sqrt(below)) / lz;
  const hit = emptyHit();
  return {
    at: (x, y, z, nx, ny, nz, viewX, viewY, viewZ, lit, out) => {
      const dx = lx - x;
      const dy = ly - y;
      const dz = lz - z;
      const d2 = dx * dx + dy * dy + dz * dz;
      const d = Math.sqrt(d2);
      const cos = (nx * dx + ny * dy + nz * dz) / d;
      const direct = cos > 0 ? (lit * scale * cos) / d2 : 0;
      const sky = 0.62 + 0.38 * nz;
      for (let i = 0; i < 3; i++) out[i] = lamp.colour[i]! * direct + lamp.ambient[i]! * sky;
      let hx = dx / d + viewX;
      let hy = dy / d + viewY;
      let hz = dz / d + viewZ;
      const h = Math.sqrt(hx * hx + hy * hy + hz * hz);
      hx /= h;
      hy /= h;
      hz /= h;
      const mirror = nx * hx + ny * hy + nz * hz;
      out[3] = mirror > 0 && cos > 0 ? lit * lamp.strength * mirror ** 60 : 0;
    },
    visible: (x, y, z, random) => {
      const angle = 2 * Math.PI * random.uniform();
      const radius = lamp.size_m * Math.sqrt(random.uniform());
      const dx = lx + radius * Math.cos(angle) - x;
      const dy = ly + radius * Math.sin(angle) - y;
      const dz = lz - z;
      for (const solid of solids) {
        if (solid.meet(x, y, z, dx, dy, dz, hit) && hit.distance > 1e-5 && hit.distance < 1) return 0;
      }
      return 1;
    },
  };
}
