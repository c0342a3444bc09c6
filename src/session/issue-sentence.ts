import type { z } from 'zod';

type Issue = z.core.$ZodIssue;

/** One sentence about the first thing that is wrong with `value`: which field, what was expected, what stands there. */
export function firstIssue(error: z.ZodError, value: unknown): string {
  const issue = deepest(error.issues[0] as Issue, []);
  const field = fieldName(issue.path, value);
  if (issue.code === 'unrecognized_keys') {
    const keys = issue.keys.map((key) => `"${key}"`).join(', ');
    return `${field || 'the top level'} has ${issue.keys.length > 1 ? 'unknown keys' : 'an unknown key'} ${keys}.`;
  }
  const found = at(value, issue.path);
  const said = found === undefined ? 'it is missing' : `not ${shortly(found)}`;
  return `${field || 'the top level'} must be ${expectation(issue)}; ${said}.`;
}

/** Follows unions down to the complaint of the branch that fits best, with its full path. */
function deepest(issue: Issue, path: readonly PropertyKey[]): Issue & { path: PropertyKey[] } {
  const full = [...path, ...issue.path];
  if (issue.code === 'invalid_union' && issue.errors.length > 0) {
    const best = [...issue.errors].sort((a, b) => mismatch(a) - mismatch(b))[0];
    if (best?.[0]) return deepest(best[0], full);
  }
  return { ...issue, path: full };
}

/** How badly a branch of a union misses: a key that it doesn't know weighs as much as a field that is wrong. */
function mismatch(issues: readonly Issue[]): number {
  return issues.reduce((sum, issue) => {
    if (issue.code === 'unrecognized_keys') return sum + issue.keys.length;
    if (issue.code === 'invalid_union')
      return sum + (issue.errors.length ? Math.min(...issue.errors.map(mismatch)) : 0.5);
    return sum + 1;
  }, 0);
}

function expectation(issue: Issue): string {
  switch (issue.code) {
    case 'invalid_type':
      return withArticle(issue.expected);
    case 'too_small':
      return issue.origin === 'number' || issue.origin === 'int'
        ? `a number ${issue.inclusive ? 'of at least' : 'above'} ${issue.minimum}`
        : `of length ${issue.minimum} or more`;
    case 'too_big':
      return issue.origin === 'number' || issue.origin === 'int'
        ? `a number ${issue.inclusive ? 'of at most' : 'below'} ${issue.maximum}`
        : `of length ${issue.maximum} or less`;
    case 'invalid_value':
      return issue.values.map((v) => JSON.stringify(v)).join(' or ');
    case 'invalid_union':
      return 'options' in issue && Array.isArray(issue.options)
        ? issue.options.map((option: unknown) => JSON.stringify(option)).join(' or ')
        : 'of a known kind';
    case 'invalid_format':
      return issue.format === 'date' ? 'a date as YYYY-MM-DD' : 'a name without control characters';
    default:
      return `valid (${issue.message})`;
  }
}

function withArticle(type: string): string {
  if (type === 'object') return 'an object';
  if (type === 'array') return 'a list';
  if (type === 'string') return 'a text';
  return `a ${type}`;
}

/** `segments[2] (s03).end_s`: the path, with the id of an entry beside its index where it has one. */
function fieldName(path: readonly PropertyKey[], value: unknown): string {
  let name = '';
  path.forEach((key, i) => {
    if (typeof key === 'number') {
      const entry = at(value, path.slice(0, i + 1));
      const id =
        typeof entry === 'object' && entry !== null && 'id' in entry && typeof entry.id === 'string' ? entry.id : null;
      name += `[${key}]${id === null ? '' : ` (${id.slice(0, 64)})`}`;
    } else name += `${name ? '.' : ''}${String(key)}`;
  });
  return name;
}

function at(value: unknown, path: readonly PropertyKey[]): unknown {
  let here: unknown = value;
  for (const key of path) {
    if (typeof here !== 'object' || here === null) return undefined;
    here = (here as Record<PropertyKey, unknown>)[key];
  }
  return here;
}

function shortly(value: unknown): string {
  const text = JSON.stringify(value) ?? String(value);
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
}
