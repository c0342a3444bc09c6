import { describe, expect, it } from 'vitest';
import { benches } from '../../samples/benches/benches.ts';
import { runBench } from '../../samples/drawing/run.ts';
import { sessionOf } from '../../samples/drawing/session.ts';
import { framePose, truthOf } from '../../samples/drawing/truth.ts';
import { parseSession } from '../../src/session/read-session.ts';

interface TruthSegment {
  readonly id: string;
  readonly f0_Hz: number;
  readonly equilibrium_deg: number;
  readonly amplitude_start_deg: number;
  readonly amplitude_end_deg: number;
}

describe('the further benches', () => {
  it('have names of their own and show every kind of view', () => {
    expect(new Set(benches.map((bench) => bench.name)).size).toBe(benches.length);
    expect(new Set(benches.map((bench) => bench.camera.view))).toEqual(new Set(['plan', 'oblique', 'side']));
  });

  it.each(benches.map((bench) => [bench.name, bench] as const))(
    '%s: its session is sound and agrees with its truth',
    (_name, bench) => {
      const run = runBench(bench);
      const session = parseSession(JSON.stringify(sessionOf(run, 'drawn.mp4')), bench.name);
      const segments = truthOf(run, 'drawn.mp4').segments as readonly TruthSegment[];
      expect(session.segments.map((segment) => segment.id)).toEqual(segments.map((segment) => segment.id));
      const first = run.times.time_s[0]!;
      const last = run.times.time_s[run.times.time_s.length - 1]!;
      for (const segment of session.segments) {
        expect(segment.start_s).toBeGreaterThan(first);
        expect(segment.end_s).toBeLessThan(last);
      }
      for (const view of session.views) {
        expect(view.region.x + view.region.width).toBeLessThanOrEqual(bench.camera.width_px);
        expect(view.region.y + view.region.height).toBeLessThanOrEqual(bench.camera.height_px);
      }
      for (const segment of segments) {
        expect(segment.f0_Hz).toBeGreaterThan(0);
        // The hand lets go where the plan says; by the segment's start the swing has only shrunk.
        const asked = Math.abs(bench.steps.find((step) => step.id === segment.id)!.amplitude_deg);
        expect(segment.amplitude_start_deg).toBeLessThan(1.05 * asked);
        expect(segment.amplitude_start_deg).toBeGreaterThan(0.4 * asked);
      }
      const middle = framePose(run, run.times.ticks.length >> 1);
      expect(middle.x_px).toBeGreaterThan(0);
      expect(middle.x_px).toBeLessThan(bench.camera.width_px);
      expect(middle.y_px).toBeGreaterThan(0);
      expect(middle.y_px).toBeLessThan(bench.camera.height_px);
    },
  );
});
