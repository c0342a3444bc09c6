import { createHash } from 'node:crypto';
import { cautions } from './page/cautions.ts';
import { findings } from './page/findings.ts';
import { mainResults, pageHead } from './page/head.ts';
import { html, type Markup, trusted } from './page/html.ts';
import { provenance } from './page/provenance.ts';
import { fitDetails, reductionSection } from './page/reduction.ts';
import { segmentTables } from './page/segments.ts';
import { pageStyle } from './page/style.ts';
import { uncertaintySection } from './page/uncertainty.ts';
import { fieldPlot, restDirectionPlot } from './plots/field-plot.ts';
import { type RingDownCurves, ringDownPlot } from './plots/ring-down-plot.ts';
import type { Results } from './results.ts';

/** What a report may show besides the results. */
export interface ReportExtras {
  /** Curves of segments by id, for the plots of ring-downs; segments without any have none. */
  readonly traces?: ReadonlyMap<string, RingDownCurves>;
  /** Names of trace files that were found and don't belong to these results. */
  readonly strangers?: readonly string[];
  /** Date on which the page is made, as it is to stand there; left out: not shown. */
  readonly madeOn?: string;
}

// The hash lets this one style sheet in and nothing else: no script, no picture, nothing from elsewhere.
const styleHash = createHash('sha256').update(pageStyle, 'utf8').digest('base64');
const POLICY = `default-src 'none'; style-src 'sha256-${styleHash}'; base-uri 'none'; form-action 'none'`;

/** The report as one self-contained HTML page to print on A4 or Letter: no scripts, nothing fetched, all text escaped. */
export function reportPage(results: Results, extras: ReportExtras = {}): string {
  const title = results.session.title.trim() || 'Untitled session';
  return html`<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${trusted(POLICY)}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${title} – Needlebeat report</title>
<style>${trusted(pageStyle)}</style>
</head>
<body>
${pageHead(results, extras.madeOn ?? null)}
${cautions()}
${mainResults(results)}
${frequencyFigure(results)}
${reductionSection(results)}
${restDirectionFigure(results)}
${segmentTables(results)}
${findings(results)}
${uncertaintySection(results)}
${fitDetails(results)}
${ringDowns(results, extras)}
${provenance(results)}
<footer>Made by ${results.program} from a results file. Every value is given with its standard uncertainty (<i>k</i> = 1) unless it says otherwise.</footer>
</body>
</html>
`.text;
}

function frequencyFigure(results: Results): Markup | null {
  if (!results.segments.some((s) => s.f0_Hz !== null && s.current_A !== null)) return null;
  return html`<figure>${trusted(fieldPlot(results))}
<figcaption>Square of the undamped frequency against current; below, the residuals. Bars are standard uncertainties, those of the residuals with the current’s; the shaded band is the standard uncertainty of the curve.</figcaption></figure>`;
}

function restDirectionFigure(results: Results): Markup | null {
  const plot = restDirectionPlot(results);
  if (plot === null) return null;
  return html`<figure>${trusted(plot)}
<figcaption>Rest direction against current, with the turning that the model expects, and the residuals.</figcaption></figure>`;
}

function ringDowns(results: Results, { traces = new Map(), strangers = [] }: ReportExtras): Markup | null {
  const plots = results.segments.flatMap((segment) => {
    const curves = traces.get(segment.id);
    if (!curves || curves.time_s.length < 2) return [];
    return [
      html`<figure>${trusted(ringDownPlot(curves, { height: 260 }))}
<figcaption>Segment ${segment.id}: poses, fit and residuals.</figcaption></figure>
`,
    ];
  });
  if (plots.length === 0 && strangers.length === 0) return null;
  return html`<section><h2>Ring-downs</h2>
${
  strangers.length === 0
    ? null
    : html`<p>Not shown, since they are not of this measurement or can’t be read: ${strangers.join(', ')}.</p>`
}
${plots}</section>`;
}
