import type { RingDownCurves } from './plots/ring-down-plot.ts';

/**
 * Reads a trace file as `traceCsv` writes it: plain numbers, one header row. Null where it is anything else; unknown columns
 * are passed over.
 */
export function parseTraceCsv(text: string, id: string): RingDownCurves | null {
  const [header = '', ...lines] = text.replace(/^\uFEFF/, '').split(/\r?\n/);
  const rows = lines.filter((line) => line !== '').map((line) => line.split(','));
  const names = header.split(',');
  const column = (name: string): Float64Array | null => {
    const at = names.indexOf(name);
    if (at < 0 || rows.some((row) => (row[at] ?? '') === '')) return null;
    const values = Float64Array.from(rows, (row) => Number(row[at]));
    return values.every(Number.isFinite) ? values : null;
  };
  const unit = names.includes('angle_deg') ? 'deg' : 'px';
  const time_s = column('time_s');
  const angle = column(unit === 'deg' ? 'angle_deg' : 'position_px');
  if (!time_s || !angle || time_s.some((t, i) => i > 0 && t < time_s[i - 1]!)) return null;
  return {
    id,
    time_s,
    angle,
    unit,
    fitted: column(`fitted_${unit}`),
    residual: column(`residual_${unit}`),
    used: column('used'),
  };
}
