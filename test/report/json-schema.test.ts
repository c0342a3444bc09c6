import Ajv from 'ajv/dist/2020.js';
import addFormats from 'ajv-formats';
import { describe, expect, it } from 'vitest';
import { columns } from '../../src/report/columns.ts';
import {
  RESULTS_SCHEMA_ID,
  resultsJsonSchema,
  SESSION_SCHEMA_ID,
  schemaText,
  sessionJsonSchema,
} from '../../src/report/json-schema.ts';
import { resultsText } from '../../src/report/results-json.ts';
import { exampleResults } from './support/results-fixture.ts';

/** An independent validator of JSON Schema draft 2020-12. */
function validator(schema: object) {
  const ajv = new Ajv({ strict: true, allErrors: true, allowUnionTypes: true });
  addFormats(ajv);
  const validate = ajv.compile(schema);
  return (value: unknown) =>
    validate(value) ? [] : (validate.errors ?? []).map((e) => `${e.instancePath} ${e.message}`);
}

const session = () => ({
  format: 'needlebeat/session',
  version: 1,
  title: 'Boathouse bench, evening run',
  recordings: [{ id: 'A', file: 'evening.mp4', time_scale: 1, u_time_scale: 2e-5 }],
  apparatus: {
    coil: { turns_per_coil: 124, radius_m: 0.15, u_radius_m: 0.0005, spacing_m: 0.15 },
    magnet: { shape: 'cylinder', mass_kg: 0.0187, length_m: 0.06, diameter_m: 0.008 },
  },
  place: { latitude_deg: 54.2, longitude_deg: 10.4, height_m: 12, date: '2026-11-28' },
  views: [{ id: 'v1', recording: 'A', kind: 'plan', region: { x: 412, y: 220, width: 460, height: 460 } }],
  segments: [
    { id: 's01', recording: 'A', view: 'v1', start_s: 3.2, end_s: 31, current_A: null, sweep: 'rising', note: '' },
  ],
});

describe('the JSON Schema files', () => {
  // Written anew by `npx vitest run test/report/json-schema.test.ts -u` after a change of a scheme.
  it('are what the schemes of the program generate', async () => {
    await expect(schemaText(sessionJsonSchema())).toMatchFileSnapshot('../../src/report/schema/session.schema.json');
    await expect(schemaText(resultsJsonSchema())).toMatchFileSnapshot('../../src/report/schema/results.schema.json');
  });

  it('name themselves by URN and need nothing fetched', () => {
    for (const [schema, id] of [
      [sessionJsonSchema(), SESSION_SCHEMA_ID],
      [resultsJsonSchema(), RESULTS_SCHEMA_ID],
    ] as const) {
      expect(schema).toMatchObject({ $schema: 'https://json-schema.org/draft/2020-12/schema', $id: id });
      expect(JSON.stringify(schema)).not.toMatch(/"\$ref":"(?!#)/);
    }
  });

  it('accept results as they are written', () => {
    const errors = validator(resultsJsonSchema())(JSON.parse(resultsText(exampleResults())));
    expect(errors).toEqual([]);
  });

  it('refuse results with a field missing, of the wrong type or beyond its values', () => {
    const validate = validator(resultsJsonSchema());
    const changed = (change: (value: Record<string, never>) => void) => {
      const value = JSON.parse(resultsText(exampleResults()));
      change(value);
      return validate(value);
    };
    // biome-ignore lint/suspicious/noExplicitAny: the point is to write what the type forbids.
    type Anything = any;
    expect(changed((v: Anything) => delete v.segments[0].f0_Hz)).toEqual([
      "/segments/0 must have required property 'f0_Hz'",
    ]);
    expect(changed((v: Anything) => Object.assign(v.segments[1], { u_f0_Hz: '0.1' })).join()).toMatch(
      /\/segments\/1\/u_f0_Hz/,
    );
    expect(changed((v: Anything) => Object.assign(v.segments[1], { status: 'fine' })).join()).toMatch(
      /\/segments\/1\/status/,
    );
    expect(changed((v: Anything) => delete v.reduction.ambient_T)).toEqual([
      "/reduction must have required property 'ambient_T'",
    ]);
  });

  it('accept a session and refuse unknown keys, wrong types and other versions as the program does', () => {
    const validate = validator(sessionJsonSchema());
    expect(validate(session())).toEqual([]);
    expect(validate({ ...session(), colour: 'red' })).toEqual([' must NOT have additional properties']);
    expect(validate({ ...session(), version: 2 })).not.toEqual([]);
    expect(validate({ ...session(), place: { ...session().place, date: '28.11.2026' } })).not.toEqual([]);
    const [segment] = session().segments;
    expect(validate({ ...session(), segments: [{ ...segment, start_s: '3,2' }] })).not.toEqual([]);
    expect(validate({ ...session(), segments: [{ ...segment, id: 'a\u0000b' }] })).not.toEqual([]);
  });

  it('describe what every column of the table means', () => {
    // biome-ignore lint/suspicious/noExplicitAny: a schema is read here as any program would.
    const schema = resultsJsonSchema() as any;
    const segment = schema.properties.segments.items.properties;
    for (const column of columns) {
      expect(segment[column.name].description, column.name).toContain(
        column.name === 'id' ? 'unique' : column.description,
      );
    }
    expect(schema.properties.reduction.properties.u_ambient_T.description).toBe(
      'Standard uncertainty (k = 1) of ambient_T.',
    );
  });
});
