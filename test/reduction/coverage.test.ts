import { describe, expect, it } from 'vitest';
import { type Random, seededRandom } from '../../src/numerics/random.ts';
import { reduce } from '../../src/reduction/reduce.ts';
import type { ResultName } from '../../src/reduction/reduction.ts';
import { apparatusOf, type Bench, bench, bothSides, type Care, oneSide, pointsAt, stiffnessOf } from './bench.ts';

const runs = 120;

interface Trial {
  readonly bench: Bench;
  readonly currents: readonly number[];
  readonly care: Care;
  /** A stiffness is typed, with this relative uncertainty. */
  readonly given?: number;
  /** The bench of each run, drawn; absent: always the same. */
  readonly drawn?: (random: Random) => Partial<Bench>;
  readonly truths: readonly ResultName[];
}

const degree = Math.PI / 180;

/** What a result should be at a bench; with frequencies alone the field is its part along the coil axis. */
function truthOf(name: ResultName, b: Bench, horizontal: boolean): number {
  const field = b.ambient_T * (horizontal ? 1 : Math.cos(b.misalignment_rad));
  const truths: { [name in ResultName]?: number } = {
    ambient_T: field,
    apparent_ambient_T: field + b.fibreShare * b.ambient_T,
    moment_A_m2: b.moment_A_m2,
    fibre_stiffness_N_m_per_rad: stiffnessOf(b),
    misalignment_deg: b.misalignment_rad / degree,
  };
  return truths[name] ?? Number.NaN;
}

/** Share of sweeps, drawn with errors of the stated size, whose 95 % interval holds the truth. */
function coverage({ bench: usual, currents, care, given, drawn, truths }: Trial): { [name in ResultName]?: number } {
  const hits: { [name in ResultName]?: number } = {};
  for (let run = 0; run < runs; run++) {
    const b = { ...usual, ...drawn?.(seededRandom(400_000 + run)) };
    const apparatus = apparatusOf(b, 0.002, 70_000 + run);
    const typed = stiffnessOf(b) * (1 + (given ?? 0) * seededRandom(90_000 + run).gaussian());
    const fibre = { stiffness_N_m_per_rad: typed, u_stiffness_N_m_per_rad: (given ?? 0) * stiffnessOf(b) };
    const r = reduce({
      points: pointsAt(b, currents, { ...care, seed: 1000 + run }),
      apparatus: given === undefined ? apparatus : { ...apparatus, fibre },
    });
    for (const name of truths) {
      const budget = r.budget[name];
      const truth = truthOf(name, b, r.model?.kind === 'turning');
      const holds = budget !== undefined && Math.abs(budget.value - truth) < budget.expanded_u;
      hits[name] = (hits[name] ?? 0) + (holds ? 1 / runs : 0);
    }
  }
  return hits;
}

/** 95 % less three and a half standard deviations of so many trials. The guide for contributors has the shares of long runs. */
const least = 0.95 - 3.5 * Math.sqrt((0.95 * 0.05) / runs);

describe('95 % intervals hold the truth', () => {
  const onlyF0: Care = { u_f0_relative: 1e-4, u_current_A: 1e-3, u_angle_rad: null };
  const fine: Care = { u_f0_relative: 1e-4, u_current_A: 3e-4, u_angle_rad: 1e-3 };
  const tilted: Bench = { ...bench, misalignment_rad: 0.15, turn: 'with the field', twist_rad: 0.1 };
  const common = ['ambient_T', 'moment_A_m2', 'fibre_stiffness_N_m_per_rad'] as const;
  const laid = (random: Random) => ({ misalignment_rad: 5 * degree * random.gaussian() });
  const twisted = (random: Random) => ({ ...laid(random), twist_rad: 15 * degree * random.gaussian() });
  // A share of the whole torque, as it is assumed, from none to a tenth.
  const shared = (random: Random) => ({ ...laid(random), fibreShare: 1 / (1 - 0.1 * random.uniform()) - 1 });
  const trials: [string, Trial][] = [
    [
      'a straight line: field with and without the fibre’s share, moment',
      {
        bench,
        currents: oneSide,
        care: onlyF0,
        drawn: shared,
        truths: ['apparent_ambient_T', 'ambient_T', 'moment_A_m2'],
      },
    ],
    [
      'a straight line whose points scatter three times more than they say',
      { bench, currents: oneSide, care: { ...onlyF0, scatter: 3 }, truths: ['apparent_ambient_T', 'moment_A_m2'] },
    ],
    [
      'two branches, the fibre set back: field, moment, stiffness',
      { bench, currents: bothSides, care: { ...fine, u_angle_rad: null }, drawn: laid, truths: common },
    ],
    [
      'two branches, the fibre twisted: field, moment, stiffness',
      {
        bench: { ...bench, turn: 'with the field' },
        currents: bothSides,
        care: { ...fine, u_angle_rad: null },
        drawn: twisted,
        truths: common,
      },
    ],
    [
      'a misalignment that frequencies only just show: field, moment, stiffness',
      {
        bench: { ...bench, misalignment_rad: 6 * degree },
        currents: bothSides,
        care: { ...fine, u_angle_rad: null },
        truths: common,
      },
    ],
    [
      'frequencies and directions: field, moment, stiffness, direction',
      { bench: tilted, currents: bothSides, care: fine, truths: [...common, 'misalignment_deg'] },
    ],
    [
      'stiffness given: field, moment, stiffness',
      { bench, currents: oneSide, care: onlyF0, given: 0.05, drawn: laid, truths: common },
    ],
  ];
  it.each(trials)('%s', (_name, trial) => {
    const found = coverage(trial);
    expect(Object.keys(found)).toEqual([...trial.truths]);
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
