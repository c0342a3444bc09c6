import type { Session, SessionSegment } from '../../../src/session/session.ts';

/** The shortest stretch that may be marked, seconds: a slip of the pointer is no segment. */
export const SHORTEST_SEGMENT_S = 0.3;

/** Fields of a segment that an edit sets; undefined removes an optional one. */
export type SegmentChange = { readonly [K in keyof SessionSegment]?: SessionSegment[K] | undefined };

/** The segments of one recording in the order of time. */
export function segmentsOf(session: Session, recording: string): SessionSegment[] {
  return session.segments.filter((s) => s.recording === recording).sort((a, b) => a.start_s - b.start_s);
}

/** The first free name of the row s01, s02, … */
export function freeSegmentId(session: Session): string {
  const taken = new Set(session.segments.map((s) => s.id));
  for (let n = session.segments.length + 1; ; n++) {
    const id = `s${String(n).padStart(2, '0')}`;
    if (!taken.has(id)) return id;
  }
}

/**
 * The largest stretch free of other segments that holds `time_s`, within [0, whole_s]; null where the time lies inside
 * another segment. `except` is the segment that doesn't count.
 */
export function freeStretch(
  session: Session,
  recording: string,
  time_s: number,
  whole_s: number,
  except?: string,
): { readonly start_s: number; readonly end_s: number } | null {
  let start_s = 0;
  let end_s = whole_s;
  for (const s of session.segments) {
    if (s.recording !== recording || s.id === except) continue;
    if (s.start_s < time_s && time_s < s.end_s) return null;
    if (s.end_s <= time_s) start_s = Math.max(start_s, s.end_s);
    if (s.start_s >= time_s) end_s = Math.min(end_s, s.start_s);
  }
  return end_s > start_s ? { start_s, end_s } : null;
}

/**
 * A session with one segment more. Its current is not known yet; its uncertainty and its sweep are taken over from the segment before
 * it, which saves typing and can be changed.
 */
export function addSegment(
  session: Session,
  stretch: { recording: string; view: string; start_s: number; end_s: number },
): { readonly session: Session; readonly id: string } {
  const id = freeSegmentId(session);
  const before = segmentsOf(session, stretch.recording)
    .filter((s) => s.end_s <= stretch.start_s + 1e-9)
    .at(-1);
  const segment: SessionSegment = {
    id,
    recording: stretch.recording,
    view: stretch.view,
    start_s: toMilliseconds(Math.min(stretch.start_s, stretch.end_s)),
    end_s: toMilliseconds(Math.max(stretch.start_s, stretch.end_s)),
    current_A: null,
    ...(before?.u_current_A === undefined ? {} : { u_current_A: before.u_current_A }),
    ...(before?.sweep === undefined ? {} : { sweep: before.sweep }),
  };
  return { session: { ...session, segments: inOrder([...session.segments, segment], session) }, id };
}

/** A session in which one segment's fields are changed; undefined takes an optional field away. */
export function changeSegment(session: Session, id: string, change: SegmentChange): Session {
  const segments = session.segments.map((s) => (s.id === id ? withChange(s, change) : s));
  return { ...session, segments: inOrder(segments, session) };
}

/** A session without a segment, and without the run of the fibre that it may have stood for. */
export function removeSegment(session: Session, id: string): Session {
  const { apparatus } = session;
  const isOther = (run: object) => !('segment' in run) || run.segment !== id;
  const { run_without_field: free, runs_at_lengths: lengths, ...rest } = apparatus?.fibre ?? {};
  const left = lengths?.filter(isOther) ?? [];
  const fibre = {
    ...rest,
    ...(free && isOther(free) && { run_without_field: free }),
    ...(left.length > 0 && { runs_at_lengths: left }),
  };
  const segments = session.segments.filter((s) => s.id !== id);
  return apparatus?.fibre === undefined
    ? { ...session, segments }
    : { ...session, segments, apparatus: { ...apparatus, fibre } };
}

/**
 * Where an edge may stand when it is dragged to `time_s`: inside the recording, not across a neighbour, and not closer to the
 * other edge than the shortest segment.
 */
export function edgeWithin(
  session: Session,
  id: string,
  edge: 'start' | 'end',
  time_s: number,
  whole_s: number,
): number {
  const segment = session.segments.find((s) => s.id === id);
  if (!segment) return time_s;
  const middle = (segment.start_s + segment.end_s) / 2;
  const free = freeStretch(session, segment.recording, middle, whole_s, id) ?? segment;
  return edge === 'start'
    ? toMilliseconds(Math.min(Math.max(time_s, free.start_s), segment.end_s - SHORTEST_SEGMENT_S))
    : toMilliseconds(Math.max(Math.min(time_s, free.end_s), segment.start_s + SHORTEST_SEGMENT_S));
}

/** Times are kept to a millisecond: finer than any frame, short in the file. */
export function toMilliseconds(time_s: number): number {
  return Math.round(time_s * 1000) / 1000;
}

function withChange(segment: SessionSegment, change: SegmentChange): SessionSegment {
  const merged = Object.entries({ ...segment, ...change }).filter(([, value]) => value !== undefined);
  return Object.fromEntries(merged) as SessionSegment;
}

/** Segments by recording (in the session's order of recordings), then by time. */
function inOrder(segments: SessionSegment[], session: Session): SessionSegment[] {
  const place = new Map(session.recordings.map((r, i) => [r.id, i]));
  return segments.sort(
    (a, b) => (place.get(a.recording) ?? 0) - (place.get(b.recording) ?? 0) || a.start_s - b.start_s,
  );
}
