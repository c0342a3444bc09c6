import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { brightnessOf } from '../../src/tracking/brightness.ts';
import { valueAt } from '../../src/tracking/picture.ts';
import { pivotOf } from '../../src/tracking/pivot.ts';
import { diagonalOfInverse, solveSymmetric } from '../../src/tracking/symmetric.ts';
import { blur, patches, shrink } from '../../src/tracking/vision.ts';

describe('symmetric systems', () => {
  it('are solved, and the inverse has the right diagonal', () => {
    const random = seededRandom(11);
    const n = 5;
    const root = Array.from({ length: n }, () => Array.from({ length: n }, () => random.gaussian()));
    const full = root.map((_, i) =>
      root.map((_, j) => root.reduce((sum, row) => sum + row[i]! * row[j]!, 0) + (i === j ? 1 : 0)),
    );
    const solve = (right: readonly number[]) => {
      const a = Float64Array.from(full.flatMap((row, i) => row.map((value, j) => (j <= i ? value : 0))));
      const b = Float64Array.from(right);
      expect(solveSymmetric(a, b, n)).toBe(true);
      return { a, b };
    };
    const x = [1, -2, 3, 0.5, -0.25];
    const { b } = solve(full.map((row) => row.reduce((sum, value, j) => sum + value * x[j]!, 0)));
    for (let i = 0; i < n; i++) expect(b[i]).toBeCloseTo(x[i]!, 9);
    for (let which = 0; which < n; which++) {
      const { a, b: column } = solve(x.map((_, i) => (i === which ? 1 : 0)));
      expect(diagonalOfInverse(a, n, which)).toBeCloseTo(column[which]!, 9);
    }
  });

  it('that are singular are owned up to', () => {
    expect(solveSymmetric(Float64Array.from([1, 0, 2, 4]), new Float64Array(2), 2)).toBe(false);
  });
});

describe('pivot', () => {
  const prior = { u_px: 0, v_px: 0, sdU_px: 50, sdV_px: 50 };
  const turning = (u: number, v: number, squash: number, swing_px = 0) =>
    Array.from({ length: 40 }, (_, t) => {
      const turn = 0.3 + 0.1 * Math.sin(0.7 * t);
      const x = 100 - (Math.cos(turn) * u - Math.sin(turn) * v) + swing_px * Math.sin(1.9 * t);
      const y = 80 - squash * (Math.sin(turn) * u + Math.cos(turn) * v) + swing_px * Math.cos(1.9 * t);
      return { turn, x_px: x, y_px: y, gain: 1, offset: 0 };
    });

  it.each([
    [12, -3, 1],
    [-7, 5, 0.5],
  ])('is the place that stays: %d, %d with squash %d', (u, v, squash) => {
    const pivot = pivotOf(turning(u, v, squash), squash, prior);
    expect(pivot.u_px).toBeCloseTo(u, 1);
    expect(pivot.v_px).toBeCloseTo(v, 1);
  });

  it('is what was believed where a swing hides it', () => {
    const pivot = pivotOf(turning(12, 0, 1, 30), 1, { u_px: 1, v_px: 2, sdU_px: 0.5, sdV_px: 0.5 });
    expect(Math.abs(pivot.u_px - 1)).toBeLessThan(0.2);
    expect(Math.abs(pivot.v_px - 2)).toBeLessThan(0.2);
  });
});

describe('pictures', () => {
  it('are read between pixels, and at the rim outside', () => {
    const picture = { width: 3, height: 2, data: Float32Array.from([0, 10, 20, 100, 110, 120]) };
    expect(valueAt(picture, 0.5, 0.5)).toBeCloseTo(55, 6);
    expect(valueAt(picture, -3, 0)).toBeCloseTo(0, 6);
    expect(valueAt(picture, 9, 9)).toBeCloseTo(120, 0);
  });

  it('are shrunk to means', () => {
    const picture = { width: 5, height: 4, data: Uint8Array.from({ length: 20 }, (_, i) => i * 4) };
    const small = shrink(picture, 2);
    expect([small.width, small.height]).toEqual([2, 2]);
    expect(small.data[0]).toBe((0 + 4 + 20 + 24) / 4);
  });

  it('keep their sum when blurred', () => {
    const data = new Float32Array(21 * 21);
    data[10 * 21 + 10] = 100;
    const soft = blur({ width: 21, height: 21, data }, 1.5);
    expect(soft.data.reduce((a, b) => a + b, 0)).toBeCloseTo(100, 3);
    // Height of a Gaussian of that width.
    expect(soft.data[10 * 21 + 10]).toBeCloseTo(100 / (2 * Math.PI * 1.5 ** 2), 1);
  });

  it('fall into patches', () => {
    const mask = { width: 4, height: 3, data: Uint8Array.from([1, 1, 0, 0, 0, 0, 0, 1, 0, 0, 0, 1]) };
    const { label, area } = patches(mask);
    expect(area.slice(1).sort()).toEqual([2, 2]);
    expect(label[0]).toBe(label[1]);
    expect(label[7]).toBe(label[11]);
    expect(label[0]).not.toBe(label[7]);
  });

  it('have a brightness and a contrast', () => {
    const data = Uint8Array.from({ length: 3000 }, (_, i) => (i % 2 === 0 ? 90 : 110));
    const { mean, spread } = brightnessOf({ width: 60, height: 50, data });
    expect(mean).toBeCloseTo(100, 0);
    expect(spread).toBeCloseTo(10, 0);
  });

  it('loading the image library leaves no handler for uncaught failures behind', () => {
    for (const event of ['uncaughtException', 'unhandledRejection'] as const) {
      const listeners = process.listeners(event as 'uncaughtException').map(String);
      expect(listeners.filter((text) => text.includes('ExitStatus') || text.includes('ABORT'))).toEqual([]);
    }
  });
});
