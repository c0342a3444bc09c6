import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import type { Frame } from '../../src/recording/recording.ts';
import type { PlanView } from '../../src/tracking/trace.ts';
import { trackFrames } from '../../src/tracking/track.ts';
import { asStream, drawBar } from './drawn-bar.ts';
import { judge, traceOf } from './judge.ts';

const view: PlanView = { kind: 'plan', region: { x: 0, y: 0, width: 200, height: 150 } };

/** A hand that comes in from the right, stays over half the bar and leaves. */
const hand = (from_s: number, to_s: number) => (x: number, y: number, time_s: number) => {
  if (time_s < from_s || time_s > to_s) return null;
  const reach = 130 * Math.min(1, (time_s - from_s) / 0.3, (to_s - time_s) / 0.3);
  return x > 200 - reach && Math.abs(y - 60 - (x - 140) * 0.2) < 30 ? 170 + 10 * Math.sin(x * 0.3) : null;
};

describe('what is refused', () => {
  it('a hand makes poses missing, not wrong, and each has its reason', async () => {
    const drawn = drawBar({ frames: 150, over: hand(1.5, 3) });
    const outcome = await trackFrames(asStream(drawn.frames), view);
    const trace = traceOf(outcome);
    expect(trace.refused.length).toBeGreaterThan(5);
    expect(trace.time_s.length + trace.refused.length).toBe(150);
    for (const { frame_index } of trace.refused) {
      expect(frame_index / 30).toBeGreaterThanOrEqual(1.5);
      expect(frame_index / 30).toBeLessThanOrEqual(3.1);
    }
    expect(new Set(trace.refused.map(({ reason }) => reason))).toContain('hidden');
    expect(judge(outcome, drawn).worst_deg).toBeLessThan(0.15);
  });

  it('a still table is no bar', async () => {
    const drawn = drawBar({ amplitude_deg: 0 });
    const outcome = await trackFrames(asStream(drawn.frames), view);
    expect(outcome).toMatchObject({ ok: false, reason: 'no_bar', frames: 120 });
    expect(!outcome.ok && outcome.message).toMatch(/nothing moves in the region/);
  });

  it('noise is no bar', async () => {
    const random = seededRandom(5);
    const frames: Frame[] = Array.from({ length: 40 }, (_, index) => ({
      index,
      time_s: index / 30,
      width_px: 200,
      height_px: 150,
      grey: Uint8Array.from({ length: 30_000 }, () => Math.max(0, Math.min(255, 128 + 20 * random.gaussian()))),
    }));
    expect(await trackFrames(asStream(frames), view)).toMatchObject({ ok: false, reason: 'no_bar' });
  });

  it('something that only slides through is no bar', async () => {
    const drawn = drawBar({
      amplitude_deg: 0,
      length_px: 0,
      over: (x, y, t) => (Math.hypot(x - 200 * t, y - 75) < 20 ? 40 : null),
    });
    expect(await trackFrames(asStream(drawn.frames), view)).toMatchObject({ ok: false, reason: 'no_bar' });
  });

  it('seven frames are too few', async () => {
    const drawn = drawBar({ frames: 7 });
    const outcome = await trackFrames(asStream(drawn.frames), view);
    expect(outcome).toMatchObject({ ok: false, reason: 'too_few_frames', frames: 7 });
  });

  it('no frames are too few', async () => {
    expect(await trackFrames(asStream([]), view)).toMatchObject({ ok: false, reason: 'too_few_frames', frames: 0 });
  });

  it('a step of the exposure costs a frame or two, no more', async () => {
    const drawn = drawBar({ light: (t) => ({ gain: t < 2 ? 1 : 0.7, offset: 0 }) });
    const outcome = await trackFrames(asStream(drawn.frames), view);
    expect(traceOf(outcome).refused.length).toBeLessThanOrEqual(2);
    expect(judge(outcome, drawn).worst_deg).toBeLessThan(0.05);
  });
});
