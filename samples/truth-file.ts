import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { InputError } from '../src/recording/input-error.ts';

/** What is true of one segment; the fields that are compared. Null where there is none. */
export interface TrueSegment {
  readonly id: string;
  readonly f0_Hz: number;
  readonly gamma_per_s: number;
  readonly equilibrium_deg: number;
  readonly expected_status: 'measured' | 'doubtful' | 'unmeasured';
  readonly swing_Hz: number | null;
}

/** What is true of a recording; more stands in the file than is compared. */
export interface Truth {
  readonly view: 'plan' | 'oblique' | 'side';
  readonly apparatus: { readonly [quantity: string]: number };
  readonly segments: readonly TrueSegment[];
}

/** The true angle in every frame, degrees, by frame number. */
export type FrameTruth = Float64Array;

/** A folder with a session and what is true of it. */
export interface Case {
  readonly name: string;
  readonly sessionPath: string;
  readonly truth: Truth;
  readonly frames: FrameTruth | null;
}

function parseTruth(text: string, name: string): Truth {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    throw new InputError(`${name}: this is not JSON; a truth file was expected.`);
  }
  const truth = value as Partial<Truth> | null;
  const sound =
    truth !== null &&
    typeof truth === 'object' &&
    typeof truth.apparatus === 'object' &&
    Array.isArray(truth.segments) &&
    truth.segments.every((segment) => typeof segment.id === 'string' && typeof segment.f0_Hz === 'number');
  if (!sound)
    throw new InputError(
      `${name}: a truth file with "apparatus" and "segments" (each with "id" and "f0_Hz") was expected.`,
    );
  return truth as Truth;
}

function parseFrames(text: string, name: string): FrameTruth {
  const [head, ...rows] = text.trimEnd().split('\n');
  const columns = (head ?? '').split(',');
  const frame = columns.indexOf('frame');
  const angle = columns.indexOf('angle_deg');
  if (frame < 0 || angle < 0) throw new InputError(`${name}: columns "frame" and "angle_deg" were expected.`);
  const out = new Float64Array(rows.length);
  for (const row of rows) {
    const cells = row.split(',');
    out[Number(cells[frame])] = Number(cells[angle]);
  }
  return out;
}

/**
 * Finds the session (`*.needlebeat.json`) of a folder, the truth beside it (`truth.json` or `*.truth.json`), and the true
 * angles (`frames.csv`) where they are there.
 * @throws InputError naming the folder and what is missing.
 */
export async function readCase(directory: string): Promise<Case> {
  const names = await readdir(directory).catch(() => {
    throw new InputError(`${directory}: a folder with a session and its truth was expected.`);
  });
  const session = names.filter((name) => name.endsWith('.needlebeat.json')).sort()[0];
  const truth = names.filter((name) => name === 'truth.json' || name.endsWith('.truth.json')).sort()[0];
  if (session === undefined) throw new InputError(`${directory}: no session file (*.needlebeat.json) here.`);
  if (truth === undefined) throw new InputError(`${directory}: no truth file (truth.json or *.truth.json) here.`);
  const framesText = names.includes('frames.csv') ? await readFile(join(directory, 'frames.csv'), 'utf8') : null;
  return {
    name: directory.replace(/\/+$/, '').split('/').at(-1) ?? directory,
    sessionPath: join(directory, session),
    truth: parseTruth(await readFile(join(directory, truth), 'utf8'), join(directory, truth)),
    frames: framesText === null ? null : parseFrames(framesText, join(directory, 'frames.csv')),
  };
}
