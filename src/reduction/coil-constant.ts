import type { Coil, Magnet } from './apparatus.ts';
import { type LoopPair, meanPairField, turningPairField } from './loop-field.ts';
import { type BudgetInput, type Derived, derive } from './sensitivity.ts';

/** Field per ampere at the bar, with its inputs, and how much less the coils turn a long bar than that field says. */
export interface CoilConstant extends Derived {
  /** Restoring torque of an evenly magnetised bar over that of a point dipole in the same mean field, less 1; 0 where not known. */
  readonly turningShift: number;
}

/**
 * Coil constant in T/A: as typed, or the mean over the bar's length (at the middle of the pair where that is not known)
 * from the dimensions. The second coil's values default to the first one's, and its uncertainty is then common to both,
 * as it is when one measured radius stands for two.
 */
export function coilConstant(coil: Coil, magnet: Magnet | undefined): CoilConstant {
  if ('constant_T_per_A' in coil) {
    const input = exactly('coil constant', coil.constant_T_per_A, coil.u_constant_T_per_A, 'T/A');
    return { ...derive([input], ([k]) => k!), turningShift: 0 };
  }
  const length_m = magnet?.length_m ?? 0;
  const secondTurns = coil.turns_second_coil !== undefined;
  const secondRadius = coil.radius_second_coil_m !== undefined;
  const inputs = [
    exactly(
      secondTurns ? 'turns of the first coil' : 'turns of a coil',
      coil.turns_per_coil,
      coil.u_turns_per_coil,
      '1',
    ),
    exactly(secondRadius ? 'radius of the first coil' : 'coil radius', coil.radius_m, coil.u_radius_m, 'm'),
    exactly('coil spacing', coil.spacing_m, coil.u_spacing_m, 'm'),
    ...(length_m > 0 ? [exactly('length of the bar', length_m, magnet?.u_length_m, 'm')] : []),
    ...(secondTurns
      ? [exactly('turns of the second coil', coil.turns_second_coil ?? 0, coil.u_turns_second_coil, '1')]
      : []),
    ...(secondRadius
      ? [exactly('radius of the second coil', coil.radius_second_coil_m ?? 0, coil.u_radius_second_coil_m, 'm')]
      : []),
  ];
  const named = (values: readonly number[]) => {
    const rest = values.slice(3);
    const length = length_m > 0 ? rest.shift()! : 0;
    const turns2 = secondTurns ? rest.shift()! : values[0]!;
    const radius2_m = secondRadius ? rest.shift()! : values[1]!;
    const pair: LoopPair = { turns1: values[0]!, radius1_m: values[1]!, spacing_m: values[2]!, turns2, radius2_m };
    return { pair, length };
  };
  const of = (values: readonly number[]) => {
    const { pair, length } = named(values);
    return meanPairField(pair, length);
  };
  const result = derive(inputs, of);
  const { pair, length } = named(inputs.map((input) => input.value));
  return { ...result, turningShift: turningPairField(pair, length) / result.value - 1 };
}

/** An input whose uncertainty, where typed, is taken as well known. */
function exactly(name: string, value: number, u: number | undefined, unit: string): BudgetInput {
  return { name, value, u: u ?? 0, unit, dof: Number.POSITIVE_INFINITY };
}
