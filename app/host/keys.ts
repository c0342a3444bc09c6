import { createHash } from 'node:crypto';
import type { OpenRecording } from '../../src/measuring/open-recordings.ts';
import type { Apparatus } from '../../src/reduction/apparatus.ts';
import { programName } from '../../src/report/program.ts';
import type { SessionSegment, SessionView } from '../../src/session/session.ts';

/** Hash of everything that the poses of a segment depend on. */
export function followKey(segment: SessionSegment, view: SessionView, opened: OpenRecording, ffmpeg: string): string {
  const { start_s, end_s } = segment;
  return hash(['segment', opened.facts.content, opened.timeScale, looks(view), start_s, end_s, programName, ffmpeg]);
}

/** Hash of everything that the fit of a segment depends on. */
export function fitKey(
  follow: string,
  view: SessionView,
  opened: OpenRecording,
  apparatus: Apparatus | undefined,
): string {
  const facing = view.kind === 'side' ? (view.facing_deg ?? null) : null;
  // Of the rig only what gives the fibre's share of the torque goes into the fit.
  const rig = apparatus?.fibre && apparatus.magnet ? [apparatus.fibre, apparatus.magnet] : null;
  return hash(['fit', follow, opened.u_time_scale, view.kind, facing, rig]);
}

/** Hash of everything that the overview trace of a view depends on. */
export function overviewKey(view: SessionView, opened: OpenRecording): string {
  return hash(['overview in line', opened.facts.content, opened.timeScale, looks(view), programName]);
}

/** A view without its names. */
function looks(view: SessionView): object {
  const { id: _id, recording: _recording, ...rest } = view;
  return rest;
}

function hash(parts: readonly unknown[]): string {
  return createHash('sha256').update(JSON.stringify(parts)).digest('hex').slice(0, 40);
}
