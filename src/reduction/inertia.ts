import type { Magnet } from './apparatus.ts';
import { type BudgetInput, type Derived, derive } from './sensitivity.ts';

/**
 * Moment of inertia of the bar about the vertical axis through its middle, kg m². Cylinder lying along its length:
 * m (3 r² + h²) / 12; rectangular bar: m (a² + b²) / 12 with a and b the horizontal sides (Gauss and Weber, in Taylor's
 * Scientific Memoirs II (1841) p. 81); or as typed.
 */
export function inertia(magnet: Magnet): Derived {
  if ('inertia_kg_m2' in magnet) {
    return derive([input('moment of inertia', magnet.inertia_kg_m2, magnet.u_inertia_kg_m2, 'kg m²')], ([j]) => j!);
  }
  const mass = input('mass of the bar', magnet.mass_kg, magnet.u_mass_kg, 'kg');
  const length = input('length of the bar', magnet.length_m, magnet.u_length_m, 'm');
  switch (magnet.shape) {
    case 'cylinder':
      return derive(
        [mass, length, input('diameter of the bar', magnet.diameter_m, magnet.u_diameter_m, 'm')],
        ([m, h, d]) => (m! * (0.75 * d! ** 2 + h! ** 2)) / 12,
      );
    case 'bar':
      return derive(
        [mass, length, input('width of the bar', magnet.width_m, magnet.u_width_m, 'm')],
        ([m, a, b]) => (m! * (a! ** 2 + b! ** 2)) / 12,
      );
    default: {
      const other: never = magnet;
      throw new TypeError(`inertia: unknown shape ${JSON.stringify(other)}`);
    }
  }
}

function input(name: string, value: number, u: number | undefined, unit: string): BudgetInput {
  return { name, value, u: u ?? 0, unit, dof: Number.POSITIVE_INFINITY };
}
