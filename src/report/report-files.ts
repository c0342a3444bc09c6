import { readFile, stat } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import type { RingDownCurves } from './plots/ring-down-plot.ts';
import { readResults } from './read-results.ts';
import { reportPage } from './report-page.ts';
import type { SegmentResult } from './results.ts';
import { traceFileNames } from './trace-csv.ts';
import { parseTraceCsv } from './trace-reading.ts';
import { writeFiles } from './write-results.ts';

const LARGEST_TRACE_BYTES = 256 * 1024 * 1024;

/** What may be passed to `reportFromFiles`. */
export interface ReportOptions {
  /** Makes report.pdf of the page; left out: there is none. */
  readonly print?: ((page: string) => Promise<Uint8Array>) | undefined;
  /** When the page is made (default: now). */
  readonly now?: Date;
}

/**
 * Makes report.html in `outDir` from a results file, and report.pdf where it is asked for: both or neither. Ring-downs are
 * plotted where trace files stand beside the results file and belong to it.
 * @returns the paths written.
 * @throws InputError where the results file can't be used, or a file can't be made or written.
 */
export async function reportFromFiles(
  resultsPath: string,
  outDir: string,
  { print, now = new Date() }: ReportOptions = {},
): Promise<readonly string[]> {
  const results = await readResults(resultsPath);
  const { traces, strangers } = await tracesBeside(resultsPath, results.segments);
  const page = reportPage(results, { traces, strangers, madeOn: localDate(now) });
  const pdf = await print?.(page);
  return writeFiles(outDir, [['report.html', page], ...(pdf ? [['report.pdf', pdf] as const] : [])]);
}

/** The day of the user's own clock, as YYYY-MM-DD. */
function localDate(time: Date): string {
  const two = (value: number) => String(value).padStart(2, '0');
  return `${time.getFullYear()}-${two(time.getMonth() + 1)}-${two(time.getDate())}`;
}

async function tracesBeside(resultsPath: string, segments: readonly SegmentResult[]) {
  const traces = new Map<string, RingDownCurves>();
  const strangers: string[] = [];
  const names = traceFileNames(segments.map((s) => s.id));
  for (const segment of segments) {
    const name = names.get(segment.id) ?? '';
    const path = join(dirname(resultsPath), name);
    const facts = await stat(path).catch(() => null);
    if (!facts?.isFile()) continue;
    const curves = facts.size <= LARGEST_TRACE_BYTES ? parseTraceCsv(await readFile(path, 'utf8'), segment.id) : null;
    if (curves && belongs(curves, segment)) traces.set(segment.id, curves);
    else strangers.push(name);
  }
  return { traces, strangers };
}

/** A trace of an earlier measurement may still lie beside newer results: its times and the number of poses used must agree. */
function belongs(curves: RingDownCurves, segment: SegmentResult): boolean {
  const n = curves.time_s.length;
  if (n === 0) return false;
  const within =
    (curves.time_s[0] ?? 0) >= segment.start_s - 1e-6 && (curves.time_s[n - 1] ?? 0) <= segment.end_s + 1e-6;
  if (curves.used === null) return within;
  return within && Array.from(curves.used).filter(Boolean).length === segment.frames_used;
}
