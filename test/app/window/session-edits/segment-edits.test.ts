import { describe, expect, test } from 'vitest';
import type { Session } from '../../../../app/contract.ts';
import {
  addSegment,
  changeSegment,
  edgeWithin,
  freeStretch,
  removeSegment,
} from '../../../../app/window/session-edits/segment-edits.ts';
import { removeView, viewOfKind, viewWithRegion } from '../../../../app/window/session-edits/view-edits.ts';
import { sessionSchema } from '../../../../src/session/session.ts';

const session: Session = {
  format: 'needlebeat/session',
  version: 1,
  recordings: [
    { id: 'A', file: 'a.mp4' },
    { id: 'B', file: 'b.mp4' },
  ],
  views: [
    { id: 'v1', recording: 'A', kind: 'plan', region: { x: 10, y: 20, width: 100, height: 80 } },
    { id: 'v2', recording: 'B', kind: 'side', region: { x: 0, y: 0, width: 100, height: 50 }, axis_x_px: 50 },
  ],
  segments: [
    {
      id: 's01',
      recording: 'A',
      view: 'v1',
      start_s: 10,
      end_s: 20,
      current_A: 0.1,
      u_current_A: 0.001,
      sweep: 'rising',
    },
    { id: 's02', recording: 'A', view: 'v1', start_s: 30, end_s: 40, current_A: null },
    { id: 's03', recording: 'B', view: 'v2', start_s: 0, end_s: 100, current_A: 0 },
  ],
};

describe('segments', () => {
  test('a new one gets a free name, its place in time, and what the one before it says', () => {
    const { session: next, id } = addSegment(session, { recording: 'A', view: 'v1', start_s: 28.12345, end_s: 22 });
    expect(id).toBe('s04');
    expect(next.segments.map((s) => s.id)).toEqual(['s01', 's04', 's02', 's03']);
    expect(next.segments[1]).toEqual({
      id: 's04',
      recording: 'A',
      view: 'v1',
      start_s: 22,
      end_s: 28.123,
      current_A: null,
      u_current_A: 0.001,
      sweep: 'rising',
    });
    expect(sessionSchema.safeParse(next).success).toBe(true);
    expect(session.segments).toHaveLength(3);
  });

  test('free stretches end at neighbours of the same recording', () => {
    expect(freeStretch(session, 'A', 25, 60)).toEqual({ start_s: 20, end_s: 30 });
    expect(freeStretch(session, 'A', 50, 60)).toEqual({ start_s: 40, end_s: 60 });
    expect(freeStretch(session, 'A', 15, 60)).toBeNull();
    expect(freeStretch(session, 'A', 15, 60, 's01')).toEqual({ start_s: 0, end_s: 30 });
  });

  test('an edge stops at a neighbour, at the end of the recording and before the other edge', () => {
    expect(edgeWithin(session, 's01', 'end', 35, 60)).toBe(30);
    expect(edgeWithin(session, 's01', 'end', 5, 60)).toBe(10.3);
    expect(edgeWithin(session, 's02', 'end', 99, 60)).toBe(60);
    expect(edgeWithin(session, 's02', 'start', 12, 60)).toBe(20);
    expect(edgeWithin(session, 's01', 'start', -5, 60)).toBe(0);
  });

  test('a change sets fields, undefined takes them away, the others stay', () => {
    const next = changeSegment(session, 's01', { sweep: undefined, current_A: -0.2 });
    expect(next.segments[0]).toEqual({
      id: 's01',
      recording: 'A',
      view: 'v1',
      start_s: 10,
      end_s: 20,
      current_A: -0.2,
      u_current_A: 0.001,
    });
    expect(removeSegment(next, 's01').segments.map((s) => s.id)).toEqual(['s02', 's03']);
  });

  test('a segment takes the run of the fibre with it that it stood for', () => {
    const runs_at_lengths = [
      { length_m: 0.1, segment: 's01' },
      { length_m: 0.2, f0_Hz: 0.7 },
    ];
    const fibre = { length_m: 0.3, run_without_field: { segment: 's02' }, runs_at_lengths };
    const known = { ...session, apparatus: { fibre } };
    expect(removeSegment(known, 's02').apparatus).toEqual({ fibre: { length_m: 0.3, runs_at_lengths } });
    expect(removeSegment(known, 's01').apparatus?.fibre?.runs_at_lengths).toEqual([runs_at_lengths[1]]);
    expect(removeSegment(known, 's03').apparatus).toEqual(known.apparatus);
  });
});

describe('views', () => {
  test('the kind changes with the fields it needs, and back', () => {
    const side = viewOfKind(session.views[0]!, 'side');
    expect(side).toEqual({ ...session.views[0], kind: 'side', axis_x_px: 60 });
    expect(viewOfKind(side, 'plan')).toEqual(session.views[0]);
    expect(viewOfKind(side, 'oblique')).toMatchObject({ kind: 'oblique', elevation_deg: 45 });
  });

  test('the fibre line moves with its region', () => {
    const moved = viewWithRegion(session.views[1]!, { x: 30, y: 0, width: 100, height: 50 });
    expect(moved).toMatchObject({ axis_x_px: 80 });
  });

  test('a view with segments is not deleted', () => {
    expect(removeView(session, 'v1')).toBeNull();
    expect(removeView(removeSegment(session, 's03'), 'v2')?.views.map((v) => v.id)).toEqual(['v1']);
  });
});
