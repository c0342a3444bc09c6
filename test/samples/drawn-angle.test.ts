import { describe, expect, it } from 'vitest';
import type { BenchPlan } from '../../samples/drawing/bench.ts';
import { film } from '../../samples/drawing/filming.ts';
import { type Run, runBench } from '../../samples/drawing/run.ts';
import { framePose } from '../../samples/drawing/truth.ts';
import { smallBench } from './small-bench.ts';

interface Axis {
  readonly angle_deg: number;
  readonly x_px: number;
  readonly y_px: number;
}

/** Middle and principal axis of all that is brighter than the mat, weighted with how much brighter. */
function axisOfBright(grey: ArrayLike<number>, width: number, above: number): Axis {
  let w = 0;
  let sx = 0;
  let sy = 0;
  let sxx = 0;
  let syy = 0;
  let sxy = 0;
  for (let i = 0; i < grey.length; i++) {
    const weight = grey[i]! - above;
    if (weight <= 0) continue;
    const x = i % width;
    const y = Math.floor(i / width);
    w += weight;
    sx += weight * x;
    sy += weight * y;
    sxx += weight * x * x;
    syy += weight * y * y;
    sxy += weight * x * y;
  }
  const x_px = sx / w;
  const y_px = sy / w;
  const xx = sxx / w - x_px * x_px;
  const yy = syy / w - y_px * y_px;
  const xy = sxy / w - x_px * y_px;
  return { angle_deg: (-0.5 * Math.atan2(2 * xy, xx - yy) * 180) / Math.PI, x_px, y_px };
}

function errors(plan: BenchPlan, frames: readonly number[]): { angle: number[]; x: number[]; y: number[] } {
  const run: Run = runBench(plan);
  const angle: number[] = [];
  const x: number[] = [];
  const y: number[] = [];
  for (const { frame, planes } of film(run, { frames, clean: true })) {
    const seen = axisOfBright(planes[0]!, plan.camera.width_px, 75);
    const truth = framePose(run, frame);
    const off = seen.angle_deg - truth.angle_deg;
    angle.push(off - 180 * Math.round(off / 180));
    x.push(seen.x_px - truth.x_px);
    y.push(seen.y_px - truth.y_px);
  }
  return { angle, x, y };
}

const mean = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0) / values.length;
const FRAMES = Array.from({ length: 24 }, (_, i) => 48 + 3 * i);

describe('the drawn bar stands where the truth says', () => {
  it('seen along the fibre: the axis of its bright pixels has the true angle and middle', () => {
    const plan = smallBench();
    // All lines at once: read one after the other, both ends of a turning bar are seen moved to the same side of its middle.
    const off = errors({ ...plan, sensor: { ...plan.sensor, readout_s: 0 } }, FRAMES);
    expect(Math.abs(mean(off.angle))).toBeLessThan(0.01);
    for (const one of off.angle) expect(Math.abs(one)).toBeLessThan(0.05);
    for (const one of [...off.x, ...off.y]) expect(Math.abs(one)).toBeLessThan(0.03);
  });

  it('the error does not follow the angle: slope over the swing below one in a thousand', () => {
    const plan = smallBench();
    const run = runBench(plan);
    const off = errors(plan, FRAMES);
    const angles = FRAMES.map((frame) => framePose(run, frame).angle_deg);
    const middle = mean(angles);
    const slope =
      angles.reduce((sum, a, i) => sum + (a - middle) * off.angle[i]!, 0) /
      angles.reduce((sum, a) => sum + (a - middle) ** 2, 0);
    expect(Math.max(...angles) - Math.min(...angles)).toBeGreaterThan(15);
    expect(Math.abs(slope)).toBeLessThan(1e-3);
  });

  it('a phone held upright: the stored picture turned back is the displayed one', () => {
    const plain = smallBench();
    const sensor = { ...plain.sensor, readout_s: 0 };
    const upright = film(runBench({ ...plain, sensor }), { frames: [60], clean: true }).next().value!;
    const turned = film(runBench({ ...plain, sensor, file: { ...plain.file, rotation_deg: 90 } }), {
      frames: [60],
      clean: true,
    }).next().value!;
    const [w, h] = [plain.camera.width_px, plain.camera.height_px];
    let differing = 0;
    for (let y = 0; y < h; y++) {
      for (let x = 0; x < w; x++) {
        // Turned clockwise by 90 degrees, stored row r (from the top) becomes displayed column w - 1 - r.
        if (upright.planes[0]![y * w + x] !== turned.planes[0]![(w - 1 - x) * h + y]) differing++;
      }
    }
    expect(differing).toBe(0);
  });
});
