import { studentQuantile } from '../numerics/distributions.ts';
import { type Contribution, combinedUncertainty, effectiveDof } from '../numerics/welch-satterthwaite.ts';
import { type ErrorParts, expandedUncertainty } from './coverage-factor.ts';
import type { Budget, BudgetRow, ResultName } from './reduction.ts';
import { type ResultValues, resultNames, resultUnits } from './results.ts';
import type { Source } from './sources.ts';

/** Standard uncertainty of one result, from all its sources. */
export function uncertaintyOf(name: ResultName, sources: readonly Source[]): number {
  return combinedUncertainty(contributions(name, sources));
}

/** The budget of one result: rows largest first, those of one name put together; effective degrees of freedom; 95 % interval. */
export function budgetOf(name: ResultName, value: number, sources: readonly Source[]): Budget {
  const relevant = sources.filter((source) => source.sensitivity[name] !== undefined);
  const u = uncertaintyOf(name, relevant);
  const dof = effectiveDof(contributions(name, relevant));
  const expanded_u = expandedUncertainty(partsOf(name, relevant));
  const rows = new Map<string, Source[]>();
  for (const source of relevant) rows.set(source.row, [...(rows.get(source.row) ?? []), source]);
  return {
    value,
    u,
    unit: resultUnits[name],
    rows: [...rows].map(([row, members]) => rowOf(name, row, members)).sort((a, b) => b.contribution - a.contribution),
    effective_dof: finite(dof),
    coverage_factor: u > 0 ? expanded_u / u : studentQuantile(0.975, Math.max(dof, 1)),
    expanded_u,
  };
}

/** What is known of the distribution of one result's error. */
function partsOf(name: ResultName, sources: readonly Source[]): ErrorParts {
  const of = (law: Source['law']) => sources.filter((source) => source.law === law);
  const normal = contributions(name, of('normal'));
  const groups = new Map<string, { shift: number; weight: number }[]>();
  for (const { row, u, sensitivity } of of('either')) {
    groups.set(row, [...(groups.get(row) ?? []), { shift: sensitivity[name] ?? 0, weight: u * u }]);
  }
  return {
    u: combinedUncertainty(normal),
    dof: effectiveDof(normal),
    halfWidths: of('even').map(({ u, sensitivity }) => Math.sqrt(3) * u * Math.abs(sensitivity[name] ?? 0)),
    alternatives: [...groups.values()],
  };
}

/** Correlation coefficients of the results that are not null, from the sources they share. */
export function correlationOf(
  values: ResultValues,
  sources: readonly Source[],
): { results: ResultName[]; matrix: number[][] } {
  const names = resultNames.filter((name) => values[name] !== null && uncertaintyOf(name, sources) > 0);
  const covariance = (a: ResultName, b: ResultName) =>
    sources.reduce((sum, { u, sensitivity }) => sum + (sensitivity[a] ?? 0) * (sensitivity[b] ?? 0) * u * u, 0);
  const matrix = names.map((a) =>
    names.map((b) => (a === b ? 1 : covariance(a, b) / Math.sqrt(covariance(a, a) * covariance(b, b)))),
  );
  return { results: names, matrix };
}

/** Contributions to one result, with those that were raised by one factor put together, since they share its degrees of freedom. */
function contributions(name: ResultName, sources: readonly Source[]): Contribution[] {
  const alone: Contribution[] = [];
  const pools = new Map<string, { square: number; dof: number }>();
  for (const { sensitivity, u, dof, pool } of sources) {
    const part = Math.abs(sensitivity[name] ?? 0) * u;
    if (pool === null) alone.push({ u: part, dof });
    else pools.set(pool, { square: (pools.get(pool)?.square ?? 0) + part * part, dof });
  }
  return [...alone, ...[...pools.values()].map(({ square, dof }) => ({ u: Math.sqrt(square), dof }))];
}

function rowOf(name: ResultName, row: string, members: readonly Source[]): BudgetRow {
  const parts = contributions(name, members);
  const [first] = members as [Source];
  const single = members.length === 1;
  return {
    input: row,
    value: single ? first.value : null,
    u: single ? first.u : null,
    unit: first.unit,
    sensitivity: single ? first.sensitivity[name]! : null,
    contribution: combinedUncertainty(parts),
    dof: finite(effectiveDof(parts)),
  };
}

function finite(dof: number): number | null {
  return Number.isFinite(dof) ? dof : null;
}
