import { median } from '../numerics/statistics.ts';
import type { Trace } from '../tracking/trace.ts';
import type { Series } from './series.ts';
import { spectrum } from './spectrum.ts';
import { type StartValues, startCandidates } from './start-values.ts';

/** A twist moves the bar's middle little; a line whose middle moves by more than this share of what the angle moves the end is a swing's. */
const SWING_SHARE = 0.7;

/**
 * The guess that explains most of the angle, unless it is a pendulum swing seen in the angle: where the bar's middle moves at that frequency
 * more than the angle moves its end, and another line of the angle does not, the other line is taken. For a side view the middle
 * can't be told from the end, and the strongest line is taken. Null where no line can be had.
 */
export function chooseStart(series: Series, trace: Trace, side: boolean): StartValues | null {
  const candidates = startCandidates(series);
  const best = candidates[0];
  if (best === undefined) return null;
  const duration = series.time_s[series.time_s.length - 1]!;
  const apart = (c: StartValues) => Math.abs(c.frequency_Hz - best.frequency_Hz) * duration > 1.5;
  const rival = candidates.find(apart);
  const half = trace.halfLength_px;
  if (side || half === null || !(half > 0) || rival === undefined) return best;
  const x = spectrum(series.time_s, trace.x_px);
  const y = spectrum(series.time_s, trace.y_px);
  if (x === null || y === null) return best;
  const middleOverEnd = (c: StartValues) => {
    const k = Math.max(1, Math.min(x.amplitude.length - 1, Math.round(c.frequency_Hz / x.step_Hz)));
    return Math.hypot(x.amplitude[k]!, y.amplitude[k]!) / (half * Math.hypot(c.cosine, c.sine));
  };
  if (middleOverEnd(best) <= SWING_SHARE) return best;
  const angle = spectrum(series.time_s, series.value);
  if (angle === null) return best;
  const floor = median(angle.amplitude);
  const twist = candidates.find(
    (c) => apart(c) && middleOverEnd(c) < 0.3 * middleOverEnd(best) && Math.hypot(c.cosine, c.sine) > 8 * floor,
  );
  return twist ?? best;
}
