import { type Random, seededRandom } from '../numerics/random.ts';
import { mean, quantile, standardDeviation } from '../numerics/statistics.ts';
import { acrossShifts } from './across-shift.ts';
import { u_misalignment_rad } from './assumptions.ts';
import type { Scenario } from './candidates.ts';
import type { MonteCarlo, ResultName } from './reduction.ts';
import { type ResultInputs, resultNames, results } from './results.ts';
import type { Derived } from './sensitivity.ts';
import type { SourceContext } from './sources.ts';
import { fitSweep, type SweepFit } from './sweep-fit.ts';
import { at } from './sweep-model.ts';

/**
 * Draws every input from its distribution (normal; even for a share that is assumed; the inputs of coil and bar through the full formulas), fits again and
 * collects the results: propagation of distributions, JCGM 101:2008, clause 7, as a check of the budget's linear
 * sensitivities. `u` gives the budget's standard uncertainties.
 */
export function monteCarlo(
  context: SourceContext,
  draws: number,
  seed: number,
  u: (name: ResultName) => number,
): MonteCarlo {
  const random = seededRandom(seed);
  const base = results(context.inputs);
  const names = resultNames.filter((name) => base[name] !== null && u(name) > 0);
  const samples = new Map(names.map((name) => [name, [] as number[]]));
  let failed = 0;
  for (let draw = 0; draw < draws; draw++) {
    const inputs = drawInputs(context, random);
    if (inputs === null) {
      failed++;
      continue;
    }
    const values = results(inputs);
    for (const name of names) samples.get(name)!.push(near(name, values[name]!, base[name]!));
  }
  const collected = draws - failed < 2 ? [] : names;
  return {
    draws,
    failed,
    seed,
    results: collected.map((name) => {
      const sample = samples.get(name)!;
      const spread = standardDeviation(sample);
      return {
        name,
        mean: mean(sample),
        u: spread,
        low: quantile(sample, 0.025),
        high: quantile(sample, 0.975),
        u_over_budget: spread / u(name),
      };
    }),
  };
}

/** A direction of a line, in the half turn about the one it is compared with. */
function near(name: ResultName, value: number, base: number): number {
  return name === 'misalignment_deg' ? value - 180 * Math.round((value - base) / 180) : value;
}

/** The scenario in which a running sum of the weights passes `share`. */
function oneOf(scenarios: readonly Scenario[], share: number): SweepFit {
  let rest = share;
  const found = scenarios.find(({ weight }) => {
    rest -= weight;
    return rest <= 0;
  });
  return (found ?? scenarios[scenarios.length - 1]!).fit;
}

function drawInputs(context: SourceContext, { gaussian, uniform }: Random): ResultInputs | null {
  const { inputs, coil, inertia, candidate, meter, fibre } = context;
  const drawn = new Map<string, number>();
  const draw = (derived: Derived) =>
    derived.of(
      derived.rows.map(({ name, value, u }) => {
        const known = drawn.get(name) ?? value + u * gaussian();
        drawn.set(name, known);
        return known;
      }),
    );
  const k = coil === null ? null : draw(coil);
  const uneven = coil === null ? 0 : (coil.turningShift / Math.sqrt(3)) * gaussian();
  const j = inertia === null ? null : draw(inertia);
  const apart = { coil_T_per_A: k, felt_T_per_A: k === null ? null : k * (1 + uneven), inertia_kg_m2: j };
  if (candidate === null) return { ...inputs, ...apart };
  const { data, scenarios } = candidate;
  const fit = scenarios.length > 0 ? oneOf(scenarios, uniform()) : candidate.fit;
  const clock = 1 + Math.max(...data.u_clock) * gaussian();
  const scale = 1 + (meter?.u_gain ?? 0) * gaussian();
  const zero = (meter?.u_zero_A ?? 0) * gaussian();
  const bend =
    fit.model.fixed.across && scenarios.length === 0
      ? acrossShifts(fit, data.current_A, u_misalignment_rad * gaussian())
      : null;
  const known = fibre === null || candidate.fibre !== 'given' ? null : draw(fibre) + fibre.byClock * (clock - 1);
  const priors = fit.model.priors.map((prior) => {
    if (prior.parameter !== at.fibre) return { ...prior, value: prior.value + prior.u * gaussian() };
    // A share that is only assumed lies anywhere within its limit.
    return { ...prior, value: known ?? prior.value + prior.u * Math.sqrt(3) * (2 * uniform() - 1) };
  });
  const moved = {
    ...data,
    y: data.y.map((y, i) => (y + data.u_y[i]! * gaussian()) * clock ** 2 + (bend?.[i] ?? 0)),
    current_A: data.current_A.map((current, i) => (current + data.u_current_A[i]! * gaussian()) * scale + zero),
    angle: data.angle.map((angle, i) => angle + data.u_angle[i]! * gaussian()),
  };
  const assumed = candidate.fibre === 'assumed' ? priors.find(({ parameter }) => parameter === at.fibre) : undefined;
  const start = fit.parameters.slice();
  if (assumed !== undefined) start[at.fibre] = assumed.value;
  const fixed = { ...fit.model.fixed, fibre: fit.model.fixed.fibre || assumed !== undefined };
  const again = fitSweep(moved, { ...fit.model, priors, fixed }, start);
  if (again === null) return null;
  // A share and an untwisted direction drawn together turn the rest directions: their product needs no draw of its own.
  return { ...inputs, ...apart, parameters: again.parameters };
}
