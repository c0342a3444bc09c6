import { z } from 'zod';
import { sessionSchema } from '../session/session.ts';
import { columns } from './columns.ts';
import { fieldDescriptions } from './field-descriptions.ts';
import { quantities } from './quantities.ts';
import { resultsSchema } from './results-schema.ts';

/** Name of the schema of session files; a URN, since there is no place on the web to fetch it from. */
export const SESSION_SCHEMA_ID = 'urn:needlebeat:schema:session:1';
/** Name of the schema of results files, likewise. */
export const RESULTS_SCHEMA_ID = 'urn:needlebeat:schema:results:1';

/** JSON Schema (draft 2020-12) of a session file. What fields say of each other (overlaps, unknown ids) is beyond it. */
export function sessionJsonSchema(): object {
  return published(sessionSchema, SESSION_SCHEMA_ID, 'Session of Needlebeat: what a user decided about recordings');
}

/** JSON Schema (draft 2020-12) of a results file as this program writes it; a reader may meet further keys. */
export function resultsJsonSchema(): object {
  return published(resultsSchema, RESULTS_SCHEMA_ID, 'Results of Needlebeat: segments, frequencies and reduction');
}

/** The text of a schema's file. */
export function schemaText(schema: object): string {
  return `${JSON.stringify(schema, null, 2)}\n`;
}

function published(schema: z.ZodType, id: string, title: string): object {
  const generated = z.toJSONSchema(schema, {
    target: 'draft-2020-12',
    io: 'output',
    override: ({ zodSchema, jsonSchema }) => {
      // Only an object that refuses unknown keys when it is read says so.
      const { catchall } = zodSchema._zod.def as { catchall?: z.core.$ZodType };
      if (jsonSchema.properties && catchall?._zod.def.type !== 'never') delete jsonSchema.additionalProperties;
    },
  });
  // The generator hands out one object for a scheme that is used twice: as text each place gets its own.
  const { $schema, ...rest } = JSON.parse(JSON.stringify(generated)) as Node;
  return { $schema, $id: id, title, ...(described(rest) as Node) };
}

type Node = { [key: string]: unknown };

/** The same schema with a description at every property that has none and whose name has one. */
function described(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(described);
  if (typeof value !== 'object' || value === null) return value;
  const node = Object.fromEntries(Object.entries(value).map(([key, part]) => [key, described(part)]));
  if (typeof node.properties !== 'object' || node.properties === null) return node;
  const properties = Object.entries(node.properties).map(([name, property]: [string, Node]) => {
    const description = property.description ?? descriptions.get(name);
    return [name, description === undefined ? property : { ...property, description }];
  });
  return { ...node, properties: Object.fromEntries(properties) };
}

/** One description per key: a name means the same wherever it stands. */
const descriptions: ReadonlyMap<string, string> = new Map([
  ...columns.map((c): [string, string] => [c.name, c.unit ? `${c.description} Unit: ${c.unit.text}.` : c.description]),
  ...quantities.map((q): [string, string] => [q.name, q.description]),
  ...quantities.map((q): [string, string] => [`u_${q.name}`, `Standard uncertainty (k = 1) of ${q.name}.`]),
  ...Object.entries(fieldDescriptions),
]);
