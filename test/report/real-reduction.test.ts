import Ajv from 'ajv/dist/2020.js';
import addFormats from 'ajv-formats';
import { describe, expect, it } from 'vitest';
import { reduce } from '../../src/reduction/reduce.ts';
import type { Point } from '../../src/reduction/reduction.ts';
import { resultsJsonSchema } from '../../src/report/json-schema.ts';
import { parseResults } from '../../src/report/read-results.ts';
import { reportPage } from '../../src/report/report-page.ts';
import type { Results } from '../../src/report/results.ts';
import { resultsText } from '../../src/report/results-json.ts';
import { resultsTable } from '../../src/report/results-table.ts';
import { exampleResults } from './support/results-fixture.ts';
import { elementsOf } from './support/well-formed.ts';

const ajv = new Ajv({ strict: true, allErrors: true, allowUnionTypes: true });
addFormats(ajv);
const validate = ajv.compile(resultsJsonSchema());

/** Frequency of a bar in the field B + k I, in which both have components along and across the coil axis; a fibre as well. */
function pointAt(current_A: number, i: number): Point {
  const along = 31e-6 + 5.65e-4 * current_A;
  const across = 5e-6;
  const field = Math.hypot(along, across);
  const f0 = Math.sqrt((8400 * field + 0.02) * (1 + 1e-5 * Math.sin(7 * i)));
  return {
    id: `s${i + 1}`,
    current_A,
    u_current_A: 0.0005,
    sweep: i < 5 ? 'rising' : 'falling',
    status: 'measured',
    f0_Hz: { value: f0, u: 4e-5, dof: 120 },
    equilibrium_rad: { value: Math.atan2(across, along), u: 3e-4, dof: 120 },
    viewFrame: 'A plan',
  };
}

const currents = [0, 0.1, 0.2, 0.3, 0.4, 0.3, 0.2, 0.1];
const reversed = [0.3, 0.15, 0.05, 0, -0.044, -0.12, -0.2, -0.34];

/** The example with the reduction that the program makes of these points. */
function resultsOf(points: readonly Point[], rig: { apparatus: boolean; place: boolean; draws: number }): Results {
  const { apparatus, place, segments, ...rest } = exampleResults();
  const [template] = segments;
  if (!template) throw new Error('the example has no segments');
  const rows = points.map((p) => ({
    ...template,
    id: p.id,
    current_A: p.current_A,
    u_current_A: p.u_current_A,
    sweep: p.sweep,
    f0_Hz: p.f0_Hz?.value ?? null,
    u_f0_Hz: p.f0_Hz?.u ?? null,
  }));
  const known = { ...(rig.apparatus && apparatus && { apparatus }), ...(rig.place && place && { place }) };
  return {
    ...rest,
    ...known,
    segments: rows,
    reduction: reduce({ points, ...known, monteCarloDraws: rig.draws, seed: 1 }),
  };
}

describe.each<[string, Results]>([
  ['a line', resultsOf(currents.map(pointAt), { apparatus: true, place: true, draws: 50 })],
  ['reversed currents', resultsOf(reversed.map(pointAt), { apparatus: true, place: false, draws: 0 })],
  ['no description of the rig', resultsOf(currents.map(pointAt), { apparatus: false, place: false, draws: 0 })],
  ['a single segment', resultsOf(currents.slice(0, 1).map(pointAt), { apparatus: true, place: true, draws: 0 })],
  ['no segment', resultsOf([], { apparatus: true, place: false, draws: 0 })],
])('a reduction of the program, of %s', (_, results) => {
  it('is written as the JSON Schema says', () => {
    validate(JSON.parse(resultsText(results)));
    expect(validate.errors ?? []).toEqual([]);
  });

  it('comes back from its file unchanged', () => {
    const text = resultsText(results);
    expect(JSON.parse(resultsText(parseResults(text, 'results.json')))).toEqual(JSON.parse(text));
  });

  it('is shown on page and terminal with no number that is none', () => {
    const page = reportPage(results);
    expect(elementsOf(page).length).toBeGreaterThan(50);
    for (const text of [page, resultsTable(results)]) expect(text).not.toMatch(/undefined|NaN|Infinity|\[object/);
  });
});
