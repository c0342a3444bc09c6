import { describe, expect, it } from 'vitest';
import { chunksOf } from '../../../app/host/chunks.ts';
import { parted } from '../../../app/host/lead-in.ts';
import { emptyOverview, traceWithin, uncovered, withStretch } from '../../../app/host/overview-trace.ts';
import type { Trace } from '../../../src/tracking/trace.ts';

const RATE_HZ = 30;

/** A trace of frames from..to of a bar that turns slowly, as a tracker gives it: angle known up to half turns. */
function traceOf(from: number, to: number, halfTurns: number, refused: number[] = []): Trace {
  const frames = Array.from({ length: to - from }, (_, i) => from + i).filter((f) => !refused.includes(f));
  const column = (f: (frame: number) => number) => Float64Array.from(frames, f);
  return {
    time_s: column((frame) => frame / RATE_HZ),
    angle: column((frame) => turned(frame) + halfTurns * Math.PI),
    unit: 'rad',
    x_px: column(() => 5),
    y_px: column((frame) => frame),
    quality: column(() => 1),
    frame_index: Int32Array.from(frames),
    refused: refused.map((frame_index) => ({ frame_index, reason: 'hidden' as const })),
    halfLength_px: 50,
    u_common: 0,
  };
}
const turned = (frame: number) => 0.01 * frame;

describe('overview trace', () => {
  it('joins stretches in any order without half turns between them', () => {
    const parts = [
      { from_s: 3.99, to_s: 5.99, trace: traceOf(120, 180, 3) },
      { from_s: 0, to_s: 1.99, trace: traceOf(0, 60, 0) },
      { from_s: 1.99, to_s: 3.99, trace: traceOf(60, 120, -1, [70, 71]) },
    ];
    const whole = parts.reduce(withStretch, emptyOverview('rad'));
    expect(whole.covered).toEqual([[0, 5.99]]);
    expect(whole.time_s).toHaveLength(178);
    const offset = (whole.angle[0] ?? 0) - turned(0);
    expect(offset / Math.PI).toBeCloseTo(Math.round(offset / Math.PI), 9);
    for (const [row, frame] of whole.frame_index.entries()) {
      expect((whole.angle[row] ?? 0) - turned(frame)).toBeCloseTo(offset, 9);
    }
    expect(whole.refused.map((r) => r.frame_index)).toEqual([70, 71]);
  });

  it('takes out the step between stretches whose axis was learnt differently; the better known one stays', () => {
    const off = (trace: Trace, by: number, u_common: number): Trace => ({
      ...trace,
      angle: trace.angle.map((a) => a + by),
      u_common,
    });
    const join = (firstOff: [number, number], secondOff: [number, number]) => {
      const second = parted(off(traceOf(44, 120, 2), ...secondOff), 60);
      expect([second.lead.frame_index[0], second.lead.frame_index.at(-1)]).toEqual([44, 59]);
      expect(second.trace.frame_index[0]).toBe(60);
      const start = { from_s: 0, to_s: 1.99, trace: off(traceOf(0, 60, 0), ...firstOff) };
      return [start, { from_s: 1.99, to_s: 4, ...second }].reduce(withStretch, emptyOverview('rad'));
    };
    for (const whole of [join([0.1, 0.014], [0, 0.0005]), join([0, 0.0005], [-0.2, 0.014])]) {
      expect(whole.u_common).toBe(0.0005);
      expect(whole.time_s).toHaveLength(120);
      for (const [row, frame] of whole.frame_index.entries()) {
        const error = (whole.angle[row] ?? 0) - turned(frame);
        expect(error - Math.PI * Math.round(error / Math.PI)).toBeCloseTo(0, 9);
      }
    }
  });

  it('replaces what was followed before', () => {
    const first = withStretch(emptyOverview('rad'), { from_s: 0, to_s: 2, trace: traceOf(0, 60, 0, [10]) });
    const again = withStretch(first, { from_s: 0, to_s: 1, trace: traceOf(0, 31, 0) });
    expect([...again.frame_index]).toEqual(Array.from({ length: 60 }, (_, i) => i));
    expect(again.refused).toEqual([]);
    const emptied = withStretch(again, { from_s: 0, to_s: 1, trace: null });
    expect(emptied.frame_index[0]).toBe(31);
    expect(emptied.covered).toEqual([[0, 2]]);
  });

  it('keeps positions in pixels as they are', () => {
    const trace = { ...traceOf(0, 3, 0), unit: 'px' as const, angle: new Float64Array([0, 10, -10]) };
    const overview = withStretch(emptyOverview('px'), { from_s: 0, to_s: 1, trace });
    expect([...overview.angle]).toEqual([0, 10, -10]);
  });

  it('gives a stretch as a trace for the fit, both ends included', () => {
    const whole = withStretch(emptyOverview('rad'), { from_s: 0, to_s: 6, trace: traceOf(0, 180, 0, [50, 100]) });
    const part = traceWithin(whole, 1, 2);
    expect([part?.frame_index[0], part?.frame_index.at(-1)]).toEqual([30, 60]);
    expect(part?.refused.map((r) => r.frame_index)).toEqual([50]);
    expect(part?.halfLength_px).toBe(50);
    expect(traceWithin(whole, 7, 8)).toBeNull();
  });

  it('knows what is still to be followed', () => {
    const covered = [
      [2, 4],
      [6, 8],
    ] as const;
    expect(uncovered(covered, 0, 10, 0.1)).toEqual([
      [0, 2],
      [4, 6],
      [8, 10],
    ]);
    expect(uncovered(covered, 2.5, 3.5, 0.1)).toEqual([]);
    expect(uncovered(covered, 3, 6.05, 0.1)).toEqual([[4, 6]]);
    expect(uncovered([], 0, 10, 0.1)).toEqual([[0, 10]]);
    expect(uncovered([[0, 9.95]], 0, 10, 0.1)).toEqual([]);
  });
});

describe('chunks', () => {
  it('cover a stretch without a frame twice or left out', () => {
    const time_s = Float64Array.from({ length: 3000 }, (_, i) => i / RATE_HZ);
    const chunks = chunksOf(3, 97.5, time_s);
    expect(chunks[0]?.from_s).toBe(3);
    expect(chunks.at(-1)?.to_s).toBe(97.5);
    const within = (t: number) => chunks.filter((c) => t >= c.from_s && t <= c.to_s).length;
    for (const t of time_s) expect(within(t)).toBe(t >= 3 && t <= 97.5 ? 1 : 0);
    for (const { from_s, to_s } of chunks) expect(to_s - from_s).toBeLessThan(25);
  });
});
