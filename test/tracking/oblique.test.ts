import { describe, expect, it } from 'vitest';
import type { ObliqueView } from '../../src/tracking/trace.ts';
import { trackFrames } from '../../src/tracking/track.ts';
import { asStream, drawBar } from './drawn-bar.ts';
import { wood } from './grounds.ts';
import { judge, traceOf } from './judge.ts';

describe('following a bar from above at a slant', () => {
  it.each([
    [30, 15],
    [34, -30],
    [60, 70],
    [80, 0],
  ])('seen from %d degrees above the bench, resting at %d', async (elevation_deg, rest_deg) => {
    const drawn = drawBar({ squash: Math.sin((elevation_deg * Math.PI) / 180), rest_deg, amplitude_deg: 5 });
    const view: ObliqueView = { kind: 'oblique', region: { x: 0, y: 0, width: 200, height: 150 }, elevation_deg };
    const outcome = await trackFrames(asStream(drawn.frames), view);
    const { slope, noise_deg, bias_deg, u_common_deg } = judge(outcome, drawn);
    expect(Math.abs(slope - 1)).toBeLessThan(0.006);
    expect(noise_deg).toBeLessThan(0.02);
    expect(Math.abs(bias_deg)).toBeLessThan(0.01 + 2 * u_common_deg);
    // In pixels of the bar's own plane, whatever its direction.
    expect(Math.abs(traceOf(outcome).halfLength_px! - 70)).toBeLessThan(2);
  });

  it('owns that an elevation is not known exactly where that matters', async () => {
    const across = drawBar({ squash: 0.5, rest_deg: 40, ground: wood(160, 5) });
    const along = drawBar({ squash: 0.5, rest_deg: 0, ground: wood(160, 5) });
    const view: ObliqueView = { kind: 'oblique', region: { x: 0, y: 0, width: 200, height: 150 }, elevation_deg: 30 };
    const slanting = traceOf(await trackFrames(asStream(across.frames), view)).u_common;
    const level = traceOf(await trackFrames(asStream(along.frames), view)).u_common;
    expect(slanting).toBeGreaterThan(0.005);
    expect(level).toBeLessThan(0.5 * slanting);
  });
});
