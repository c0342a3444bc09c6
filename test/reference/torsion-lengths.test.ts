import { describe, expect, it } from 'vitest';
import { fibreFromLengths } from '../../src/reduction/fibre-lengths.ts';
import { fibreFindings } from '../../src/reduction/fibre-sources.ts';
import { inertia } from '../../src/reduction/inertia.ts';

/**
 * 10th Asian Physics Olympiad, experiment 1, official solution of 28 April 2009: time for ten oscillations of a magnet on nylon
 * against the string's length.
 */
const table = [
  [2, 9.38],
  [4, 9.69],
  [6, 9.9],
  [8, 10.13],
  [10, 10.13],
  [12, 10.22],
  [14, 10.12],
  [25, 10.12],
] as const;

describe('torsion against length (Asian Physics Olympiad 2009)', () => {
  const runs = table.map(([length_cm, ten_s]) => ({
    length_m: length_cm / 100,
    u_length_m: 0,
    f0_Hz: { value: 10 / ten_s, u: 0 },
  }));
  const line = fibreFromLengths(runs)!;

  it('separates field and fibre by least squares of 1/T² on 1/length', () => {
    // Our reduction of the published table: 0.94339181(0.0094) s⁻², 3.99571863e-3 (4.30e-4) m s⁻², scatter 0.017019 s⁻².
    expect(line.magnetic_Hz2.value).toBeCloseTo(0.94339181, 8);
    expect(line.slope_Hz2_m.value).toBeCloseTo(3.99571863e-3, 10);
    expect(line.magnetic_Hz2.u).toBeCloseTo(0.0094, 4);
    expect(line.slope_Hz2_m.u).toBeCloseTo(4.3e-4, 6);
    expect(line.scatter_Hz2).toBeCloseTo(0.017019, 6);
    const share = (length_m: number) => {
      const fibre = line.slope_Hz2_m.value / length_m;
      return fibre / (line.magnetic_Hz2.value + fibre);
    };
    expect(share(0.02)).toBeCloseTo(0.175, 3);
    expect(share(0.1)).toBeCloseTo(0.041, 3);
    expect(share(0.25)).toBeCloseTo(0.017, 3);
  });

  it('gives the same line with equal weights, and the stiffness at a length', () => {
    const weighted = fibreFromLengths(
      runs.map((run) => ({ ...run, f0_Hz: { value: run.f0_Hz.value, u: 0.001 / (2 * run.f0_Hz.value) } })),
    )!;
    expect(weighted.magnetic_Hz2.value).toBeCloseTo(line.magnetic_Hz2.value, 9);
    // Raised to the scatter, the uncertainties are those of the plain line.
    expect(weighted.magnetic_Hz2.u / line.magnetic_Hz2.u).toBeCloseTo(1, 6);
    const fibre = {
      length_m: 0.1,
      runs_at_lengths: runs.map(({ length_m, f0_Hz }) => ({ length_m, f0_Hz: f0_Hz.value })),
    };
    const magnet = inertia({ inertia_kg_m2: 2e-6, u_inertia_kg_m2: 2e-8 });
    const [found] = fibreFindings({ fibre }, [], magnet).sources;
    const stiffness = found!.stiffness_N_m_per_rad!;
    expect(stiffness).toBeCloseTo(4 * Math.PI ** 2 * 2e-6 * 0.0399571863, 12);
    const relative = Math.hypot(line.slope_Hz2_m.u / line.slope_Hz2_m.value, 0.01);
    expect(found!.u_stiffness_N_m_per_rad! / stiffness).toBeCloseTo(relative, 6);
  });

  it('needs two lengths, and three without uncertainties', () => {
    expect(fibreFromLengths(runs.slice(0, 1))).toBeNull();
    expect(fibreFromLengths(runs.slice(0, 2))).toBeNull();
    expect(fibreFromLengths([runs[0]!, runs[0]!, runs[0]!])).toBeNull();
  });
});
