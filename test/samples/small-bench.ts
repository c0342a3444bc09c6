import { boathouse } from '../../samples/boathouse-bench.ts';
import type { BenchPlan } from '../../samples/drawing/bench.ts';

/** A small, quick bench for checks: a white bar on a black mat, one step, nothing in the way and no noise. */
export function smallBench(changes: Partial<BenchPlan> = {}): BenchPlan {
  return {
    ...boathouse,
    name: 'small',
    seed: 5,
    steps: [{ id: 's01', current_A: 0.1, u_current_A: 0, hold_s: 4, amplitude_deg: 15, expected: 'measured' }],
    lead_s: 0.5,
    gap_s: 1,
    look: {
      ...boathouse.look,
      board: 'black_mat',
      bar: {
        ...boathouse.look.bar,
        ends: [
          [0.7, 0.7, 0.7],
          [0.7, 0.7, 0.7],
        ],
        gloss: 0,
        band_m: 0,
      },
      // Straight above, so that the bar's sides are lit alike.
      lamp: { ...boathouse.look.lamp, place_m: [0, 0, 0.6] },
      winding: null,
      cardRadius_m: 0,
      meter: null,
      hand: false,
    },
    camera: { ...boathouse.camera, width_px: 200, height_px: 160, barLength_px: 120, axis_px: [99.3, 80.6] },
    sensor: { ...boathouse.sensor, noise: 0, drift: 0, jitter_s: 0, droppedShare: 0, dimRateShare: 1 },
    ...changes,
  };
}
