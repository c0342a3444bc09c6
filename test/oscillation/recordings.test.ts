import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/numerics/random.ts';
import { statusOf } from '../../src/oscillation/checks.ts';
import { fitRingDown } from '../../src/oscillation/fit-ring-down.ts';
import type { Trace } from '../../src/tracking/trace.ts';
import { DEG } from './drawn.ts';

const FOLDER = resolve(import.meta.dirname, '../../../shared/recordings');
const present = existsSync(FOLDER);
if (!present) console.log('The development recordings are not here: ring-downs from their true angles are left out.');

interface TrueSegment {
  readonly id: string;
  readonly start_s: number;
  readonly end_s: number;
  readonly f0_Hz: number;
  readonly expected_status: string;
}

interface Truth {
  readonly view: 'plan' | 'oblique' | 'side';
  readonly exposure_s: number;
  readonly segments: readonly TrueSegment[];
}

function framesOf(folder: string): Record<string, number>[] {
  const [header, ...lines] = readFileSync(join(FOLDER, folder, 'frames.csv'), 'utf8')
    .trim()
    .split(/\r?\n/);
  const names = header!.split(',');
  return lines.map((line) => Object.fromEntries(line.split(',').map((text, k) => [names[k]!, Number(text)])));
}

function traceOf(frames: readonly Record<string, number>[], segment: TrueSegment, seed: number): Trace {
  const random = seededRandom(seed);
  const inside = frames.filter((f) => f.time_s! >= segment.start_s && f.time_s! <= segment.end_s);
  const column = (f: (frame: Record<string, number>) => number) => Float64Array.from(inside, f);
  return {
    time_s: column((f) => f.time_s!),
    angle: column((f) => (f.angle_deg! + 0.02 * random.gaussian()) * DEG),
    unit: 'rad',
    x_px: column((f) => (f.middle_x_px ?? f.near_end_x_px!) + 0.03 * random.gaussian()),
    y_px: column((f) => (f.middle_y_px ?? f.near_end_y_px!) + 0.03 * random.gaussian()),
    quality: column(() => 1),
    frame_index: Int32Array.from(inside, (f) => f.frame!),
    refused: [],
    halfLength_px: 110,
    u_common: 0,
  };
}

describe.skipIf(!present)('true angles of the development recordings, with noise', () => {
  const ratios: number[] = [];
  for (const folder of present
    ? readdirSync(FOLDER).filter((name) => existsSync(join(FOLDER, name, 'truth.json')))
    : []) {
    const truth = JSON.parse(readFileSync(join(FOLDER, folder, 'truth.json'), 'utf8')) as Truth;
    it(folder, () => {
      const frames = framesOf(folder);
      for (const [k, segment] of truth.segments.entries()) {
        const trace = traceOf(frames, segment, k + 1);
        const outcome = fitRingDown(trace, { u_time_scale: 2e-5, view: truth.view, exposure_s: truth.exposure_s });
        const codes = outcome.checks.map((c) => c.code);
        expect(`${segment.id} ${statusOf(outcome.checks)}`).toBe(`${segment.id} ${segment.expected_status}`);
        if (segment.expected_status === 'unmeasured') expect(codes).toContain('too_few_cycles');
        if (segment.expected_status === 'doubtful') expect(codes).toContain('jump');
        if (segment.expected_status !== 'measured' || !outcome.ok) continue;
        const { f0_Hz } = outcome.ringDown;
        const ratio = (f0_Hz.value - segment.f0_Hz) / f0_Hz.u;
        ratios.push(ratio);
        expect(Math.abs(ratio), segment.id).toBeLessThan(3);
        expect(f0_Hz.u / segment.f0_Hz, segment.id).toBeLessThan(3e-4);
      }
    });
  }

  it('errors are about as large as stated', () => {
    const rms = Math.sqrt(ratios.reduce((sum, r) => sum + r * r, 0) / ratios.length);
    expect(ratios.length).toBeGreaterThan(30);
    // Below 1, since the true fibre shares of these rigs are nearer to what is assumed than its uncertainty.
    expect(rms).toBeLessThan(1.2);
    expect(rms).toBeGreaterThan(0.4);
  });
});
