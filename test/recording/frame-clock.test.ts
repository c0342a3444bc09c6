import { describe, expect, test } from 'vitest';
import { frameAt, framesWithin, frameTime_s } from '../../src/recording/frame-clock.ts';

// 30000/1001 frames/s on a clock of 1/30000 s that begins at 0.187 s, the fourth frame dropped.
const recording = {
  ticks: Float64Array.of(5610, 6611, 7612, 9614, 10615),
  timebase: { numerator: 1, denominator: 30000 },
};

describe('frame times', () => {
  test('count from the first displayed frame', () => {
    expect(frameTime_s(recording, 0, 1)).toBe(0);
    expect(frameTime_s(recording, 3, 1)).toBe(4004 / 30000);
  });

  test('are multiplied by the time scale', () => {
    expect(frameTime_s(recording, 4, 0.125)).toBeCloseTo(5005 / 240000, 15);
  });

  test('keep their differences to the last digit far into a recording with a large offset', () => {
    const far = 2 ** 52;
    const late = { ...recording, ticks: Float64Array.of(far, far + 1001, far + 2002) };
    expect(frameTime_s(late, 2, 1)).toBe(2002 / 30000);
  });

  test('an index outside is a mistake', () => {
    expect(() => frameTime_s(recording, 5, 1)).toThrow('index: expected a whole number from 0 to 4, got 5');
    expect(() => frameTime_s(recording, -1, 1)).toThrow(RangeError);
  });
});

describe('frames of a stretch', () => {
  test('both bounds belong to it', () => {
    const [start_s, end_s] = [frameTime_s(recording, 1, 1), frameTime_s(recording, 3, 1)];
    expect(framesWithin(recording, start_s, end_s, 1)).toEqual({ first: 1, end: 4 });
    expect(framesWithin(recording, start_s + 1e-9, end_s - 1e-9, 1)).toEqual({ first: 2, end: 3 });
  });

  test('none before, after, between or in a reversed stretch', () => {
    for (const [start_s, end_s] of [
      [-2, -1],
      [1, 2],
      [0.11, 0.12],
      [0.1, 0],
    ] as const) {
      const { first, end } = framesWithin(recording, start_s, end_s, 1);
      expect(end).toBe(first);
    }
  });
});

test('the frame shown at a time is the last one that has begun', () => {
  const times = [-1, 0, 0.03, 0.04, 0.12, 0.14, 9];
  expect(times.map((time_s) => frameAt(recording, time_s, 1))).toEqual([0, 0, 0, 1, 2, 3, 4]);
});
