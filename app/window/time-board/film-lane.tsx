import { useEffect } from 'preact/hooks';
import { colours } from '../state/colours.ts';
import { askFilm, film } from '../state/film-strip.ts';
import { pictureSize } from '../state/picture-tools.ts';
import { recording, whole_s } from '../state/selection.ts';
import { CanvasLane } from './canvas-lane.tsx';
import { type FilmPlace, filmPlaces } from './film-places.ts';
import type { TimeSpan } from './time-span.ts';

const REST_MS = 200;

/** Small pictures along the time axis, each at the time of its left edge. */
export function FilmLane({ width, height, span }: { width: number; height: number; span: TimeSpan }) {
  const { width: w, height: h } = pictureSize();
  const each = Math.min(Math.max((height * w) / h, 24), 4 * height);
  const r = recording.value;
  const ready = r?.state === 'ready';

  useEffect(() => {
    if (!ready || !r || width < 40 || whole_s.value <= 0) return;
    const count = Math.min(Math.max(Math.ceil(width / each), 1), 200);
    const waiting = setTimeout(() => void askFilm(r.id, span, count), REST_MS);
    return () => clearTimeout(waiting);
  }, [ready, r?.id, width, each, span.start_s, span.end_s, whole_s.value]);

  const { pictures } = film.value;
  return (
    <CanvasLane
      width={width}
      height={height}
      label="Film strip"
      after={[film.value, span.start_s, span.end_s, colours.value]}
      draw={(context) => {
        context.fillStyle = colours.value.faint;
        context.fillRect(0, 0, width, height);
        const places: readonly FilmPlace[] = filmPlaces(
          pictures.map((p) => p.time_s),
          span,
          width,
          each,
        );
        for (const { index, x_px } of places) {
          const bitmap = pictures[index]?.bitmap;
          if (!bitmap) continue;
          context.drawImage(bitmap, x_px, 0, each, height);
          context.fillStyle = colours.value.panel;
          context.fillRect(x_px - 0.5, 0, 1, height);
        }
      }}
    />
  );
}
