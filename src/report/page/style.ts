/** The page's only style sheet: for A4 and Letter, on paper first, on a screen as well. */
export const pageStyle = `
:root { color-scheme: light; }
* { box-sizing: border-box; }
html { background: #e9ecee; }
body {
  font: 9.5pt/1.45 'Helvetica Neue', Arial, 'Liberation Sans', sans-serif;
  font-variant-numeric: tabular-nums lining-nums;
  color: #1c2126; background: #fff; max-width: 200mm; margin: 8mm auto; padding: 14mm 13mm;
  overflow-wrap: break-word; -webkit-print-color-adjust: exact; print-color-adjust: exact;
}
header { border-bottom: 1.6pt solid #1c2126; padding-bottom: 3mm; margin-bottom: 4mm; }
header p { margin: 0; color: #5b646d; }
h1 { font-size: 19pt; line-height: 1.2; font-weight: 600; margin: 1mm 0 1.5mm; letter-spacing: -0.01em; }
h2 + p, h2 + p + p { break-after: avoid; break-inside: avoid; }
p, li { orphans: 3; widows: 3; }
h2 { font-size: 12pt; font-weight: 600; margin: 8mm 0 2mm; padding-bottom: 1mm; border-bottom: 0.6pt solid #9aa5ae; break-after: avoid; }
h3 { font-size: 9.5pt; font-weight: 600; margin: 4.5mm 0 1mm; break-after: avoid; }
p { margin: 0 0 2mm; max-width: 165mm; }
sub { font-size: 72%; vertical-align: -0.25em; line-height: 0; }
code { font: 8pt/1.4 'Liberation Mono', Menlo, Consolas, monospace; overflow-wrap: anywhere; }
ul { margin: 0 0 2mm; padding-left: 4.5mm; }
li { margin-bottom: 0.8mm; }
table { border-collapse: collapse; width: 100%; margin: 0 0 3mm; font-size: 8.5pt; line-height: 1.35; break-inside: auto; }
caption { text-align: left; font-weight: 600; font-size: 9pt; padding: 2mm 0 1mm; }
thead { display: table-header-group; }
tr { break-inside: avoid; }
th { text-align: left; font-weight: 600; color: #414a52; vertical-align: bottom; border-bottom: 0.8pt solid #414a52; padding: 0.8mm 1.6mm; }
td { vertical-align: top; border-bottom: 0.4pt solid #dde2e6; padding: 0.8mm 1.6mm; }
th:first-child, td:first-child { padding-left: 0; }
th:last-child, td:last-child { padding-right: 0; }
th:first-child:nth-last-child(2) { width: 30mm; }
.n { text-align: right; white-space: nowrap; }
th.n { white-space: normal; }
th small, td small, .small { font-size: 7.5pt; font-weight: 400; color: #5b646d; }
tr.total td { border-top: 0.8pt solid #414a52; border-bottom: 0; font-weight: 600; }
tr.doubtful td { background: #fdf3e7; }
tr.unmeasured td { background: #f6edf2; }
tr.out td { color: #5b646d; }
td:has(.nb), .nb { white-space: nowrap; }
.key { display: grid; grid-template-columns: repeat(3, 1fr); gap: 0; border: 0.6pt solid #9aa5ae; margin: 0 0 4mm; }
.key div { padding: 2.4mm 3.2mm; border-left: 0.4pt solid #dde2e6; }
.key div:first-child { border-left: 0; }
.key dt, .key span { display: block; font-size: 8pt; color: #5b646d; }
.key strong { display: block; font-size: 13pt; font-weight: 600; white-space: nowrap; line-height: 1.35; }
.facts { display: grid; grid-template-columns: 42mm 1fr; gap: 0.6mm 3mm; margin: 0 0 3mm; }
.facts dt { color: #5b646d; }
.facts dd { margin: 0; }
.checks { list-style: none; padding: 0; }
.checks li { display: grid; grid-template-columns: 14mm 24mm 1fr; gap: 2mm; padding: 0.8mm 0; border-bottom: 0.4pt solid #dde2e6; margin: 0; break-inside: avoid; }
.mark { font-weight: 600; }
.mark.fault { color: #8e2c63; }
.mark.doubt { color: #a34a00; }
.mark.note { color: #5b646d; font-weight: 400; }
.cautions { border-left: 2pt solid #d55e00; padding: 0.3mm 0 0.3mm 3mm; margin: 0 0 4mm; font-size: 8pt; color: #414a52; break-inside: avoid; }
figure { margin: 4mm 0; break-inside: avoid; }
figure svg { display: block; width: 100%; height: auto; }
figcaption { font-size: 8.5pt; color: #414a52; margin-top: 1mm; }
section.whole, table.whole { break-inside: avoid; }
footer { margin-top: 8mm; padding-top: 2mm; border-top: 0.6pt solid #9aa5ae; color: #5b646d; font-size: 8pt; }
@media screen { body { box-shadow: 0 0.5mm 4mm rgb(28 33 38 / 18%); } }
@media screen and (max-width: 180mm) {
  body { margin: 0; padding: 5mm; }
  .key { grid-template-columns: 1fr; }
  .key div { border-left: 0; }
  table { display: block; overflow-x: auto; }
}
@media print {
  html { background: none; }
  body { max-width: none; margin: 0; padding: 0; font-size: 9pt; }
  a { color: inherit; text-decoration: none; }
}
@page {
  margin: 15mm 15mm 17mm;
  @bottom-left { content: 'Needlebeat report'; font: 7.5pt Arial, 'Liberation Sans', sans-serif; color: #5b646d; }
  @bottom-right { content: 'Page ' counter(page) ' of ' counter(pages); font: 7.5pt Arial, 'Liberation Sans', sans-serif; color: #5b646d; }
}
`;
