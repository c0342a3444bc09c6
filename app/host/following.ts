import { viewOf } from '../../src/measuring/measure-segment.ts';
import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import type { TrackerPool } from '../../src/tracking/pool.ts';
import type { HostEvents, Overview, SessionView } from '../contract.ts';
import { followStretches, shownColumns, unitOf } from './follow-stretch.ts';
import { overviewKey } from './keys.ts';
import {
  emptyOverview,
  firstAfter,
  firstNotBefore,
  type OverviewTrace,
  uncovered,
  withStretch,
} from './overview-trace.ts';
import type { Overviews } from './overviews.ts';
import { rateMeter } from './rate-meter.ts';

/** What following needs from the outside. */
export interface FollowingKit {
  readonly tools: FfmpegTools;
  readonly pool: TrackerPool;
  readonly cores: number;
  readonly overviews: Overviews;
  readonly now_ms: () => number;
}

/** Who is told: the events of the contract. */
export interface FollowEvents {
  readonly poses: (event: HostEvents['poses']) => void;
  readonly progress: (event: HostEvents['progress']) => void;
}

const TELL_EVERY_MS = 100;
/** What is left between two chunks or at the end is shorter than any frame of interest. */
const SLIVER_S = 0.25;

/** Follows what hasn't been followed yet of a view's stretch. Chunks that are finished stay, also when it is stopped. */
export async function followView(
  job: string,
  opened: OpenRecording,
  view: SessionView,
  stretch: readonly [number, number],
  time_s: Float64Array,
  kit: FollowingKit,
  events: FollowEvents,
  signal: AbortSignal,
): Promise<void> {
  const key = overviewKey(view, opened);
  const looks = viewOf(view);
  const unit = unitOf(looks);
  const known = (await kit.overviews.get(key)) ?? emptyOverview(unit);
  const stretches = uncovered(known.covered, stretch[0], stretch[1], SLIVER_S * opened.timeScale);
  const total_s = stretches.reduce((sum, [start, end]) => sum + end - start, 0);
  const meter = rateMeter(job, total_s, kit.now_ms);
  let overview = known;
  let told_ms = Number.NEGATIVE_INFINITY;
  // Half turns between the chunk that grows and what is before it: the same for all of its poses.
  let shift: number | null = null;
  events.progress(meter(0, 0));
  const { tools, pool, cores } = kit;
  try {
    await followStretches(
      { opened, view: looks, stretches, time_s, tools, pool, cores, signal },
      {
        poses: (live) => {
          const [from_s, to_s] = [live.time_s[0], live.time_s.at(-1)];
          if (from_s === undefined || to_s === undefined) return;
          shift ??= unit === 'rad' ? halfTurns_rad(live.angle, overview, from_s) : 0;
          const by = shift;
          const aligned = { ...live, angle: live.angle.map((a) => a + by) };
          events.poses({ job, view: view.id, from_s, to_s, trace: shownColumns(aligned, unit) });
        },
        chunk: (done) => {
          shift = null;
          const before = overview;
          overview = withStretch(before, done);
          kit.overviews.put(key, overview);
          // Where what came before was brought into line with it, that is told anew as well.
          const from_s = hasMoved(before, overview, done.from_s) ? 0 : done.from_s;
          const trace = shownColumns(rowsBetween(overview, from_s, done.to_s), unit);
          events.poses({ job, view: view.id, from_s, to_s: done.to_s, trace });
        },
        progress: (done_s, frames) => {
          if (kit.now_ms() - told_ms < TELL_EVERY_MS && done_s < total_s) return;
          told_ms = kit.now_ms();
          events.progress(meter(done_s, frames));
        },
      },
    );
  } finally {
    await kit.overviews.store(key);
  }
}

/** An overview in the unit of the window's border. */
export function shownOverview(overview: OverviewTrace): Overview {
  return { ...shownColumns(overview, overview.unit), covered: overview.covered.map(([start, end]) => [start, end]) };
}

/** Whether the last pose before a time isn't where it was. */
function hasMoved(before: OverviewTrace, after: OverviewTrace, from_s: number): boolean {
  const row = firstNotBefore(before.time_s, from_s) - 1;
  return row >= 0 && before.angle[row] !== after.angle[row];
}

function rowsBetween(overview: OverviewTrace, from_s: number, to_s: number) {
  const first = firstNotBefore(overview.time_s, from_s);
  const end = firstAfter(overview.time_s, to_s);
  return {
    time_s: overview.time_s.slice(first, end),
    angle: overview.angle.slice(first, end),
    quality: overview.quality.slice(first, end),
    x_px: overview.x_px.slice(first, end),
    y_px: overview.y_px.slice(first, end),
  };
}

/** The half turns that bring a chunk within a quarter turn of what comes before it. */
function halfTurns_rad(angle: Float64Array, overview: OverviewTrace, from_s: number): number {
  const before = overview.angle[firstNotBefore(overview.time_s, from_s) - 1];
  const first = angle[0];
  return before === undefined || first === undefined ? 0 : Math.PI * Math.round((before - first) / Math.PI);
}
