import type { Check, Severity } from '../oscillation/ring-down.ts';

/** Makes a check of the reduction; the sentences for people are all in this file. */
function check(code: string, severity: Severity, message: string): Check {
  return { code, severity, message };
}

/** Nothing can be fitted. */
export function tooFewCurrents(currents: number): Check {
  const found = currents === 0 ? 'no measured segment has a current' : 'all measured segments have the same current';
  return check(
    'too_few_currents',
    'fault',
    `No reduction: ${found}, and a line of f0² against current needs at least two different ones.`,
  );
}

/** The coil is not described. */
export function noCoil(): Check {
  return check(
    'no_coil',
    'fault',
    'The ambient field and m/J can’t be had: the apparatus holds neither the coil’s dimensions nor its constant.',
  );
}

/** The magnet is not described. */
export function noMagnet(): Check {
  return check(
    'no_magnet',
    'fault',
    'Moment and inertia can’t be had: the apparatus holds neither the magnet’s shape and mass nor its moment of inertia.',
  );
}
