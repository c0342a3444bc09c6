import { viewOf } from '../../src/measuring/measure-segment.ts';
import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import { InputError } from '../../src/recording/input-error.ts';
import type { Region } from '../../src/recording/recording.ts';
import type { LooseView, SessionView } from '../contract.ts';
import { findBar } from './find-bar.ts';
import { frameTimes_s } from './frame-times.ts';
import type { Parts, Some } from './parts.ts';
import { PlayPace, pictureOf, play, showStrip } from './showing.ts';

/** Calls that show the recording, and those about jobs. */
export function pictureCalls(
  parts: Parts,
): Some<'frameTimes' | 'picture' | 'filmStrip' | 'play' | 'playAck' | 'findBar' | 'jobs' | 'cancel'> {
  const { keeper, tools, jobs, pictures, quickPool } = parts;
  const paces = new Map<string, PlayPace>();
  return {
    frameTimes: async ({ recording }) => ({ time_s: frameTimes_s(await keeper.opened(recording)) }),
    picture: async ({ recording, frame, maxWidth_px, crop }, { signal }) => {
      const opened = await keeper.opened(recording);
      const last = opened.recording.ticks.length - 1;
      if (frame > last) throw new InputError(`The recording has no frame ${frame}; its last one is ${last}.`);
      const wish = { frame, maxWidth_px, crop: crop ? withinPicture(crop, opened) : null };
      return pictureOf(opened, frame, await pictures.get(opened.recording, wish, await tools(), signal));
    },
    filmStrip: async ({ recording, ...stretch }, { window }) => {
      const opened = await keeper.opened(recording);
      const found = await tools();
      const run = (job: string, signal: AbortSignal) =>
        showStrip(opened, stretch, found, signal, (position, picture) =>
          window.send('filmStripPicture', { job, position, picture }),
        );
      const job = jobs.start('filmStrip', null, window.gone, run, (name, error) =>
        window.send('jobEnded', { job: name, error }),
      );
      return { job };
    },
    play: async ({ recording, ...stretch }, { window }) => {
      const opened = await keeper.opened(recording);
      const found = await tools();
      const pace = new PlayPace();
      const run = (job: string, signal: AbortSignal) =>
        play(opened, stretch, pace, found, signal, (picture) => window.send('playFrame', { job, picture }));
      const job = jobs.start('play', null, window.gone, run, (name, error) => {
        paces.delete(name);
        window.send('jobEnded', { job: name, error });
      });
      paces.set(job, pace);
      return { job };
    },
    playAck: ({ job, index }) => {
      paces.get(job)?.shown(index);
      return {};
    },
    findBar: async ({ recording, view, frame }, { signal }) => {
      const opened = await keeper.opened(recording);
      const looks = viewOf(sessionView(view, recording));
      return findBar(opened, looks, frame, await tools(), quickPool, signal);
    },
    jobs: () => jobs.list(),
    cancel: ({ job }) => {
      jobs.cancel(job);
      return {};
    },
  };
}

/** A crop on whole pixels, cut to what lies in the picture. @throws InputError where nothing does. */
function withinPicture(crop: Region, { recording }: OpenRecording): Region {
  const x = Math.max(0, Math.round(crop.x));
  const y = Math.max(0, Math.round(crop.y));
  const width = Math.min(recording.width_px, Math.round(crop.x + crop.width)) - x;
  const height = Math.min(recording.height_px, Math.round(crop.y + crop.height)) - y;
  if (width < 2 || height < 2) throw new InputError('The part of the picture asked for lies outside of it.');
  return { x, y, width, height };
}

/** A view that isn't in the session as one that could be. */
function sessionView(view: LooseView, recording: string): SessionView {
  if (view.kind !== 'side') return { ...view, id: 'loose', recording };
  const { half_length_px, facing_deg, ...rest } = view;
  return {
    ...rest,
    id: 'loose',
    recording,
    ...(half_length_px !== null && { half_length_px }),
    ...(facing_deg !== null && { facing_deg }),
  };
}
