import type { Prior } from '../numerics/least-squares.ts';
import { BEND, DRAG, DRIFT, GAMMA, LINES, type Model, OFFSET, OMEGA, SHARE, SKEW, V0, X0 } from './model.ts';
import type { RingDownOptions } from './ring-down.ts';
import type { StartValues } from './start-values.ts';

/** A model with the vector its fit starts from. */
export interface Setup {
  readonly model: Model;
  readonly start: Float64Array;
}

/**
 * Quadratic drag is known to be small unless the record asks for it: for a bar of a few centimetres in air it is of the order of 0.001 to
 * 0.01 per radian (estimated from the drag of a cylinder, no published source).
 */
const DRAG_per_rad = 0.005;
const DRAG_u_per_rad = 0.01;
/**
 * Skew of the torque is the fibre's share times its twist at rest: seldom above this many radians, also where the bar has turned round, and
 * never taken wider than SKEW_u, since a second harmonic comes from the view as well.
 */
const TWIST_u_rad = 1.5;
const SKEW_u = 0.15;
/** The fibre's share times the squared frequency, see `sharePrior`. */
const FIBRE_Hz2 = 0.015;
const FIBRE_u_Hz2 = 0.02;
/**
 * A cast shadow, a slant of the camera or the texture of the table bend the angle followed, by about a tenth of a degree at ten degrees
 * (measured on drawn recordings); a slanting view stretches that.
 */
const BEND_u_per_rad = { plan: 0.06, oblique: 0.12, side: 0.12 } as const;
/** Scaling of an oblique or side view to degrees: an error of 3 % in angle is 6 % in the effect of the amplitude, which share takes up. */
const SCALE_u = 0.06;

/**
 * The share of the restoring torque that follows sin x, as known before the fit. Unless the fibre's share is given: the fibre alone
 * gives the bar (kappa / J)^½ / 2 pi, about 0.12 Hz and seldom above 0.2 Hz, so that its share is of the order of 0.015 Hz² / f0² whatever the
 * field (common practice of thin fibres; no source); never known to better than 0.04.
 */
export function sharePrior(
  options: RingDownOptions,
  frequency_Hz: number,
  unit: 'rad' | 'px',
): { value: number; u: number } {
  if (unit === 'px') return { value: 1, u: 1 };
  const fibre = options.fibreShare ?? {
    value: Math.min(0.3, FIBRE_Hz2 / frequency_Hz ** 2),
    u: Math.min(0.5, Math.hypot(0.04, FIBRE_u_Hz2 / frequency_Hz ** 2)),
  };
  return { value: 1 - fibre.value, u: options.view === 'plan' ? fibre.u : Math.hypot(fibre.u, SCALE_u) };
}

/** Standard uncertainty of the skew about zero. */
function skewPrior({ fibreShare }: RingDownOptions, frequency_Hz: number): number {
  const share = fibreShare === undefined ? FIBRE_u_Hz2 / frequency_Hz ** 2 : fibreShare.value + fibreShare.u;
  return Math.max(1e-6, Math.min(SKEW_u, TWIST_u_rad * Math.abs(share)));
}

/** The model without side lines and where its fit starts. */
export function setUp(start: StartValues, duration_s: number, options: RingDownOptions, unit: 'rad' | 'px'): Setup {
  const share = sharePrior(options, start.frequency_Hz, unit);
  const priors: Prior[] = [
    { parameter: SHARE, value: share.value, u: Math.max(share.u, 1e-6) },
    { parameter: SKEW, value: 0, u: skewPrior(options, start.frequency_Hz) },
    { parameter: DRAG, value: DRAG_per_rad, u: DRAG_u_per_rad },
    { parameter: BEND, value: 0, u: BEND_u_per_rad[options.view] },
  ];
  const swept = Math.PI * start.frequency_Hz * (options.exposure_s ?? 0);
  const blur = swept > 1e-6 && swept < 3 ? Math.sin(swept) / swept : 1;
  const omega = 2 * Math.PI * start.frequency_Hz;
  const square = start.cosine ** 2 + start.sine ** 2;
  const x = start.gamma_per_s * duration_s;
  // Mean of the squared amplitude, for the shift that turns the frequency seen into the one at small amplitude.
  const meanSquare = x > 1e-6 ? (square * -Math.expm1(-2 * x)) / (2 * x) : square;
  const p = new Float64Array(LINES);
  p[OMEGA] = omega * (1 + (share.value * Math.min(meanSquare, 1)) / 16);
  p[GAMMA] = start.gamma_per_s;
  p[SHARE] = share.value;
  p[X0] = start.cosine / blur;
  p[V0] = (omega * start.sine - start.gamma_per_s * start.cosine) / blur;
  p[OFFSET] = start.offset;
  p[DRIFT] = start.drift;
  const model = { middle_s: duration_s / 2, blur, lines: 0, priors, fixed: Array.from(p, () => false) };
  return { model, start: p };
}

/** A damped sine to be fitted beside the twist; its amplitude may be known to be small (`u`), its frequency and decay known (`held`). */
export interface SideLine {
  readonly frequency_Hz: number;
  readonly decay_per_s: number;
  readonly held: boolean;
  /** Standard uncertainty of its amplitude about zero, in radians; null: nothing known. */
  readonly u: number | null;
  /** Standard uncertainty of its decay where it isn't held. */
  readonly u_decay_per_s: number;
}

/** The same model with one more side line. */
export function withLine({ model, start }: Setup, line: SideLine): Setup {
  const at = start.length;
  const p = new Float64Array(at + 4);
  p.set(start);
  p[at + 2] = 2 * Math.PI * line.frequency_Hz;
  p[at + 3] = line.decay_per_s;
  const priors = [...model.priors];
  if (line.u !== null) for (const k of [at, at + 1]) priors.push({ parameter: k, value: 0, u: line.u });
  if (!line.held) priors.push({ parameter: at + 3, value: line.decay_per_s, u: line.u_decay_per_s });
  const fixed = [...model.fixed, false, false, line.held, line.held];
  return { model: { ...model, lines: model.lines + 1, priors, fixed }, start: p };
}
