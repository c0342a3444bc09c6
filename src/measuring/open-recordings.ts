import { basename } from 'node:path';
import { contentHash } from '../recording/content-hash.ts';
import type { FfmpegTools } from '../recording/find-ffmpeg.ts';
import { frameTime_s } from '../recording/frame-clock.ts';
import { InputError } from '../recording/input-error.ts';
import { openRecording } from '../recording/open-recording.ts';
import type { Recording } from '../recording/recording.ts';
import type { RecordingResult } from '../report/results.ts';
import { recordingPath, type SessionFile } from '../session/read-session.ts';
import type { Session, SessionRecording } from '../session/session.ts';

/** Relative standard uncertainty of a phone's clock where the session gives none: an ordinary quartz (contract). */
export const DEFAULT_U_TIME_SCALE = 2e-5;

/** A recording of a session, opened. */
export interface OpenRecording {
  readonly recording: Recording;
  readonly timeScale: number;
  readonly u_time_scale: number;
  readonly facts: RecordingResult;
}

export type SessionRecordings = ReadonlyMap<string, OpenRecording>;

/**
 * Opens every recording that the segments of a session need and checks the session against them.
 * @throws InputError naming the file, the view or the segment.
 */
export async function openRecordings(
  file: SessionFile,
  tools: FfmpegTools,
  signal?: AbortSignal,
): Promise<SessionRecordings> {
  const { session, path } = file;
  const opened = new Map<string, OpenRecording>();
  for (const entry of session.recordings) {
    const recording = await openRecording(recordingPath(path, entry.file), tools, signal);
    opened.set(entry.id, describeOpened(entry, recording, await contentHash(recording.path)));
  }
  checkAgainstRecordings(session, opened, basename(path));
  return opened;
}

/** An opened recording with the session's clock for it. */
export function describeOpened(entry: SessionRecording, recording: Recording, content: string): OpenRecording {
  const timeScale = entry.time_scale ?? 1;
  const u_time_scale = entry.u_time_scale ?? DEFAULT_U_TIME_SCALE;
  const facts = {
    id: entry.id,
    file: entry.file,
    bytes: recording.bytes,
    content,
    time_scale: timeScale,
    u_time_scale,
  };
  return { recording, timeScale, u_time_scale, facts };
}

/** What a session says of pictures and times must lie within its recordings. @throws InputError */
export function checkAgainstRecordings(session: Session, recordings: SessionRecordings, name: string): void {
  for (const view of session.views) {
    const opened = recordings.get(view.recording);
    if (!opened) continue;
    const { width_px, height_px } = opened.recording;
    const { x, y, width, height } = view.region;
    if (x + width > width_px || y + height > height_px) {
      throw new InputError(
        `${name}: view ${view.id}: its region reaches to (${x + width}, ${y + height}), outside the picture of recording ${view.recording}, which has ${width_px} × ${height_px} pixels.`,
      );
    }
    if (width < 8 || height < 8) {
      throw new InputError(
        `${name}: view ${view.id}: its region of ${width} × ${height} pixels is too small; at least 8 × 8 are needed.`,
      );
    }
  }
  for (const segment of session.segments) {
    const opened = recordings.get(segment.recording);
    if (!opened) continue;
    const { recording, timeScale } = opened;
    const last_s = frameTime_s(recording, recording.ticks.length - 1, timeScale);
    // The last frame stays on the screen for a while: an end up to a moment after it is meant to be the end.
    const slack_s = Math.max(0.5 * timeScale, (2 * last_s) / Math.max(1, recording.ticks.length - 1));
    if (segment.end_s > last_s + slack_s) {
      throw new InputError(
        `${name}: segment ${segment.id}: it ends at ${segment.end_s} s, but recording ${segment.recording} ends at ${last_s.toFixed(3)} s.`,
      );
    }
  }
}
