import { basename } from 'node:path';
import { InputError } from '../recording/input-error.ts';
import { firstIssue } from '../session/issue-sentence.ts';
import { parseJson, readJsonBytes } from '../session/read-session.ts';
import type { Results } from './results.ts';
import { resultsSchema } from './results-schema.ts';

/**
 * Reads and checks a results file.
 * @throws InputError with one sentence that names the file and the field and says what is expected.
 */
export async function readResults(path: string): Promise<Results> {
  const bytes = await readJsonBytes(path, 'a results file (results.json)');
  return parseResults(bytes.toString('utf8'), basename(path));
}

/**
 * Checks the text of a results file. Values that were added to the format later may be missing and count as not to be had.
 * @param name what to call the file in an error.
 * @throws InputError as `readResults`.
 */
export function parseResults(text: string, name: string): Results {
  const value = parseJson(text, name);
  refuseSession(value, name);
  const result = resultsSchema.safeParse(value);
  if (!result.success) throw new InputError(`${name}: ${firstIssue(result.error, value)}`);
  checkSegments(result.data.segments, name);
  const { apparatus, place, ...rest } = result.data;
  return { ...rest, ...(apparatus && { apparatus }), ...(place && { place }) };
}

/** The file most easily taken for a results file deserves its own sentence. */
function refuseSession(value: unknown, name: string): void {
  if (typeof value === 'object' && value !== null && 'format' in value && value.format === 'needlebeat/session') {
    throw new InputError(
      `${name}: this is a session file; a results file (results.json), which measuring a session writes, was expected.`,
    );
  }
}

function checkSegments(segments: Results['segments'], name: string): void {
  const seen = new Set<string>();
  for (const { id, f0_Hz, u_f0_Hz, status } of segments) {
    if (seen.has(id))
      throw new InputError(`${name}: segments: two entries have the id "${id}"; each id must be unique.`);
    seen.add(id);
    if (status !== 'unmeasured' && (f0_Hz === null || u_f0_Hz === null)) {
      throw new InputError(
        `${name}: segment ${id}: its status is "${status}", so f0_Hz and u_f0_Hz must be numbers, not null.`,
      );
    }
  }
}
