import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PlanView } from '../../src/tracking/trace.ts';
import { trackFrames } from '../../src/tracking/track.ts';
import { asStream, type Drawing, type Drawn, drawBar } from './drawn-bar.ts';
import { chessboard, squaredPaper, wood } from './grounds.ts';
import { judge, traceOf } from './judge.ts';

const viewOf = (drawn: Drawn): PlanView => {
  const { width_px, height_px } = drawn.frames[0]!;
  return { kind: 'plan', region: { x: 0, y: 0, width: width_px, height: height_px } };
};

async function follow(drawing: Drawing) {
  const drawn = drawBar(drawing);
  const outcome = await trackFrames(asStream(drawn.frames), viewOf(drawn));
  return { drawn, outcome, verdict: outcome.ok ? judge(outcome, drawn) : null };
}

describe('following a bar from above', () => {
  // Limits: half of the angle noise and bias asked for of a clean 200 px bar, on a bar of 140 px.
  it.each<[string, Drawing]>([
    ['as drawn', {}],
    ['bright on dark', { tones: [210, 180], ground: () => 60 }],
    ['half a degree of swing', { amplitude_deg: 0.5 }],
    ['thirty degrees of swing', { amplitude_deg: 30, width: 220, height: 200 }],
    ['at rest along the rows', { rest_deg: 0, amplitude_deg: 3 }],
    ['at rest along the columns', { rest_deg: 90, amplitude_deg: 3 }],
    ['beginning at its turning point', { phase_rad: 3.1 }],
    ['a stretch of a tenth of a swing', { frequency_Hz: 0.1, frames: 60, phase_rad: 1 }],
    ['six swings a second', { frequency_Hz: 6, rate_Hz: 60, amplitude_deg: 4, exposure: 0.3 }],
    ['a pendulum swing', { swing_px: 5 }],
    ['lamp flicker', { light: (t) => ({ gain: 1 + 0.15 * Math.sin(46 * t), offset: 5 * Math.sin(3 * t) }) }],
    ['out of focus', { soft_px: 6 }],
    ['a broad bar', { length_px: 100, thickness_px: 40 }],
    ['one half as grey as the table', { tones: [60, 180] }],
  ])('is unbiased and quiet: %s', async (_, drawing) => {
    const { verdict, drawn } = await follow({ ...drawing });
    expect(verdict).not.toBeNull();
    expect(verdict!.poses).toBeGreaterThan(0.95 * drawn.frames.length);
    expect(verdict!.noise_deg).toBeLessThan(0.015);
    expect(verdict!.worst_deg).toBeLessThan(0.05);
    expect(Math.abs(verdict!.bias_deg)).toBeLessThan(0.01 + 2 * verdict!.u_common_deg);
    expect(Math.abs(verdict!.slope - 1)).toBeLessThan(0.004);
    expect(verdict!.middleNoise_px).toBeLessThan(0.05);
  });

  it.each<[string, Drawing]>([
    ['bright on wood', { tones: [225, 200], ground: wood(90, 30) }],
    ['dark on wood', { tones: [40, 60], ground: wood(140, 20) }],
    ['black on squared paper', { tones: [20, 25], ground: squaredPaper(14) }],
    ['black on a chessboard', { tones: [20, 30], ground: chessboard(16) }],
    ['a coil across the region', { over: (x, y) => (Math.abs(x - 40 - y * 0.1) < 8 ? 90 : null) }],
  ])('a textured table does not hold it: %s', async (_, drawing) => {
    const { verdict } = await follow(drawing);
    expect(verdict).not.toBeNull();
    expect(verdict!.noise_deg).toBeLessThan(0.03);
    expect(Math.abs(verdict!.slope - 1)).toBeLessThan(0.01);
  });

  it('sees a bar of 40 px and one of 600 px', async () => {
    const tiny = await follow({ width: 64, height: 56, length_px: 40, thickness_px: 6 });
    expect(tiny.verdict!.noise_deg).toBeLessThan(0.04);
    expect(traceOf(tiny.outcome).halfLength_px).toBeCloseTo(20, 0);
    expect(Math.abs(traceOf(tiny.outcome).halfWidth_px! - 3)).toBeLessThan(1);
    const big = await follow({ width: 640, height: 400, length_px: 600, thickness_px: 40, frames: 24 });
    expect(big.verdict!.noise_deg).toBeLessThan(0.005);
    expect(Math.abs(traceOf(big.outcome).halfLength_px! - 300)).toBeLessThan(2);
    expect(Math.abs(traceOf(big.outcome).halfWidth_px! - 20)).toBeLessThan(1);
  });

  it('works in strong noise with as much scatter as the noise allows', async () => {
    const { verdict } = await follow({ noise: 20 });
    expect(verdict!.noise_deg).toBeLessThan(0.05);
  });

  it('keeps its place over dropped frames, and their own times', async () => {
    const { verdict, drawn, outcome } = await follow({ dropped: (i) => i % 7 === 3 || (i > 40 && i < 48) });
    expect(verdict!.poses).toBe(drawn.frames.length);
    expect(verdict!.worst_deg).toBeLessThan(0.03);
    const trace = traceOf(outcome);
    for (const [i, frame] of drawn.frames.entries()) {
      expect(trace.time_s[i]).toBe(frame.time_s);
      expect(trace.frame_index[i]).toBe(frame.index);
    }
  });
});

describe('a long stretch', () => {
  it('is followed while it still comes in, from the first seconds on', async () => {
    const drawn = drawBar({ width: 64, height: 56, length_px: 40, thickness_px: 6, frames: 400 });
    let given = 0;
    let firstAt = 0;
    let reported = 0;
    const stream = async function* () {
      for await (const frame of asStream(drawn.frames)) {
        given++;
        yield frame;
      }
    };
    const outcome = await trackFrames(stream(), viewOf(drawn), {
      onPoses: ({ angle }) => {
        if (firstAt === 0) firstAt = given;
        reported += angle.length;
      },
    });
    // Eight seconds are kept back to learn the bar from; what comes later is not.
    expect(firstAt).toBeGreaterThanOrEqual(240);
    expect(firstAt).toBeLessThan(260);
    expect(reported).toBe(traceOf(outcome).angle.length);
  });
});

describe('what must change with the picture, and what must not', () => {
  it('a picture turned by a quarter turns the angle by 90 degrees', async () => {
    const drawn = drawBar({ width: 160, height: 150, frames: 60 });
    const turned = drawn.frames.map((frame) => {
      const grey = new Uint8Array(frame.grey.length);
      // Anticlockwise: the top row becomes the left column, read from below.
      for (let y = 0; y < 150; y++) {
        for (let x = 0; x < 160; x++) grey[(159 - x) * 150 + y] = frame.grey[y * 160 + x]!;
      }
      return { ...frame, width_px: 150, height_px: 160, grey };
    });
    const before = traceOf(await trackFrames(asStream(drawn.frames), viewOf(drawn)));
    const after = traceOf(await trackFrames(asStream(turned), viewOf({ ...drawn, frames: turned })));
    for (let i = 0; i < 60; i++) {
      const difference = after.angle[i]! - before.angle[i]! - Math.PI / 2;
      expect(Math.abs(difference - Math.PI * Math.round(difference / Math.PI))).toBeLessThan(0.001);
    }
  });

  it('a mirrored picture turns the angle round', async () => {
    const drawn = drawBar({ frames: 60 });
    const mirrored = drawn.frames.map((frame) => {
      const grey = frame.grey.map((_, i) => frame.grey[i - (i % 200) + 199 - (i % 200)]!);
      return { ...frame, grey };
    });
    const before = traceOf(await trackFrames(asStream(drawn.frames), viewOf(drawn)));
    const after = traceOf(await trackFrames(asStream(mirrored), viewOf(drawn)));
    for (let i = 0; i < 60; i++) {
      const sum = after.angle[i]! + before.angle[i]!;
      expect(Math.abs(sum - Math.PI * Math.round(sum / Math.PI))).toBeLessThan(0.001);
    }
  });

  it('any gain and offset leave the poses where they are', async () => {
    const drawn = drawBar({ frames: 40, noise: 1, width: 120, height: 90, length_px: 90, thickness_px: 12 });
    const before = traceOf(await trackFrames(asStream(drawn.frames), viewOf(drawn)));
    await fc.assert(
      fc.asyncProperty(
        fc.double({ min: 0.5, max: 1.2, noNaN: true }),
        fc.integer({ min: 0, max: 30 }),
        async (gain, offset) => {
          const other = drawn.frames.map((frame) => ({
            ...frame,
            grey: frame.grey.map((value) => Math.round(gain * value + offset)),
          }));
          const after = traceOf(await trackFrames(asStream(other), viewOf(drawn)));
          expect(after.angle.length).toBe(before.angle.length);
          for (let i = 0; i < before.angle.length; i++) {
            expect(Math.abs(after.angle[i]! - before.angle[i]!)).toBeLessThan(0.0015);
          }
        },
      ),
      { numRuns: 5, seed: 7 },
    );
  });

  it('the region may lie anywhere in the picture', async () => {
    const drawn = drawBar({ frames: 40 });
    const view: PlanView = { kind: 'plan', region: { x: 500, y: 30, width: 200, height: 150 } };
    const trace = traceOf(await trackFrames(asStream(drawn.frames), view));
    expect(Math.abs(trace.x_px[0]! - 500 - drawn.truth[0]!.x_px)).toBeLessThan(0.3);
    expect(Math.abs(trace.y_px[0]! - 30 - drawn.truth[0]!.y_px)).toBeLessThan(0.3);
  });

  it('the same frames give the same trace to the last bit', async () => {
    const drawn = drawBar({ frames: 40, noise: 5 });
    const one = traceOf(await trackFrames(asStream(drawn.frames), viewOf(drawn)));
    const two = traceOf(await trackFrames(asStream(drawn.frames), viewOf(drawn)));
    expect(two).toEqual(one);
  });
});
