import { describe, expect, it } from 'vitest';
import { inertia } from '../../src/reduction/inertia.ts';

describe('moment of inertia', () => {
  it('of a cylinder across its length: m (3r² + h²) / 12', () => {
    // Standard formula; 50.0 g, 5 mm radius, 60 mm: 1.53125e-5 kg m² exactly.
    const j = inertia({ shape: 'cylinder', mass_kg: 0.05, length_m: 0.06, diameter_m: 0.01 }).value;
    expect(Math.abs(j / 1.53125e-5 - 1)).toBeLessThan(1e-15);
    const slender = inertia({ shape: 'cylinder', mass_kg: 0.05, length_m: 0.06, diameter_m: 1e-9 }).value;
    expect(slender / j - 1).toBeCloseTo(-0.0204, 4);
  });

  it('of a rectangular bar: square of the face’s diagonal times mass over 12', () => {
    // Gauss and Weber, in Taylor's Scientific Memoirs II (1841) p. 81; Weber's bar of 142 g, 101 mm by 17½ mm.
    const j = inertia({ shape: 'bar', mass_kg: 0.142, length_m: 0.101, width_m: 0.0175 }).value;
    expect(j).toBeCloseTo(1.24335791667e-4, 14);
  });

  it('has sensitivities that combine to its uncertainty', () => {
    const { u, value } = inertia({
      shape: 'bar',
      mass_kg: 0.142,
      u_mass_kg: 1e-4,
      length_m: 0.101,
      u_length_m: 1e-4,
      width_m: 0.0175,
      u_width_m: 5e-5,
    });
    const expected = Math.hypot(
      1e-4 / 0.142,
      (2 * 0.101 * 1e-4) / (0.101 ** 2 + 0.0175 ** 2),
      (2 * 0.0175 * 5e-5) / (0.101 ** 2 + 0.0175 ** 2),
    );
    expect(u / value).toBeCloseTo(expected, 9);
    const typed = inertia({ inertia_kg_m2: 2e-6, u_inertia_kg_m2: 3e-9 });
    expect(typed.value).toBe(2e-6);
    expect(typed.u).toBeCloseTo(3e-9, 16);
  });
});
