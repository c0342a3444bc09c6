/** The stretch of recording that the board shows across its width. */
export interface TimeSpan {
  readonly start_s: number;
  readonly end_s: number;
}

/** The closest that the board zooms in, seconds across its width. */
export const CLOSEST_S = 0.2;

/** Place on the board, pixels from its left edge, of a time. */
export function toPixel(time_s: number, span: TimeSpan, width_px: number): number {
  return ((time_s - span.start_s) / (span.end_s - span.start_s)) * width_px;
}

/** Time at a place on the board. */
export function toTime(x_px: number, span: TimeSpan, width_px: number): number {
  return span.start_s + (x_px / Math.max(width_px, 1)) * (span.end_s - span.start_s);
}

/** The span kept inside [0, whole_s], its length kept where it fits. */
export function clampSpan(span: TimeSpan, whole_s: number): TimeSpan {
  const length = Math.min(Math.max(span.end_s - span.start_s, Math.min(CLOSEST_S, whole_s)), whole_s);
  const start_s = Math.min(Math.max(span.start_s, 0), whole_s - length);
  return { start_s, end_s: start_s + length };
}

/** Zooms by `factor` (above 1 closer) so that `about_s` stays where it is on the board. */
export function zoomSpan(span: TimeSpan, about_s: number, factor: number, whole_s: number): TimeSpan {
  const length = span.end_s - span.start_s;
  const wanted = Math.min(Math.max(length / factor, Math.min(CLOSEST_S, whole_s)), whole_s);
  const share = (about_s - span.start_s) / length;
  return clampSpan({ start_s: about_s - share * wanted, end_s: about_s + (1 - share) * wanted }, whole_s);
}

/** Moves the span by so many seconds. */
export function panSpan(span: TimeSpan, by_s: number, whole_s: number): TimeSpan {
  return clampSpan({ start_s: span.start_s + by_s, end_s: span.end_s + by_s }, whole_s);
}

/** The span moved just far enough that `time_s` is inside, with a margin of a twentieth of its length. */
export function revealTime(span: TimeSpan, time_s: number, whole_s: number): TimeSpan {
  const margin = (span.end_s - span.start_s) / 20;
  if (time_s < span.start_s + margin) return panSpan(span, time_s - margin - span.start_s, whole_s);
  if (time_s > span.end_s - margin) return panSpan(span, time_s + margin - span.end_s, whole_s);
  return span;
}

/** A span that shows a stretch with a fifth of its length on either side. */
export function spanAround(stretch: TimeSpan, whole_s: number): TimeSpan {
  const margin = (stretch.end_s - stretch.start_s) / 5;
  return clampSpan({ start_s: stretch.start_s - margin, end_s: stretch.end_s + margin }, whole_s);
}
