import type { Random } from '../../src/numerics/random.ts';
import type { integrate } from '../../src/oscillation/motion.ts';
import type { RingDownOptions } from '../../src/oscillation/ring-down.ts';
import type { Trace } from '../../src/tracking/trace.ts';

export const DEG = Math.PI / 180;

/** What a drawn ring-down is made of; angles in degrees, times in seconds. */
export interface Drawing {
  readonly f0_Hz: number;
  readonly gamma_per_s: number;
  readonly amplitude_deg: number;
  readonly duration_s: number;
  readonly rate_Hz: number;
  readonly noise_deg: number;
  readonly drag?: number;
  /** Fibre's share of the torque. */
  readonly fibre?: number;
  readonly skew?: number;
  readonly phase?: number;
  /** Correlation of the noise from frame to frame. */
  readonly correlation?: number;
  /** Slow wander added to white noise: rms in units of `noise_deg`, 1/f from 0.1 s to 30 s. */
  readonly wander?: number;
  readonly swing?: { readonly f_Hz: number; readonly amplitude_px: number; readonly leak_deg: number };
  /** Frame times vary by up to this. */
  readonly jitter_s?: number;
  readonly offset_deg?: number;
  /** How wrongly the angle is followed at `x` degrees from rest, degrees. */
  readonly seen?: (x_deg: number) => number;
}

export const REST_deg = 17;

/** Draws a trace: the motion integrated far more finely than the fit does it, with noise in angle and position. */
export function drawTrace(d: Drawing, random: Random): Trace {
  const n = Math.round(d.duration_s * d.rate_Hz);
  const time_s = Float64Array.from({ length: n }, (_, i) => i / d.rate_Hz + (d.jitter_s ?? 0) * random.uniform());
  const phase = d.phase ?? 2 * Math.PI * random.uniform();
  const omega = 2 * Math.PI * d.f0_Hz;
  const a = d.amplitude_deg * DEG;
  const motion = {
    omega,
    gamma: d.gamma_per_s,
    drag: d.drag ?? 0,
    share: 1 - (d.fibre ?? 0),
    skew: d.skew ?? 0,
    x0: a * Math.cos(phase),
    v0: -a * (omega * Math.sin(phase) + d.gamma_per_s * Math.cos(phase)),
  };
  const x = finely(
    motion,
    time_s.map((t) => t - time_s[0]!),
  );
  const noise = drawNoise(d, n, random);
  const s = d.swing;
  const p = 2 * Math.PI * random.uniform();
  const q = 2 * Math.PI * random.uniform();
  const line = (t: number, turn: number) => Math.exp(-0.02 * t) * Math.cos(2 * Math.PI * (s?.f_Hz ?? 0) * t + turn);
  return {
    time_s,
    angle: x.map(
      (v, i) =>
        v +
        (d.seen?.(v / DEG) ?? 0) * DEG +
        (d.offset_deg ?? REST_deg) * DEG +
        noise[i]! +
        (s?.leak_deg ?? 0) * DEG * line(time_s[i]!, p),
    ),
    unit: 'rad',
    x_px: time_s.map((t) => 500 + (s?.amplitude_px ?? 0) * line(t, p) + 0.03 * random.gaussian()),
    y_px: time_s.map((t) => 300 + 0.3 * (s?.amplitude_px ?? 0) * line(t, q) + 0.03 * random.gaussian()),
    quality: new Float64Array(n).fill(1),
    frame_index: Int32Array.from({ length: n }, (_, i) => i),
    refused: [],
    halfLength_px: 100,
    u_common: 0,
  };
}

/** Runge-Kutta of the equation of motion itself at 400 steps a cycle: independent of the scheme under test. */
export function finely(m: Parameters<typeof integrate>[0], time_s: Float64Array): Float64Array {
  const acceleration = (x: number, v: number) =>
    -2 * m.gamma * v -
    m.drag * Math.abs(v) * v -
    m.omega ** 2 * ((1 - m.share) * x + m.share * Math.sin(x) + m.skew * (Math.cos(x) - 1));
  let x = m.x0;
  let v = m.v0;
  let t = 0;
  return time_s.map((end) => {
    const steps = Math.ceil((end - t) * m.omega * (400 / (2 * Math.PI)));
    const h = steps > 0 ? (end - t) / steps : 0;
    for (let i = 0; i < steps; i++) {
      const a1 = acceleration(x, v);
      const v2 = v + (h / 2) * a1;
      const a2 = acceleration(x + (h / 2) * v, v2);
      const v3 = v + (h / 2) * a2;
      const a3 = acceleration(x + (h / 2) * v2, v3);
      const v4 = v + h * a3;
      const a4 = acceleration(x + h * v3, v4);
      x += (h / 6) * (v + 2 * v2 + 2 * v3 + v4);
      v += (h / 6) * (a1 + 2 * a2 + 2 * a3 + a4);
    }
    t = end;
    return x;
  });
}

function drawNoise(d: Drawing, n: number, random: Random): Float64Array {
  const sigma = d.noise_deg * DEG;
  const phi = d.correlation ?? 0;
  let e = random.gaussian();
  const noise = Float64Array.from({ length: n }, (_, i) => {
    if (i > 0) e = phi * e + Math.sqrt(1 - phi * phi) * random.gaussian();
    return sigma * e;
  });
  const spells = [0.1, 0.3, 1, 3, 10, 30];
  for (const spell of d.wander === undefined ? [] : spells) {
    const keep = Math.exp(-1 / (d.rate_Hz * spell));
    let w = random.gaussian();
    for (let i = 0; i < n; i++) {
      w = keep * w + Math.sqrt(1 - keep * keep) * random.gaussian();
      noise[i] = noise[i]! + (sigma * d.wander! * w) / Math.sqrt(spells.length);
    }
  }
  return noise;
}

export const PLAN: RingDownOptions = { u_time_scale: 0, view: 'plan' };
/** The fibre's share known, so that only noise is left to be uncertain about. */
export const KNOWN: RingDownOptions = { ...PLAN, fibreShare: { value: 0, u: 1e-5 } };
