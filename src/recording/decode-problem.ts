import type { FrameRange } from './decode-command.ts';
import type { ChildEnd } from './ffmpeg-child.ts';
import { frameTime_s } from './frame-clock.ts';
import type { Recording } from './recording.ts';

/** How a decoding went, for the sentence about it. */
export interface DecodeOutcome {
  readonly recording: Recording;
  readonly range: FrameRange;
  readonly timeScale: number;
  /** Index after the last frame that came. */
  readonly next: number;
  readonly lost: number;
  readonly end: ChildEnd | null;
}

/** One plain sentence about what went wrong in a decoding, null where nothing did. The exit code proves nothing, so the frames decide. */
export function decodeProblem(outcome: DecodeOutcome): string | null {
  const { range, next, lost, end } = outcome;
  const count = range.end - range.first;
  if (end?.stopped === 'not started') return 'ffmpeg could not be started.';
  if (next < range.end && lost > 0) {
    const where =
      next === range.first
        ? 'No frame of the stretch could be decoded'
        : `Decoding ended at ${endTime(outcome)} s, ${range.end - next} of ${count} frames short`;
    return `${where}: ${whyEnded(end)}.`;
  }
  if (lost > 0) return `${lost} of ${count} frames could not be decoded: the recording is damaged there.`;
  return end !== null && showsDamage(end.stderr)
    ? 'Parts of some frames are damaged and were made up by the decoder.'
    : null;
}

function endTime({ recording, next, timeScale }: DecodeOutcome): string {
  return frameTime_s(recording, next - 1, timeScale).toFixed(3);
}

function whyEnded(end: ChildEnd | null): string {
  if (end?.stopped === 'silence') return 'the decoder made no more progress and was stopped';
  if (end !== null && /Invalid too big or non positive size/.test(end.stderr)) {
    return 'the size of the picture changes there';
  }
  return 'the recording is damaged or cut short there';
}

/** Only what decoders say when picture data are broken: they also grumble about frames before a seek that nobody asked for. */
function showsDamage(stderr: string): boolean {
  return /error while decoding|concealing|corrupt|invalid NAL|Invalid data found when processing/i.test(stderr);
}
