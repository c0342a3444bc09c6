import { describe, expect, it } from 'vitest';
import { coilConstant } from '../../src/reduction/coil-constant.ts';
import {
  type LoopPair,
  loopField,
  magneticConstant_N_per_A2,
  meanPairField,
  pairField,
  turningPairField,
} from '../../src/reduction/loop-field.ts';

/** Spacing = radius, as in the tables. */
function equalPair(turns: number, radius_m: number, spacing_m = radius_m): LoopPair {
  return { turns1: turns, turns2: turns, radius1_m: radius_m, radius2_m: radius_m, spacing_m };
}

function relative(found: number, expected: number): number {
  return Math.abs(found / expected - 1);
}

describe('coil fields', () => {
  it('uses the magnetic constant of CODATA 2022', () => {
    // CODATA 2022: 1.256 637 061 27(20) e-6 N A^-2.
    expect(magneticConstant_N_per_A2).toBe(1.25663706127e-6);
  });

  it('gives a single loop’s field on its axis', () => {
    // μ0 R² / (2 (R² + z²)^(3/2)), R = 0.1 m; computed values for CODATA 2022.
    for (const [z, field] of [
      [0, 6.283185306e-6],
      [0.05, 4.495881427e-6],
      [0.1, 2.221441469e-6],
    ] as const) {
      expect(relative(loopField(0.1, z, 0).along_T, field)).toBeLessThan(1e-9);
    }
  });

  it('gives (4/5)^(3/2) μ0 N / R at the middle of a pair with spacing = radius', () => {
    // Formula: standard, e.g. Crosser et al., Rev. Sci. Instrum. 81 (2010) 084701. 154 turns, 0.200 m: 6.923657398e-4 T/A (computed).
    expect(relative(pairField(equalPair(154, 0.2), 0, 0).along_T, 6.923657398e-4)).toBeLessThan(1e-9);
    expect(
      relative(coilConstant({ turns_per_coil: 154, radius_m: 0.2, spacing_m: 0.2 }, undefined).value, 6.923657398e-4),
    ).toBeLessThan(1e-9);
  });

  it('agrees on the axis with the expansion 1 - (144/125) u⁴ + (19712/15625) u⁶ - …', () => {
    // The first coefficient as in Purcell, Am. J. Phys. 57 (1989) 18 (from memory); the others by recurrence.
    const centre = pairField(equalPair(1, 1), 0, 0).along_T;
    for (const u of [0.02, 0.05, 0.1]) {
      const series =
        1 - (144 / 125) * u ** 4 + (19712 / 15625) * u ** 6 - (29952 / 78125) * u ** 8 - (5812224 / 9765625) * u ** 10;
      expect(Math.abs(pairField(equalPair(1, 1), u, 0).along_T / centre - series)).toBeLessThan(10 * u ** 12 + 1e-14);
    }
  });

  it('gives the off-axis field by complete elliptic integrals', () => {
    // Computed independently (complete elliptic integrals): z/R, rho/R, B_z/B0, B_rho/B0.
    const rows: readonly (readonly [number, number, number, number | null])[] = [
      [0.05, 0, 0.9999928197, null],
      [0.1, 0, 0.9998860577, null],
      [0.2, 0, 0.9982365016, null],
      [0.25, 0, 0.9958016347, null],
      [0.3, 0, 0.9915602735, null],
      [0.5, 0, 0.9458241852, null],
      [0, 0.1, 0.9999564047, 0],
      [0, 0.2, 0.9992833161, 0],
      [0, 0.3, 0.9962074995, 0],
      [0.1, 0.1, 1.0001856834, 6.0906e-5],
      [0.1, 0.2, 1.0006282144, -9.2876e-4],
      [0.2, 0.1, 0.9994543625, 1.4473e-3],
    ];
    const pair = equalPair(124, 0.15);
    const centre = pairField(pair, 0, 0).along_T;
    for (const [z, rho, along, outward] of rows) {
      const field = pairField(pair, z * 0.15, rho * 0.15);
      expect(Math.abs(field.along_T / centre - along)).toBeLessThan(1e-10);
      if (outward !== null) expect(Math.abs(field.outward_T / centre - outward)).toBeLessThan(5e-8);
    }
  });

  it('is free of sources and of currents between the loops', () => {
    // Maxwell: (1/rho) d(rho B_rho)/d rho + dB_z/dz = 0 and dB_z/d rho = dB_rho/dz, by central differences.
    const pair: LoopPair = { turns1: 90, turns2: 110, radius1_m: 0.12, radius2_m: 0.15, spacing_m: 0.14 };
    const h = 1e-5;
    for (const [z, rho] of [
      [0.01, 0.02],
      [-0.03, 0.05],
      [0.02, 3e-5],
    ] as const) {
      const dz = (k: 'along_T' | 'outward_T') =>
        (pairField(pair, z + h, rho)[k] - pairField(pair, z - h, rho)[k]) / (2 * h);
      const flux = (r: number) => r * pairField(pair, z, r).outward_T;
      const divergence = (flux(rho + h) - flux(rho - h)) / (2 * h * rho) + dz('along_T');
      const curl =
        (pairField(pair, z, rho + h).along_T - pairField(pair, z, rho - h).along_T) / (2 * h) - dz('outward_T');
      const size = pairField(pair, 0, 0).along_T / 0.12;
      expect(Math.abs(divergence) / size).toBeLessThan(1e-6);
      expect(Math.abs(curl) / size).toBeLessThan(1e-6);
    }
  });

  it('loses 0.6 of a relative error of spacing, and gains a u² term', () => {
    // Computed: spacing (1 + 0.01) R changes the centre by -5.99984e-3, (1 - 0.01) R by +5.99984e-3.
    const centre = pairField(equalPair(1, 1), 0, 0).along_T;
    expect(pairField(equalPair(1, 1, 1.01), 0, 0).along_T / centre - 1).toBeCloseTo(-5.99984e-3, 6);
    expect(pairField(equalPair(1, 1, 0.99), 0, 0).along_T / centre - 1).toBeCloseTo(5.99984e-3, 6);
    const bend = (spacing: number) => {
      const pair = equalPair(1, 1, spacing);
      return (pairField(pair, 0.01, 0).along_T / pairField(pair, 0, 0).along_T - 1) / 1e-4;
    };
    expect(bend(1.01)).toBeCloseTo(0.01914, 3);
    expect(bend(0.99)).toBeCloseTo(-0.01926, 3);
  });

  it('takes the mean over a bar as the average of the field along it', () => {
    const pair: LoopPair = { turns1: 100, turns2: 104, radius1_m: 0.15, radius2_m: 0.16, spacing_m: 0.17 };
    const length = 0.08;
    const n = 4000;
    let sum = 0;
    for (let i = 0; i < n; i++) sum += pairField(pair, length * ((i + 0.5) / n - 0.5), 0).along_T / n;
    expect(relative(meanPairField(pair, length), sum)).toBeLessThan(1e-8);
  });

  it('turns an evenly magnetised bar by 1 - (432/125) (L/2R)⁴ of the centre field', () => {
    // From the expansion above: the poles at the ends see B_z + the turning of the off-axis field, -144/125 · (1 + 2) u⁴.
    const pair = equalPair(1, 1);
    const centre = pairField(pair, 0, 0).along_T;
    for (const u of [0.05, 0.1]) {
      expect(turningPairField(pair, 2 * u) / centre - 1).toBeCloseTo(-(432 / 125) * u ** 4, 4);
    }
    // By the energy of a bar of poles, turned by finite differences, for a pair far from spacing = radius.
    const other: LoopPair = { turns1: 1, turns2: 1, radius1_m: 1, radius2_m: 1, spacing_m: 1.4 };
    const half = 0.3;
    const torque = (angle: number) => {
      let sum = 0;
      const n = 2000;
      for (let i = 0; i < n; i++) {
        const s = half * (2 * ((i + 0.5) / n) - 1);
        const field = pairField(other, s * Math.cos(angle), Math.abs(s * Math.sin(angle)));
        const outward = field.outward_T * Math.sign(s * Math.sin(angle));
        sum += (field.along_T * Math.cos(angle) + outward * Math.sin(angle)) / n;
      }
      return sum;
    };
    const h = 0.02;
    const stiffness = (2 * torque(0) - torque(h) - torque(-h)) / h ** 2;
    expect(relative(turningPairField(other, 2 * half), stiffness)).toBeLessThan(2e-4);
  });

  it('carries each dimension’s uncertainty by its sensitivity', () => {
    const coil = { turns_per_coil: 124, radius_m: 0.15, spacing_m: 0.15 };
    // k goes with 1/R at fixed shape, so the sensitivities to radius and spacing add up to -k/R; to spacing alone it is -0.6 k/R.
    const { value, rows } = coilConstant(
      { ...coil, u_radius_m: 5e-4, u_spacing_m: 5e-4, u_turns_per_coil: 1 },
      undefined,
    );
    const by = Object.fromEntries(rows.map((row) => [row.name, row.sensitivity]));
    expect(by['turns of a coil']).toBeCloseTo(value / 124, 10);
    expect((by['coil spacing']! * 0.15) / value).toBeCloseTo(-0.6, 5);
    expect((by['coil radius']! * 0.15) / value).toBeCloseTo(-0.4, 5);
    const typed = coilConstant({ constant_T_per_A: 7e-4, u_constant_T_per_A: 2e-6 }, undefined);
    expect([typed.value, typed.turningShift]).toEqual([7e-4, 0]);
    expect(typed.u).toBeCloseTo(2e-6, 15);
  });
});
