import { nearestIndex } from '../plots/extremes.ts';
import { type TimeSpan, toTime } from './time-span.ts';

/** Which of the pictures at hand is drawn where. */
export interface FilmPlace {
  readonly index: number;
  readonly x_px: number;
}

/**
 * Fills the strip with pictures `each_px` wide side by side: in every place the picture nearest in time to the place's middle.
 * @param times_s of the pictures at hand, ascending.
 */
export function filmPlaces(
  times_s: readonly number[],
  span: TimeSpan,
  width_px: number,
  each_px: number,
): readonly FilmPlace[] {
  if (times_s.length === 0 || !(each_px > 0)) return [];
  const places: FilmPlace[] = [];
  for (let x_px = 0; x_px < width_px; x_px += each_px) {
    places.push({ index: nearestIndex(times_s, toTime(x_px + each_px / 2, span, width_px)), x_px });
  }
  return places;
}
