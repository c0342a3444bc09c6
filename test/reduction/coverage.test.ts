import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { reduce } from '../../src/reduction/reduce.ts';
import type { ResultName } from '../../src/reduction/reduction.ts';
import { apparatusOf, type Bench, bench, bothSides, type Care, oneSide, pointsAt, stiffnessOf } from './bench.ts';

const runs = 200;

interface Trial {
  readonly bench: Bench;
  readonly currents: readonly number[];
  readonly care: Care;
  /** A stiffness is typed, with this relative uncertainty. */
  readonly given?: number;
  readonly truths: { readonly [name in ResultName]?: number };
}

/** Share of sweeps, drawn with errors of the stated size, whose 95 % interval holds the truth. */
function coverage({ bench: b, currents, care, given, truths }: Trial): { [name in ResultName]?: number } {
  const hits: { [name in ResultName]?: number } = {};
  for (let run = 0; run < runs; run++) {
    const apparatus = apparatusOf(b, 0.002, 70_000 + run);
    const typed = stiffnessOf(b) * (1 + (given ?? 0) * seededRandom(90_000 + run).gaussian());
    const fibre = { stiffness_N_m_per_rad: typed, u_stiffness_N_m_per_rad: (given ?? 0) * stiffnessOf(b) };
    const r = reduce({
      points: pointsAt(b, currents, { ...care, seed: 1000 + run }),
      apparatus: given === undefined ? apparatus : { ...apparatus, fibre },
    });
    for (const [name, truth] of Object.entries(truths) as [ResultName, number][]) {
      const budget = r.budget[name];
      const holds = budget !== undefined && Math.abs(budget.value - truth) < budget.expanded_u;
      hits[name] = (hits[name] ?? 0) + (holds ? 1 / runs : 0);
    }
  }
  return hits;
}

/** 95 % less three and a half standard deviations of so many trials; from above only where the model says no more than it knows. */
const least = 0.95 - 3.5 * Math.sqrt((0.95 * 0.05) / runs);

describe('95 % intervals hold the truth', () => {
  const onlyF0: Care = { u_f0_relative: 1e-4, u_current_A: 1e-3, u_angle_rad: null };
  const fine: Care = { u_f0_relative: 1e-4, u_current_A: 3e-4, u_angle_rad: 1e-3 };
  const tilted: Bench = { ...bench, misalignment_rad: 0.15, turn: 'with the field', twist_rad: 0.1 };
  const common = { moment_A_m2: bench.moment_A_m2, fibre_stiffness_N_m_per_rad: stiffnessOf(bench) };
  const trials: [string, Trial][] = [
    [
      'a straight line: field with the fibre’s share, moment',
      {
        bench,
        currents: oneSide,
        care: onlyF0,
        truths: {
          apparent_ambient_T: bench.ambient_T * 1.07,
          ambient_T: bench.ambient_T,
          moment_A_m2: bench.moment_A_m2,
        },
      },
    ],
    [
      'a straight line whose points scatter three times more than they say',
      {
        bench,
        currents: oneSide,
        care: { ...onlyF0, scatter: 3 },
        truths: { apparent_ambient_T: bench.ambient_T * 1.07, moment_A_m2: bench.moment_A_m2 },
      },
    ],
    [
      'two branches: field, moment, stiffness',
      {
        bench,
        currents: bothSides,
        care: { ...fine, u_angle_rad: null },
        truths: { ...common, ambient_T: bench.ambient_T },
      },
    ],
    [
      'frequencies and directions: field, moment, stiffness, direction',
      {
        bench: tilted,
        currents: bothSides,
        care: fine,
        truths: { ...common, ambient_T: bench.ambient_T, misalignment_deg: (0.15 * 180) / Math.PI },
      },
    ],
    [
      'stiffness given: field, moment, stiffness',
      { bench, currents: oneSide, care: onlyF0, given: 0.05, truths: { ...common, ambient_T: bench.ambient_T } },
    ],
  ];
  it.each(trials)('%s', (_name, trial) => {
    const found = coverage(trial);
    expect(Object.keys(found)).toEqual(Object.keys(trial.truths));
    for (const [name, share] of Object.entries(found)) expect(share, `${name}: ${share}`).toBeGreaterThan(least);
  });

  it('and are not wider than they need be: standardised errors scatter by about one', () => {
    let sum = 0;
    for (let run = 0; run < runs; run++) {
      const r = reduce({
        points: pointsAt(tilted, bothSides, { ...fine, seed: 5000 + run }),
        apparatus: apparatusOf(bench),
      });
      sum += ((r.ambient_T! - bench.ambient_T) / r.u_ambient_T!) ** 2 / runs;
    }
    expect(Math.sqrt(sum)).toBeGreaterThan(0.8);
    expect(Math.sqrt(sum)).toBeLessThan(1.2);
  });
});
