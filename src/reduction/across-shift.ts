import { blankRest } from './bar-on-fibre.ts';
import type { SweepFit } from './sweep-fit.ts';
import { at, barOf, predict } from './sweep-model.ts';

/** What an ambient field at `angle_rad` from the coil axis adds to f0² at each current, Hz², where a fit took it to lie along the axis. */
export function acrossShifts(fit: SweepFit, currents: Float64Array, angle_rad: number): Float64Array {
  const model = { ...fit.model, signs: null, turn: 'free' as const };
  const straight = fit.parameters.slice();
  straight[at.across] = 0;
  const bent = straight.slice();
  bent[at.across] = barOf(straight).along_A * Math.tan(angle_rad);
  const [without, with_] = [blankRest(), blankRest()];
  return currents.map((current, i) => {
    const known = predict(model, straight, i, current, without) && predict(model, bent, i, current, with_);
    return known ? with_.y - without.y : 0;
  });
}
