import { ringDownOptions } from '../../src/measuring/measure-segment.ts';
import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import type { HostEvents, SessionView } from '../contract.ts';
import { followView, shownOverview } from './following.ts';
import { frameTimes_s } from './frame-times.ts';
import type { JobEnd } from './jobs.ts';
import { overviewKey } from './keys.ts';
import { traceWithin } from './overview-trace.ts';
import type { Parts, Some } from './parts.ts';
import { Refusal } from './serve-window.ts';
import { fitCurves, shownFit } from './shown-fit.ts';

/** Calls about following, fits and results. */
export function fitCalls(parts: Parts): Some<'follow' | 'overview' | 'previewFit' | 'results' | 'segmentCurves'> {
  const { options, keeper, measuring, fits, overviews, tools, jobs, pool, broadcast } = parts;
  const viewAndRecording = async (id: string): Promise<{ view: SessionView; opened: OpenRecording }> => {
    const view = keeper.need().session.views.find((v) => v.id === id);
    if (!view) throw new Refusal('bad_input', `There is no view ${id} in this session.`);
    return { view, opened: await keeper.opened(view.recording) };
  };
  return {
    follow: async ({ view: id, start_s, end_s }) => {
      const { view, opened } = await viewAndRecording(id);
      if (jobs.list().some((job) => job.kind === 'follow' && job.view === id)) {
        throw new Refusal('bad_input', `View ${id} is being followed already.`);
      }
      const time_s = frameTimes_s(opened);
      const stretch = [
        Math.max(0, start_s ?? 0),
        Math.min(time_s.at(-1) ?? 0, end_s ?? Number.POSITIVE_INFINITY),
      ] as const;
      const kit = { tools: await tools(), pool, cores: options.cores, overviews, now_ms: options.now_ms };
      const events = {
        poses: (event: HostEvents['poses']) => broadcast('poses', event),
        progress: (event: HostEvents['progress']) => broadcast('progress', event),
      };
      const run = (job: string, signal: AbortSignal) =>
        followView(job, opened, view, stretch, time_s, kit, events, signal);
      measuring.hold(true);
      const ended = (job: string, error: JobEnd) => {
        measuring.hold(jobs.runs('follow'));
        broadcast('jobEnded', { job, error });
      };
      return { job: jobs.start('follow', id, null, run, ended) };
    },
    overview: async ({ view: id }) => {
      const { view, opened } = await viewAndRecording(id);
      const overview = await overviews.get(overviewKey(view, opened));
      return overview && shownOverview(overview);
    },
    previewFit: async ({ view: id, start_s, end_s, lane }, { signal }) => {
      const { view, opened } = await viewAndRecording(id);
      const overview = await overviews.get(overviewKey(view, opened));
      const trace = overview && traceWithin(overview, start_s, end_s);
      if (!trace) {
        const message = 'The bar has not been followed here yet.';
        return { ok: false, checks: [{ code: 'not_followed', severity: 'note', message }], curves: null };
      }
      const { apparatus } = keeper.need().session;
      const outcome = { ok: true, trace } as const;
      const task = { kind: 'fit', outcome, options: ringDownOptions(view, opened), apparatus } as const;
      return shownFit(trace, await fits.do(task, lane, signal));
    },
    results: () => measuring.state(),
    segmentCurves: ({ segment }) => {
      const drawn = measuring.current().get(segment);
      return drawn?.measured.trace ? fitCurves(drawn.measured.trace, drawn.fit) : null;
    },
  };
}
