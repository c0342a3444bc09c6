/** A stretch that is followed in one go. */
export interface Chunk {
  readonly from_s: number;
  readonly to_s: number;
}

/** Long enough to learn the bar from several swings of a slow one, short enough to come out soon and to run two at a time. */
const CHUNK_S = 16;

/** Cuts a stretch into chunks of nearly equal length. Their borders lie between frames, so that no frame is followed twice. */
export function chunksOf(from_s: number, to_s: number, time_s: Float64Array): Chunk[] {
  const count = Math.max(1, Math.round((to_s - from_s) / CHUNK_S));
  const borders = Array.from({ length: count + 1 }, (_, i) => from_s + ((to_s - from_s) * i) / count);
  const between = borders.map((t_s, i) => (i === 0 || i === count ? t_s : betweenFrames(time_s, t_s)));
  return between.slice(1).map((end, i) => ({ from_s: between[i] ?? from_s, to_s: end }));
}

/** A time half-way between the frame shown at or after `t_s` and the one before it; `t_s` itself at the ends. */
export function betweenFrames(time_s: Float64Array, t_s: number): number {
  const next = time_s.findIndex((t) => t >= t_s);
  if (next <= 0) return t_s;
  return ((time_s[next - 1] ?? t_s) + (time_s[next] ?? t_s)) / 2;
}
