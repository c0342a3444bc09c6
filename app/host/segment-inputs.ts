import {
  checkAgainstRecordings,
  describeOpened,
  type OpenRecording,
  type SessionRecordings,
} from '../../src/measuring/open-recordings.ts';
import { InputError } from '../../src/recording/input-error.ts';
import type { Session, SessionSegment, SessionView } from '../contract.ts';
import type { OpenFile } from './open-files.ts';

/** Everything that measuring one segment starts from. */
export interface SegmentInput {
  readonly segment: SessionSegment;
  readonly view: SessionView;
  readonly opened: OpenRecording;
}

/** What can be measured of a session as it stands, and why the rest can't. `opening`: recordings that will be there in a moment. */
export interface SessionInputs {
  readonly recordings: SessionRecordings;
  readonly inputs: readonly SegmentInput[];
  readonly opening: readonly string[];
  readonly problems: readonly { readonly segment: string; readonly message: string }[];
}

/**
 * Sorts the segments of a session.
 * @param session as its file holds it. @param fileOf how a recording's file stands; null: nobody knows where it is.
 */
export function sessionInputs(session: Session, fileOf: (recording: string) => OpenFile | null): SessionInputs {
  const recordings = new Map<string, OpenRecording>();
  const files = new Map(session.recordings.map((r) => [r.id, fileOf(r.id)]));
  for (const entry of session.recordings) {
    const file = files.get(entry.id);
    if (file?.state === 'ready') recordings.set(entry.id, describeOpened(entry, file.recording, file.content));
  }
  const inputs: SegmentInput[] = [];
  const opening: string[] = [];
  const problems: { segment: string; message: string }[] = [];
  for (const segment of session.segments) {
    const view = session.views.find((v) => v.id === segment.view);
    const opened = recordings.get(segment.recording);
    const file = files.get(segment.recording) ?? null;
    if (opened && view) {
      const message = misfit(session, segment, view, recordings);
      if (message === null) inputs.push({ segment, view, opened });
      else problems.push({ segment: segment.id, message });
    } else if (file?.state === 'opening') opening.push(segment.id);
    else problems.push({ segment: segment.id, message: whyNot(segment, file) });
  }
  return { recordings, inputs, opening, problems };
}

function misfit(
  session: Session,
  segment: SessionSegment,
  view: SessionView,
  recordings: SessionRecordings,
): string | null {
  try {
    checkAgainstRecordings({ ...session, views: [view], segments: [segment] }, recordings, 'This session');
    return null;
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
}

function whyNot(segment: SessionSegment, file: OpenFile | null): string {
  const where = `Segment ${segment.id}: its recording ${segment.recording}`;
  return file?.state === 'unusable'
    ? `${where} can't be used.`
    : `${where} is missing: say where it is, and the segment is measured.`;
}
