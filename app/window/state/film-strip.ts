import { signal } from '@preact/signals';
import type { Picture } from '../../contract.ts';
import type { TimeSpan } from '../time-board/time-span.ts';
import { host } from './host.ts';
import { bitmapOf, retire } from './pictures.ts';

/** A small picture of the film strip. */
export interface FilmPicture {
  readonly time_s: number;
  readonly bitmap: ImageBitmap;
}

/** The small pictures at hand for one recording, ascending in time. */
export const film = signal<{ readonly recording: string; readonly pictures: readonly FilmPicture[] }>({
  recording: '',
  pictures: [],
});

const MOST_KEPT = 400;
const SMALL_WIDTH_PX = 160;

let job: string | null = null;
let asked = '';

/** Asks for `count` pictures spread over a stretch; what is at hand stays until newer ones are there. */
export async function askFilm(recording: string, span: TimeSpan, count: number): Promise<void> {
  const question = `${recording} ${span.start_s.toFixed(2)} ${span.end_s.toFixed(2)} ${count}`;
  if (question === asked) return;
  asked = question;
  if (film.peek().recording !== recording) {
    for (const { bitmap } of film.peek().pictures) retire(bitmap);
    film.value = { recording, pictures: [] };
  }
  const before = job;
  job = null;
  try {
    if (before) await host().call('cancel', { job: before });
    const started = await host().call('filmStrip', { recording, ...span, count, maxWidth_px: SMALL_WIDTH_PX });
    if (question === asked) job = started.job;
  } catch {
    // The strip is a convenience; why pictures can't be had is said where the picture itself stands.
  }
}

/** Takes a picture of the strip, also of a job that has been replaced meanwhile. */
export async function takeFilmPicture(_job: string, _position: number, picture: Picture): Promise<void> {
  const { recording } = film.peek();
  const bitmap = await bitmapOf(picture);
  if (film.peek().recording !== recording) return bitmap.close();
  const others = film.peek().pictures.filter((p) => p.time_s !== picture.time_s);
  const all = [...others, { time_s: picture.time_s, bitmap }].sort((a, b) => a.time_s - b.time_s);
  film.value = { recording, pictures: all.length > MOST_KEPT ? all.filter((_, i) => i % 2 === 0) : all };
}

/** Forgets the strip: another document is open. */
export function forgetFilm(): void {
  asked = '';
  film.value = { recording: '', pictures: [] };
}
