import { roundedText } from '../numerics/rounding.ts';
import type { Check, Severity } from '../oscillation/ring-down.ts';
import { estimateText, NOTHING, percentText } from './number-text.ts';
import { printable } from './printable.ts';
import { quantities } from './quantities.ts';
import type { Results, SegmentResult } from './results.ts';
import { alignedRows, shortened, width, wrapped } from './text-table.ts';

const LONGEST_LINE = 118;
const HEADINGS: Record<Severity, string> = { fault: 'Faults', doubt: 'Doubts', note: 'Notes' };

/** The results as plain text for a terminal, at most 118 columns: one row per segment, the checks as sentences, the reduction. */
export function resultsTable(results: Results): string {
  const title = printable(results.session.title);
  const checks = results.segments.flatMap((s) => s.checks.map((check) => ({ id: printable(s.id), check })));
  const blocks = [
    title === '' ? [] : wrapped(title, LONGEST_LINE, '  '),
    segmentLines(results.segments),
    checkLines(checks),
    reductionLines(results),
  ];
  return `${blocks
    .filter((lines) => lines.length > 0)
    .map((lines) => lines.join('\n'))
    .join('\n\n')}\n`;
}

const HEADER = ['id', 'current', 'status', 'f0 ± u', 'fd', 'gamma ± u', 'amplitude', 'rest', 'cycles', 'poses'];
const UNITS = ['', 'A', '', 'Hz', 'Hz', '1/s', '°', '°', '', 'used/frames'];
const ALIGNMENT = ['left', 'right', 'left', 'left', 'right', 'left', 'right', 'right', 'right', 'right'] as const;

function segmentLines(segments: readonly SegmentResult[]): string[] {
  if (segments.length === 0) return ['No segments.'];
  const decimals = Math.min(6, Math.max(...segments.map((s) => decimalsOf(s.current_A))));
  const rows = segments.map((s) => segmentRow(s, decimals));
  const table = [HEADER, UNITS, ...rows];
  for (const gap of [2, 1]) {
    const lines = alignedRows(table, ALIGNMENT, gap);
    const widest = Math.max(...lines.map(width));
    if (widest <= LONGEST_LINE || gap === 1) {
      const rule = '─'.repeat(Math.min(widest, LONGEST_LINE));
      return [...lines.slice(0, 2), rule, ...lines.slice(2)];
    }
  }
  return [];
}

function segmentRow(s: SegmentResult, decimals: number): string[] {
  const amplitude = s.amplitude_start_deg !== null && s.amplitude_end_deg !== null;
  return [
    shortened(printable(s.id), 12),
    s.current_A === null ? 'not typed' : minus(s.current_A.toFixed(decimals)),
    s.status,
    pair(s.f0_Hz, s.u_f0_Hz),
    s.fd_Hz === null ? NOTHING : roundedText(s.fd_Hz, s.u_fd_Hz).value,
    pair(s.gamma_per_s, s.u_gamma_per_s),
    amplitude ? `${tenths(s.amplitude_start_deg)} → ${tenths(s.amplitude_end_deg)}` : NOTHING,
    s.equilibrium_deg === null ? NOTHING : minus(s.equilibrium_deg.toFixed(2)),
    s.cycles === null ? NOTHING : s.cycles.toFixed(1),
    `${s.frames_used}/${s.frames}`,
  ];
}

function checkLines(checks: readonly { readonly id: string; readonly check: Check }[]): string[] {
  const lines: string[] = [];
  for (const severity of ['fault', 'doubt', 'note'] as const) {
    const found = checks.filter(({ check }) => check.severity === severity);
    if (found.length === 0) continue;
    if (lines.length > 0) lines.push('');
    lines.push(HEADINGS[severity]);
    for (const { id, check } of found) lines.push(...sentence(`${id}: ${printable(check.message)}`));
  }
  return lines;
}

function reductionLines({ reduction }: Results): string[] {
  const lines = ['Reduction'];
  if (reduction.model) lines.push(...sentence(printable(reduction.model.sentence)));
  const values = quantities.filter((q) => reduction[q.name] !== null);
  const missing = quantities.filter((q) => reduction[q.name] === null && ALWAYS_NAMED.has(q.name));
  const rows = values.map((q) => {
    const [value, u] = [reduction[q.name] ?? 0, reduction[`u_${q.name}`]];
    return [
      `  ${q.title}`,
      q.symbol.replaceAll('_', ''),
      estimateText(value * q.perUnit, u === null ? null : u * q.perUnit, q.unit),
    ];
  });
  lines.push(...alignedRows(rows, ['left', 'left', 'left'], 2));
  const { expected_field: expected, points_used: used, points_left_out: leftOut } = reduction;
  if (expected) {
    const share = expected.measured_less_expected_share;
    const difference =
      share === null ? '' : `; measured is ${percentText(Math.abs(share))} ${share < 0 ? 'below' : 'above'} it`;
    const field = estimateText(expected.horizontal_T * 1e6, expected.u_horizontal_T * 1e6, 'µT');
    lines.push(
      ...sentence(
        `Expected by ${printable(expected.model)}: ${field}${difference}. Steel in a building shifts the real field far more than this u.`,
      ),
    );
  }
  lines.push(...sentence(`Segments used: ${used.length === 0 ? 'none' : used.map(printable).join(', ')}.`));
  for (const { id, reason } of leftOut) lines.push(...sentence(`${printable(id)} is left out: ${printable(reason)}`));
  if (missing.length > 0)
    lines.push(...sentence(`Not to be had: ${missing.map((q) => q.title.toLowerCase()).join(', ')}.`));
  for (const check of reduction.checks) lines.push(...sentence(printable(check.message)));
  return lines;
}

/** Results that are named even where they are not to be had: those that other people's scripts rely on. */
const ALWAYS_NAMED: ReadonlySet<string> = new Set([
  'ambient_T',
  'slope_Hz2_per_A',
  'intercept_Hz2',
  'coil_constant_T_per_A',
  'moment_to_inertia',
  'moment_A_m2',
  'inertia_kg_m2',
  'fibre_stiffness_N_m_per_rad',
  'misalignment_deg',
]);

function sentence(text: string): string[] {
  return wrapped(text, LONGEST_LINE - 2, '  ').map((line) => `  ${line}`);
}

function pair(value: number | null, u: number | null): string {
  return value === null ? NOTHING : roundedText(value, u).both;
}

function tenths(value: number | null): string {
  return value === null ? NOTHING : minus(value.toFixed(1));
}

function decimalsOf(value: number | null): number {
  return value === null ? 0 : (String(value).split('e')[0]?.split('.')[1]?.length ?? 0);
}

function minus(text: string): string {
  return text.replace('-', '\u2212');
}
