import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type Bar,
  blankRest,
  derivativeCount,
  restAt,
  type Turn,
  wrappedLine,
} from '../../src/reduction/bar-on-fibre.ts';

const turns: readonly Turn[] = ['with the field', 'against the field', 'set back', 'free'];
const bars = fc.record({
  slope: fc.double({ min: 1, max: 10, noNaN: true }),
  along_A: fc.double({ min: 0.02, max: 0.1, noNaN: true }),
  across_A: fc.double({ min: 0.001, max: 0.02, noNaN: true }).chain((size) => fc.constantFrom(size, -size)),
  fibre_Hz2: fc.double({ min: 0, max: 0.03, noNaN: true }),
  twist_rad: fc.double({ min: -0.5, max: 0.5, noNaN: true }),
});
const currents = fc.double({ min: -1, max: 1, noNaN: true });

function bent(bar: Bar, current: number, k: number, step: number): [number, Bar] {
  const names = ['slope', 'along_A', 'across_A', 'fibre_Hz2', 'twist_rad'] as const;
  if (k === 0) return [current + step, bar];
  const name = names[k - 1]!;
  return [current, { ...bar, [name]: bar[name] + step }];
}

describe('bar on a fibre', () => {
  it('rests where the torques balance, at a minimum of the energy', () => {
    fc.assert(
      fc.property(bars, currents, fc.constantFrom(...turns.slice(0, 3)), (bar, current, turn) => {
        const rest = blankRest();
        if (!restAt(current, bar, turn, rest)) return;
        // f0² is the slope of the torque, so that moving along by a small angle must raise the torque by f0² times it.
        const x = current + bar.along_A;
        const field = (angle: number) => bar.slope * (x * Math.sin(angle) - bar.across_A * Math.cos(angle));
        const h = 1e-5;
        const slope = (field(rest.angle + h) - field(rest.angle - h)) / (2 * h) + bar.fibre_Hz2;
        expect(Math.abs(slope - rest.y)).toBeLessThan(1e-6 * (1 + bar.slope));
        expect(rest.y).toBeGreaterThan(0);
        const home = Math.atan2(bar.across_A, bar.along_A);
        const fibre = field(rest.angle) / -bar.fibre_Hz2;
        if (turn === 'with the field' && bar.fibre_Hz2 > 1e-3)
          expect(rest.angle - home - bar.twist_rad).toBeCloseTo(fibre, 6);
      }),
      { seed: 3, numRuns: 300 },
    );
  });

  it('has the derivatives that finite differences give', () => {
    fc.assert(
      fc.property(bars, currents, fc.constantFrom(...turns), (bar, current, turn) => {
        const rest = blankRest();
        // Near the reversal everything turns too fast for finite differences.
        if (Math.abs(current + bar.along_A) < 0.02 || !restAt(current, bar, turn, rest)) return;
        const [high, low] = [blankRest(), blankRest()];
        for (let k = 0; k < derivativeCount; k++) {
          const h = 1e-6;
          if (!restAt(...bent(bar, current, k, h), turn, high) || !restAt(...bent(bar, current, k, -h), turn, low))
            continue;
          const [dy, da] = [(high.y - low.y) / (2 * h), (high.angle - low.angle) / (2 * h)];
          expect(Math.abs(dy - rest.dy[k]!)).toBeLessThan(1e-5 * (1 + Math.abs(dy)));
          expect(Math.abs(da - rest.dAngle[k]!)).toBeLessThan(1e-4 * (1 + Math.abs(da)));
        }
      }),
      { seed: 4, numRuns: 200 },
    );
  });

  it('mirrors with the bench, and only turns when the current’s sign and both fields are reversed', () => {
    fc.assert(
      fc.property(bars, currents, (bar, current) => {
        const [one, two] = [blankRest(), blankRest()];
        const mirrored = { ...bar, across_A: -bar.across_A, twist_rad: -bar.twist_rad };
        const ends = restAt(current, bar, 'with the field', one);
        expect(restAt(current, mirrored, 'with the field', two)).toBe(ends);
        if (!ends) return;
        expect(two.y).toBeCloseTo(one.y, 9);
        expect(wrappedLine(two.angle + one.angle)).toBeCloseTo(0, 6);
        const reversed = { ...bar, along_A: -bar.along_A, across_A: -bar.across_A };
        expect(restAt(-current, reversed, 'with the field', two)).toBe(true);
        expect(two.y).toBeCloseTo(one.y, 9);
        expect(Math.abs(wrappedLine(two.angle - one.angle))).toBeCloseTo(0, 6);
      }),
      { seed: 5, numRuns: 200 },
    );
  });

  it('has no rest direction where the fibre is wound too far for a weak field', () => {
    // Against the field the fibre would be wound by more than half a turn, which a field this weak can't hold.
    const bar = { slope: 1, along_A: 0.05, across_A: 0.02, fibre_Hz2: 0.02, twist_rad: 0 };
    expect(restAt(-0.06, bar, 'with the field', blankRest())).toBe(true);
    expect(restAt(-0.06, bar, 'against the field', blankRest())).toBe(false);
    expect(restAt(-0.05, { ...bar, across_A: 0, fibre_Hz2: 0 }, 'free', blankRest())).toBe(false);
  });
});
