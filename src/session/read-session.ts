import { createHash } from 'node:crypto';
import { readFile, stat } from 'node:fs/promises';
import { basename, dirname, resolve } from 'node:path';
import { InputError } from '../recording/input-error.ts';
import { firstIssue } from './issue-sentence.ts';
import { type Session, sessionSchema } from './session.ts';

const LARGEST_SESSION_BYTES = 16 * 1024 * 1024;

/** A session as read from its file. */
export interface SessionFile {
  readonly session: Session;
  /** Absolute path of the session file. */
  readonly path: string;
  /** SHA-256 of the file's bytes, hexadecimal. */
  readonly sha256: string;
}

/**
 * Reads and checks a session file.
 * @throws InputError with one sentence that names the file and the field and says what was expected.
 */
export async function readSession(path: string): Promise<SessionFile> {
  const bytes = await readJsonBytes(path, 'a session file (*.needlebeat.json)');
  const session = parseSession(bytes.toString('utf8'), basename(path));
  return { session, path: resolve(path), sha256: createHash('sha256').update(bytes).digest('hex') };
}

/** Reads a JSON file that a user named, refusing what is plainly something else before it is read whole. */
export async function readJsonBytes(path: string, expected: string): Promise<Buffer> {
  const name = basename(path);
  const facts = await stat(path).catch((error: NodeJS.ErrnoException) => {
    const why =
      error.code === 'ENOENT' ? 'there is no such file' : `it can't be read (${error.code ?? 'unknown reason'})`;
    throw new InputError(`${name}: ${why}; ${expected} was expected.`);
  });
  if (!facts.isFile()) throw new InputError(`${name}: this is not a file; ${expected} was expected.`);
  if (facts.size > LARGEST_SESSION_BYTES) {
    throw new InputError(`${name}: the file has ${facts.size} bytes; ${expected} was expected, with 16 MiB at most.`);
  }
  return readFile(path);
}

/**
 * Checks the text of a session file: every field alone, then what the fields say of each other.
 * @param name what to call the file in an error.
 * @throws InputError as `readSession`.
 */
export function parseSession(text: string, name: string): Session {
  const value = parseJson(text, name);
  const result = sessionSchema.safeParse(value);
  if (!result.success) throw new InputError(`${name}: ${firstIssue(result.error, value)}`);
  checkNames(result.data, name);
  checkTimes(result.data, name);
  checkFibre(result.data, name);
  return result.data;
}

/** Parses JSON. @throws InputError naming the file and the place of the first mistake. */
export function parseJson(text: string, name: string): unknown {
  try {
    return JSON.parse(text.replace(/^\uFEFF/, ''));
  } catch (error) {
    const detail = error instanceof Error ? error.message.replace(/\s+/g, ' ').slice(0, 160) : '';
    throw new InputError(`${name}: this is not valid JSON (${detail}).`);
  }
}

function checkNames(session: Session, name: string): void {
  for (const list of ['recordings', 'views', 'segments'] as const) {
    const seen = new Set<string>();
    for (const { id } of session[list]) {
      if (seen.has(id))
        throw new InputError(`${name}: ${list}: two entries have the id "${id}"; each id must be unique.`);
      seen.add(id);
    }
  }
  const recordings = new Set(session.recordings.map((r) => r.id));
  const views = new Map(session.views.map((v) => [v.id, v]));
  for (const r of session.recordings) {
    if (
      /^[a-z][a-z0-9+.-]+:\/\//i.test(r.file) ||
      r.file.startsWith('\\\\') ||
      r.file.startsWith('//') ||
      r.file.includes('\0')
    ) {
      throw new InputError(`${name}: recording ${r.id}: file must be a path on this computer, not "${r.file}".`);
    }
  }
  for (const view of session.views) {
    if (!recordings.has(view.recording)) {
      throw new InputError(`${name}: view ${view.id}: there is no recording with the id "${view.recording}".`);
    }
  }
  for (const segment of session.segments) {
    const where = `${name}: segment ${segment.id}`;
    if (!recordings.has(segment.recording)) {
      throw new InputError(`${where}: there is no recording with the id "${segment.recording}".`);
    }
    const view = views.get(segment.view);
    if (!view) throw new InputError(`${where}: there is no view with the id "${segment.view}".`);
    if (view.recording !== segment.recording) {
      throw new InputError(
        `${where}: its view ${view.id} belongs to recording ${view.recording}, but the segment is of recording ${segment.recording}.`,
      );
    }
  }
}

function checkTimes(session: Session, name: string): void {
  for (const s of session.segments) {
    if (!(s.end_s > s.start_s)) {
      throw new InputError(`${name}: segment ${s.id}: end_s (${s.end_s}) must be later than start_s (${s.start_s}).`);
    }
  }
  for (const { id } of session.recordings) {
    const ordered = session.segments.filter((s) => s.recording === id).sort((a, b) => a.start_s - b.start_s);
    for (const [i, later] of ordered.entries()) {
      const earlier = ordered[i - 1];
      if (earlier && later.start_s < earlier.end_s) {
        throw new InputError(
          `${name}: segments ${earlier.id} and ${later.id} overlap: ${later.id} starts at ${later.start_s} s, before ${earlier.id} ends at ${earlier.end_s} s.`,
        );
      }
    }
  }
}

function checkFibre(session: Session, name: string): void {
  const fibre = session.apparatus?.fibre;
  if (!fibre) return;
  const where = `${name}: apparatus.fibre`;
  const ids = new Set(session.segments.map((s) => s.id));
  const runs = [
    ...(fibre.run_without_field ? [['run_without_field', fibre.run_without_field] as const] : []),
    ...(fibre.runs_at_lengths ?? []).map((run, i) => [`runs_at_lengths[${i}]`, run] as const),
  ];
  const seen = new Set<string>();
  for (const [key, run] of runs) {
    if (!('segment' in run)) continue;
    if (!ids.has(run.segment)) {
      throw new InputError(`${where}.${key}.segment: there is no segment with the id "${run.segment}".`);
    }
    if (seen.has(run.segment)) {
      throw new InputError(
        `${where}.${key}.segment: segment ${run.segment} stands for two runs; each must have its own.`,
      );
    }
    seen.add(run.segment);
  }
  if (fibre.runs_at_lengths !== undefined && fibre.length_m === undefined) {
    throw new InputError(`${where}.length_m must be a number above 0 where runs_at_lengths is given; it is missing.`);
  }
}

/** Absolute path of a session's recording: its `file` is relative to the session file. */
export function recordingPath(sessionPath: string, file: string): string {
  return resolve(dirname(sessionPath), file);
}
