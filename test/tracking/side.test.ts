import { describe, expect, it } from 'vitest';
import { sideAngle } from '../../src/tracking/side-angle.ts';
import type { SideView } from '../../src/tracking/trace.ts';
import { trackFrames } from '../../src/tracking/track.ts';
import { asStream } from './drawn-bar.ts';
import { AXIS_X, drawEnd, HALF_LENGTH } from './drawn-end.ts';
import { traceOf } from './judge.ts';

const DEG = 180 / Math.PI;

const sideView = (over: Partial<SideView> = {}): SideView => ({
  kind: 'side',
  region: { x: 0, y: 0, width: 140, height: 100 },
  axis_x_px: AXIS_X,
  half_length_px: HALF_LENGTH,
  facing_deg: 6,
  ...over,
});

/** Slope of measured against true, mean error and rms of the rest. */
function compare(measured: readonly number[], truth: readonly number[]) {
  const mean = (values: readonly number[]) => values.reduce((a, b) => a + b, 0) / values.length;
  const middle = mean(truth);
  const error = measured.map((value, i) => value - truth[i]!);
  const bias = mean(error);
  const excess =
    mean(error.map((e, i) => (e - bias) * (truth[i]! - middle))) / mean(truth.map((t) => (t - middle) ** 2));
  const rest = error.map((e, i) => e - bias - excess * (truth[i]! - middle));
  return { slope: 1 + excess, bias, noise: Math.sqrt(mean(rest.map((r) => r * r))) };
}

describe('following the near end from the side', () => {
  it.each([
    [6, 4],
    [-6, 4],
    [3, 6],
  ])('facing %d degrees, swinging by %d', async (rest_deg, amplitude_deg) => {
    const drawn = drawEnd(rest_deg, amplitude_deg);
    const outcome = await trackFrames(asStream(drawn.frames), sideView({ facing_deg: rest_deg }));
    const trace = traceOf(outcome);
    expect(trace.unit).toBe('rad');
    expect(trace.time_s.length).toBeGreaterThan(110);
    const measured = [...trace.angle].map((angle) => angle * DEG);
    const truth = [...trace.frame_index].map((index) => drawn.truth_deg[index]!);
    const { slope, bias, noise } = compare(measured, truth);
    expect(Math.abs(slope - 1)).toBeLessThan(0.02);
    expect(noise).toBeLessThan(0.04);
    expect(Math.abs(bias)).toBeLessThan(3 * trace.u_common * DEG);
  });

  it('without a half length gives pixels from the fibre', async () => {
    const drawn = drawEnd(6, 4);
    const view = sideView({ half_length_px: null, facing_deg: null });
    const trace = traceOf(await trackFrames(asStream(drawn.frames), view));
    expect(trace.unit).toBe('px');
    expect(trace.halfLength_px).toBeNull();
    const truth = [...trace.frame_index].map((index) => HALF_LENGTH * Math.sin(drawn.truth_deg[index]! / DEG));
    // Without the facing the far end, which moves the other way, can't be told from the near one for certain.
    expect(Math.abs(Math.abs(compare([...trace.angle], truth).slope) - 0.95)).toBeLessThan(0.08);
  });
});

describe('angle from where the end stands', () => {
  const still = { edgeLean_px: 0, restX_px: AXIS_X };

  it('is the arc sine of the distance over the half length', () => {
    const view = sideView();
    for (const angle of [-1.2, -0.1, 0, 0.02, 0.7]) {
      expect(sideAngle(view, still, AXIS_X + HALF_LENGTH * Math.sin(angle))).toBeCloseTo(angle, 12);
    }
  });

  it('is null beyond the half length, and without one', () => {
    expect(sideAngle(sideView(), still, AXIS_X + HALF_LENGTH + 1)).toBeNull();
    expect(sideAngle(sideView({ half_length_px: null }), still, AXIS_X)).toBeNull();
  });

  it("takes out what the face's own turning does to one of its edges", () => {
    const view = sideView();
    const radius = 15;
    const rest = 0.15;
    const edges = { edgeLean_px: radius, restX_px: AXIS_X + HALF_LENGTH * Math.sin(rest) };
    for (const angle of [0.05, 0.15, 0.25]) {
      const edge = AXIS_X + HALF_LENGTH * Math.sin(angle) + radius * (Math.cos(angle) - Math.cos(rest));
      expect(sideAngle(view, edges, edge)).toBeCloseTo(angle, 5);
    }
  });
});
