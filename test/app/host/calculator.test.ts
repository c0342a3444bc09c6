import { existsSync } from 'node:fs';
import { afterEach, describe, expect, it } from 'vitest';
import { Calculator } from '../../../app/host/calculator.ts';
import type { Trace } from '../../../src/tracking/trace.ts';

const ready = existsSync(new URL('../../../dist/app/host/calculator-worker.js', import.meta.url));
if (!ready) console.log('The calculating thread is not tested here: run "npm run build" first.');

/** A clean ring-down: 0.8 Hz, amplitude 0.1 rad, decaying by 0.02 per second. */
function trace(rows: number): Trace {
  const time_s = Float64Array.from({ length: rows }, (_, i) => i / 30);
  const noise = (i: number) => 1e-4 * Math.sin(12.9898 * i * i);
  return {
    time_s,
    angle: time_s.map((t, i) => 0.1 * Math.exp(-0.02 * t) * Math.cos(2 * Math.PI * 0.8 * t) + noise(i)),
    unit: 'rad',
    x_px: new Float64Array(rows),
    y_px: new Float64Array(rows),
    quality: new Float64Array(rows).fill(1),
    frame_index: Int32Array.from(time_s, (_, i) => i),
    refused: [],
    halfLength_px: 100,
    u_common: 0,
  };
}
const task = (rows = 400) =>
  ({
    kind: 'fit',
    outcome: { ok: true, trace: trace(rows) },
    options: { u_time_scale: 2e-5, view: 'plan' },
    apparatus: undefined,
  }) as const;

describe.skipIf(!ready)('the calculating thread', () => {
  let calculator = new Calculator();
  afterEach(async () => {
    await calculator.close();
    calculator = new Calculator();
  });

  it('fits, with spectra for drawing', async () => {
    const { ringDown, spectra } = await calculator.do(task(), null);
    expect(ringDown?.fd_Hz.value).toBeCloseTo(0.8, 3);
    const peak = spectra?.amplitude.indexOf(Math.max(...spectra.amplitude)) ?? 0;
    expect(Math.abs((spectra?.frequency_Hz[peak] ?? 0) - 0.8)).toBeLessThan(0.1);
    expect(spectra?.residualAmplitude).toHaveLength(spectra?.amplitude.length ?? -1);
  });

  it('does only the newest of a lane, and all without one', async () => {
    const running = calculator.do(task(), null);
    const dragged = [1, 2, 3].map(() => calculator.do(task(), 'edge'));
    const other = calculator.do(task(), null);
    const ends = await Promise.allSettled([running, ...dragged, other]);
    expect(ends.map((e) => e.status)).toEqual(['fulfilled', 'rejected', 'rejected', 'fulfilled', 'fulfilled']);
    expect((ends[1] as PromiseRejectedResult).reason.name).toBe('AbortError');
  });

  it('ends a wait when its signal says so', async () => {
    const abort = new AbortController();
    const wait = calculator.do(task(), null, abort.signal);
    abort.abort();
    await expect(wait).rejects.toMatchObject({ name: 'AbortError' });
    expect((await calculator.do(task(), null)).ringDown).not.toBeNull();
  });

  it('passes a mistake on and goes on working', async () => {
    const broken = { ...task(), outcome: { ok: true, trace: { ...trace(50), time_s: new Float64Array(50) } } } as const;
    await expect(calculator.do(broken, null)).rejects.toThrow();
    expect((await calculator.do(task(), null)).ringDown).not.toBeNull();
  });

  it('rejects what waits when it is closed', async () => {
    const waits = [calculator.do(task(), null), calculator.do(task(), 'edge')];
    const ends = Promise.allSettled(waits);
    await calculator.close();
    expect((await ends).map((e) => e.status)).toEqual(['rejected', 'rejected']);
    await expect(calculator.do(task(), null)).rejects.toThrow('closed');
  });
});
