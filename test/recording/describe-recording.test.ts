import { describe, expect, test } from 'vitest';
import { describeRecording } from '../../src/recording/describe-recording.ts';
import type { Recording } from '../../src/recording/recording.ts';

const recording = (ticks: readonly number[]): Recording => ({
  ...{ path: '/bench/evening.mov', container: 'mov', codec: 'h264', pixelFormat: 'yuv420p', rotation_deg: 90 },
  ...{ storedWidth_px: 1280, storedHeight_px: 720, width_px: 720, height_px: 1280 },
  timebase: { numerator: 1, denominator: 600 },
  ticks: Float64Array.from(ticks),
  keyframes: Uint32Array.of(0),
  ...{ seekable: true, nominalRate_Hz: 30, bytes: 1000, remarks: [] },
});

describe('the facts of a recording', () => {
  test('of a varying rate with a gap, on the container clock', () => {
    expect(describeRecording(recording([60, 80, 100, 160, 180]))).toEqual({
      ...{ file: '/bench/evening.mov', bytes: 1000, container: 'mov', codec: 'h264', pixel_format: 'yuv420p' },
      ...{ width_px: 720, height_px: 1280, rotation_deg: 90, frames: 5 },
      ...{ first_frame_s: 0.1, last_frame_s: 0.1 + 0.2, duration_s: 0.2 + 20 / 600 },
      ...{ nominal_rate_Hz: 30, measured_rate_Hz: 20, longest_gap_s: 0.1, rate_varies: true },
      ...{ tick_s: 1 / 600, remarks: [] },
    });
  });

  test('a constant rate that is rounded to whole ticks does not vary', () => {
    // 59.94 frames/s on a clock of 1/600 s: gaps of 10 and 11 ticks.
    const ticks = Array.from({ length: 600 }, (_, i) => Math.round((i * 600 * 1001) / 60000));
    const described = describeRecording(recording(ticks));
    expect(described.rate_varies).toBe(false);
    expect(described.measured_rate_Hz).toBeCloseTo(60000 / 1001, 2);
  });

  test('a single frame has no rate', () => {
    expect(describeRecording(recording([60]))).toMatchObject({
      ...{ frames: 1, duration_s: 0, measured_rate_Hz: null, longest_gap_s: null, rate_varies: false },
    });
  });
});
