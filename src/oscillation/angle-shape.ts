import { dot, subtract } from '../numerics/dot.ts';
import { orthonormalBasis } from './basis.ts';
import { OMEGA } from './model.ts';
import { fitResidualNoise, noiseLevel } from './residual-noise.ts';
import type { TwistFit } from './twist-fit.ts';

/** What the residuals show of an angle that is followed wrongly by an amount that depends on the angle itself. */
export interface AngleShape {
  /** Rms of that part over the rms of the twist, less what noise might give. */
  readonly share: number;
  /** By how much chi-square falls without it (seven parameters). */
  readonly evidence: number;
  /** The same of its cubic part alone: how unequal the scale is at large and small angles. */
  readonly cubic: number;
}

/** Powers of the angle that no motion has to this size; the square is in the model. */
const POWERS = [3, 4, 5, 6, 7, 8, 9] as const;

const SLOW = [2, 3, 4, 5] as const;
/** Below this share of the twist it is not worth a closer look. */
const FAINT = 0.002;

/** Fits powers of the angle to what a fit leaves over, the fitted parameters free to follow. `twist` is the fitted motion at the used samples. */
export function angleShape(fit: TwistFit, twist: Float64Array): AngleShape {
  const largest = twist.reduce((a, v) => Math.max(a, Math.abs(v)), 0);
  const relative = twist.map((v) => v / largest);
  let power = relative.map((v) => v * v);
  const columns = POWERS.map(() => {
    power = power.map((v, i) => v * relative[i]!);
    return power;
  });
  // Even powers have a slow part, which is not to be taken for a wander of the rest direction.
  const { time_s } = fit.samples;
  const middle = time_s[time_s.length - 1]! / 2;
  const slow = SLOW.map((power) => time_s.map((t) => (t / middle - 1) ** power));
  const known = orthonormalBasis(slow, [...slow.keys()], fit.basis.q).q;
  const shape = orthonormalBasis(columns, [...columns.keys()], known);
  const parts = shape.q.slice(known.length).map((q) => ({ q, size: dot(q, fit.residual) }));
  const sum = parts.reduce((a, { size }) => a + size * size, 0);
  const whole = dot(twist, twist);
  // They stand out where the third harmonic is, against what noise is left there without them.
  const left = fit.residual.slice();
  for (const { q, size } of parts) subtract(left, q, size);
  const noise =
    sum > FAINT ** 2 * whole ? fitResidualNoise(fit.samples.time_s, left, shape.q, fit.noise.step_s) : fit.noise;
  const level = Math.max(noiseLevel(noise, (3 * fit.parameters[OMEGA]!) / (2 * Math.PI)), 1e-300);
  const cubic = shape.from[0] === 0 ? parts[0]!.size ** 2 : 0;
  // Chi-square of noise stays below its mean and three of its standard deviations.
  const beyondNoise = (size: number, count: number) =>
    Math.sqrt(Math.max(0, size - (count + 3 * Math.sqrt(2 * count)) * level) / whole);
  return { share: beyondNoise(sum, parts.length), evidence: sum / level, cubic: beyondNoise(cubic, 1) };
}
