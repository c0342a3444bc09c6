import { frameTime_s } from './frame-clock.ts';
import type { Recording } from './recording.ts';

/** Facts of a recording under the names that `needlebeat inspect` prints. */
export interface RecordingDescription {
  readonly file: string;
  readonly bytes: number;
  readonly container: string;
  readonly codec: string;
  readonly pixel_format: string;
  readonly width_px: number;
  readonly height_px: number;
  /** How far the stored picture is turned clockwise for display. */
  readonly rotation_deg: number;
  readonly frames: number;
  /** From the first frame to the end of the last one, which is taken to last as long as the median frame. */
  readonly duration_s: number;
  /** On the container's own clock. */
  readonly first_frame_s: number;
  readonly last_frame_s: number;
  /** Frame rate the container states. */
  readonly nominal_rate_Hz: number | null;
  /** Mean rate over the whole recording; null for a single frame. */
  readonly measured_rate_Hz: number | null;
  /** Longest time between two frames that follow each other; null for a single frame. */
  readonly longest_gap_s: number | null;
  /** Whether the times between frames differ by more than the container's clock can't help. */
  readonly rate_varies: boolean;
  /** How long one tick of the container's clock lasts. */
  readonly tick_s: number;
  readonly remarks: readonly string[];
}

/** The facts of a recording as a plain object, on the container's clock (time scale 1). */
export function describeRecording(recording: Recording): RecordingDescription {
  const { ticks, timebase } = recording;
  const tick_s = timebase.numerator / timebase.denominator;
  const last = ticks.length - 1;
  const span_s = frameTime_s(recording, last, 1);
  const gaps = Float64Array.from({ length: last }, (_, i) => (ticks[i + 1] ?? 0) - (ticks[i] ?? 0)).sort();
  const longest = gaps.at(-1) ?? 0;
  const shortest = gaps[0] ?? 0;
  const first_frame_s = (ticks[0] ?? 0) * tick_s;
  return {
    file: recording.path,
    bytes: recording.bytes,
    container: recording.container,
    codec: recording.codec,
    pixel_format: recording.pixelFormat,
    width_px: recording.width_px,
    height_px: recording.height_px,
    rotation_deg: recording.rotation_deg,
    frames: ticks.length,
    duration_s: span_s + (gaps[last >> 1] ?? 0) * tick_s,
    first_frame_s,
    last_frame_s: first_frame_s + span_s,
    nominal_rate_Hz: recording.nominalRate_Hz,
    measured_rate_Hz: last > 0 ? last / span_s : null,
    longest_gap_s: last > 0 ? longest * tick_s : null,
    // Rounding a constant rate to whole ticks makes gaps differ by one tick.
    rate_varies: longest - shortest > 1,
    tick_s,
    remarks: recording.remarks,
  };
}
