import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Session } from '../../../../app/contract.ts';
import { timeLabel, timeTicks } from '../../../../app/window/plots/ticks.ts';
import { filmPlaces } from '../../../../app/window/time-board/film-places.ts';
import { markedStretch, neighbour, targetAt } from '../../../../app/window/time-board/marking.ts';
import {
  clampSpan,
  panSpan,
  revealTime,
  spanAround,
  toPixel,
  toTime,
  zoomSpan,
} from '../../../../app/window/time-board/time-span.ts';

const spans = fc.record({
  start_s: fc.double({ min: 0, max: 500, noNaN: true }),
  length: fc.double({ min: 0.2, max: 600, noNaN: true }),
});

describe('the stretch on the board', () => {
  test('zooming keeps the time under the pointer where it is, as long as the ends allow', () => {
    const next = zoomSpan({ start_s: 0, end_s: 100 }, 40, 2, 100);
    expect(next).toEqual({ start_s: 20, end_s: 70 });
    expect(toPixel(40, next, 800)).toBeCloseTo(toPixel(40, { start_s: 0, end_s: 100 }, 800), 9);
  });

  test('whatever is done to it, it stays inside the recording', () => {
    fc.assert(
      fc.property(
        spans,
        fc.double({ min: -2000, max: 2000, noNaN: true }),
        fc.double({ min: 0.01, max: 100, noNaN: true }),
        (s, by, factor) => {
          const span = clampSpan({ start_s: s.start_s, end_s: s.start_s + s.length }, 600);
          for (const next of [
            panSpan(span, by, 600),
            zoomSpan(span, by, factor, 600),
            revealTime(span, by, 600),
            spanAround(span, 600),
          ]) {
            expect(next.start_s).toBeGreaterThanOrEqual(0);
            expect(next.end_s).toBeLessThanOrEqual(600 + 1e-9);
            expect(next.end_s - next.start_s).toBeGreaterThanOrEqual(0.2 - 1e-9);
          }
        },
      ),
    );
  });

  test('pixels and times are each other’s inverse', () => {
    const span = { start_s: 12, end_s: 34 };
    expect(toTime(toPixel(20.5, span, 731), span, 731)).toBeCloseTo(20.5, 9);
  });
});

const session: Session = {
  format: 'needlebeat/session',
  version: 1,
  recordings: [{ id: 'A', file: 'a.mp4' }],
  views: [{ id: 'v1', recording: 'A', kind: 'plan', region: { x: 0, y: 0, width: 9, height: 9 } }],
  segments: [
    { id: 's01', recording: 'A', view: 'v1', start_s: 10, end_s: 20, current_A: 0 },
    { id: 's02', recording: 'A', view: 'v1', start_s: 20, end_s: 30, current_A: 0 },
  ],
};
const span = { start_s: 0, end_s: 100 };

describe('a press on the board', () => {
  test('takes the edge near it, the segment it is in, or free board', () => {
    expect(targetAt(session.segments, 102, span, 1000, null)).toEqual({ kind: 'edge', segment: 's01', edge: 'start' });
    expect(targetAt(session.segments, 150, span, 1000, null)).toEqual({ kind: 'segment', segment: 's01' });
    expect(targetAt(session.segments, 600, span, 1000, null)).toEqual({ kind: 'free' });
  });

  test('where two segments touch, the edge of the selected one is taken', () => {
    expect(targetAt(session.segments, 200, span, 1000, 's02')).toEqual({ kind: 'edge', segment: 's02', edge: 'start' });
    expect(targetAt(session.segments, 200, span, 1000, 's01')).toEqual({ kind: 'edge', segment: 's01', edge: 'end' });
  });

  test('a drag marks a stretch, cut at neighbours and ends; a slip marks nothing', () => {
    expect(markedStretch(session, 'A', 40, 60, 100)).toEqual({ start_s: 40, end_s: 60 });
    expect(markedStretch(session, 'A', 40, 15, 100)).toEqual({ start_s: 30, end_s: 40 });
    expect(markedStretch(session, 'A', 95, 120, 100)).toEqual({ start_s: 95, end_s: 100 });
    expect(markedStretch(session, 'A', 15, 60, 100)).toBeNull();
    expect(markedStretch(session, 'A', 40, 40.1, 100)).toBeNull();
  });

  test('neighbours go by time and stop at the ends', () => {
    expect(neighbour(session.segments, null, 1)).toBe('s01');
    expect(neighbour(session.segments, null, -1)).toBe('s02');
    expect(neighbour(session.segments, 's01', 1)).toBe('s02');
    expect(neighbour(session.segments, 's02', 1)).toBe('s02');
    expect(neighbour([], null, 1)).toBeNull();
  });
});

describe('the time axis', () => {
  test('has round marks, never more than asked for', () => {
    expect(timeTicks(0, 160, 18)).toEqual({ places: Array.from({ length: 17 }, (_, i) => i * 10), decimals: 0 });
    expect(timeTicks(3.12, 3.5, 8)).toEqual({
      places: [3.15, 3.2, 3.25, 3.3, 3.35, 3.4, 3.45, 3.5].map((t) => expect.closeTo(t, 9)),
      decimals: 2,
    });
    fc.assert(
      fc.property(spans, fc.integer({ min: 2, max: 40 }), (s, most) => {
        expect(timeTicks(s.start_s, s.start_s + s.length, most).places.length).toBeLessThanOrEqual(most + 1);
      }),
    );
  });

  test('labels are seconds in short recordings, minutes and seconds in long ones', () => {
    expect(timeLabel(7.5, 1, 60)).toBe('7.5');
    expect(timeLabel(125, 0, 600)).toBe('2:05');
    expect(timeLabel(59.96, 1, 600)).toBe('1:00.0');
  });

  test('every place of the film strip shows the picture nearest in time', () => {
    const places = filmPlaces([5, 15, 25, 60], { start_s: 0, end_s: 40 }, 400, 100);
    expect(places).toEqual([
      { index: 0, x_px: 0 },
      { index: 1, x_px: 100 },
      { index: 2, x_px: 200 },
      { index: 2, x_px: 300 },
    ]);
    expect(filmPlaces([], { start_s: 0, end_s: 40 }, 400, 100)).toEqual([]);
  });
});
