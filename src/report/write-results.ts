import { access, rm } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { InputError } from '../recording/input-error.ts';
import { writeWhole } from '../session/write-session.ts';
import { csvwFileName, csvwText } from './csvw-metadata.ts';
import type { RingDownCurves } from './plots/ring-down-plot.ts';
import { reportPage } from './report-page.ts';
import type { Results } from './results.ts';
import { resultsCsv } from './results-csv.ts';
import { resultsText } from './results-json.ts';
import { type FitColumns, type TraceColumns, traceCsv, traceFileNames } from './trace-csv.ts';
import { traceCurves } from './trace-curves.ts';

/** What was followed and fitted of one segment, as far as it goes. */
export interface SegmentTrace {
  readonly trace: TraceColumns | null;
  readonly ringDown: FitColumns | null;
}

/** What is written besides results.json and results.csv. */
export interface WriteOptions {
  /** Traces of segments by id: one trace-<id>.csv is written for each that has one. Left out: none is written. */
  readonly traces?: ReadonlyMap<string, SegmentTrace> | undefined;
  /** Whether to describe results.csv in results.csv-metadata.json (default: yes). */
  readonly csvw?: boolean | undefined;
  /** Whether to write report.html too (default: no), with this date on it. */
  readonly report?: { readonly madeOn?: string } | undefined;
}

/**
 * Writes results.json and results.csv, and what the options ask for, into a folder, which is made where it is missing. Every
 * file is replaced whole, results.json last; where one can't be written, those that were not there before are removed again.
 * @returns the paths written.
 * @throws InputError where the folder can't be written to.
 */
export async function writeResults(
  dir: string,
  results: Results,
  options: WriteOptions = {},
): Promise<readonly string[]> {
  return writeFiles(dir, [...filesOf(results, options)]);
}

/** Writes files one after the other, each whole; after a failure none of those that are new stays. @throws InputError */
export async function writeFiles(
  dir: string,
  files: readonly (readonly [name: string, content: string | Uint8Array])[],
): Promise<readonly string[]> {
  const written: string[] = [];
  const added: string[] = [];
  for (const [name, content] of files) {
    const path = join(dir, name);
    try {
      if (!(await exists(path))) added.push(path);
      await writeWhole(path, content);
      written.push(path);
    } catch (error) {
      await Promise.all(added.map((file) => rm(file, { force: true }).catch(() => undefined)));
      const code = error instanceof Error && 'code' in error ? String(error.code) : 'unknown reason';
      throw new InputError(`${basename(dir) || dir}: ${name} can't be written into this folder (${code}).`);
    }
  }
  return written;
}

function* filesOf(results: Results, options: WriteOptions): Generator<readonly [string, string]> {
  if (options.traces) yield* traceFiles(results, options.traces);
  if (options.csvw !== false) yield [csvwFileName, csvwText()];
  if (options.report) yield ['report.html', reportPage(results, { traces: curvesOf(options), ...options.report })];
  yield ['results.csv', resultsCsv(results)];
  yield ['results.json', resultsText(results)];
}

function* traceFiles(
  results: Results,
  traces: ReadonlyMap<string, SegmentTrace>,
): Generator<readonly [string, string]> {
  const names = traceFileNames(results.segments.map((s) => s.id));
  for (const [id, name] of names) {
    const measured = traces.get(id);
    if (measured?.trace) yield [name, traceCsv(measured.trace, measured.ringDown)];
  }
}

function curvesOf({ traces }: WriteOptions): ReadonlyMap<string, RingDownCurves> {
  const curves = new Map<string, RingDownCurves>();
  for (const [id, { trace, ringDown }] of traces ?? []) {
    if (trace) curves.set(id, traceCurves(id, trace, ringDown));
  }
  return curves;
}

async function exists(path: string): Promise<boolean> {
  return access(path).then(
    () => true,
    () => false,
  );
}
