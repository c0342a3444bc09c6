import { csvwFileName, csvwText } from '../../src/report/csvw-metadata.ts';
import type { RingDownCurves } from '../../src/report/plots/ring-down-plot.ts';
import { reportPage } from '../../src/report/report-page.ts';
import type { Results } from '../../src/report/results.ts';
import { resultsCsv } from '../../src/report/results-csv.ts';
import { resultsText } from '../../src/report/results-json.ts';
import { traceCsv, traceFileNames } from '../../src/report/trace-csv.ts';
import { traceCurves } from '../../src/report/trace-curves.ts';
import type { ExportItem } from '../contract.ts';
import type { DrawnSegment } from './measuring.ts';

/** A file to be written. */
export interface ExportFile {
  readonly name: string;
  readonly type: string;
  readonly text: string;
}

/** What is exported from: the results, what was measured, and the session file as it would be handed out. */
export interface ExportSource {
  readonly results: Results;
  readonly segments: ReadonlyMap<string, DrawnSegment>;
  readonly session: { readonly name: string; readonly text: string };
  /** Date on the page to print, YYYY-MM-DD. */
  readonly madeOn: string;
}

/** What is a text: all but what has to be printed. */
export type TextItem = Exclude<ExportItem, { kind: 'report.pdf' }>;

/** One thing to export; null: there is none (a segment without a trace). The same texts as the command line writes. */
export function exportFile(item: TextItem, source: ExportSource): ExportFile | null {
  const { results, segments } = source;
  switch (item.kind) {
    case 'results.csv':
      return { name: 'results.csv', type: 'text/csv; charset=utf-8', text: resultsCsv(results) };
    case 'results.json':
      return { name: 'results.json', type: 'application/json', text: resultsText(results) };
    case 'csvw':
      return { name: csvwFileName, type: 'application/csvm+json', text: csvwText() };
    case 'report': {
      const extras = { traces: curvesOf(segments), madeOn: source.madeOn };
      return { name: 'report.html', type: 'text/html; charset=utf-8', text: reportPage(results, extras) };
    }
    case 'session':
      return { ...source.session, type: 'application/json' };
    case 'trace': {
      const { trace, ringDown } = segments.get(item.segment)?.measured ?? {};
      const name = traceFileNames(results.segments.map((s) => s.id)).get(item.segment);
      if (!trace || name === undefined) return null;
      return { name, type: 'text/csv; charset=utf-8', text: traceCsv(trace, ringDown ?? null) };
    }
    default:
      return item satisfies never;
  }
}

/** Everything that can be exported. */
export function allExports(source: ExportSource): ExportFile[] {
  const traces = source.results.segments.map((s): TextItem => ({ kind: 'trace', segment: s.id }));
  const items: TextItem[] = [
    { kind: 'session' },
    ...traces,
    { kind: 'csvw' },
    { kind: 'report' },
    { kind: 'results.csv' },
    { kind: 'results.json' },
  ];
  return items.flatMap((item) => exportFile(item, source) ?? []);
}

function curvesOf(segments: ReadonlyMap<string, DrawnSegment>): Map<string, RingDownCurves> {
  const curves = new Map<string, RingDownCurves>();
  for (const [id, { measured }] of segments) {
    if (measured.trace) curves.set(id, traceCurves(id, measured.trace, measured.ringDown));
  }
  return curves;
}
