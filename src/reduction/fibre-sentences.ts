import { roundedText } from '../numerics/rounding.ts';
import type { Check, Severity } from '../oscillation/ring-down.ts';
import type { FibreOrigin } from './reduction.ts';

/** The sentences about where the fibre's stiffness is known from, all in one place. */
function check(code: string, severity: Severity, message: string): Check {
  return { code, severity, message };
}

const origins: Readonly<Record<FibreOrigin, string>> = {
  typed: 'the stiffness as typed',
  'run without field': 'the run without field',
  'runs at lengths': 'the runs at several lengths',
};

interface Source {
  readonly origin: FibreOrigin;
  readonly value: number;
  readonly u: number;
  /** It has an uncertainty of its own. */
  readonly stated: boolean;
}

/** A stiffness can't be used without the inertia. */
export function stiffnessNeedsInertia(): Check {
  const message =
    'The fibre’s stiffness is given but not used: its share of the frequency follows only with the magnet’s moment of inertia.';
  return check('stiffness_needs_inertia', 'doubt', message);
}

/** A segment that was to tell the stiffness has no frequency. */
export function runUnmeasured(segment: string): Check {
  const message = `Segment ${segment} was to tell the fibre’s stiffness, but it has no frequency: that run is not used.`;
  return check('fibre_run_unmeasured', 'doubt', message);
}

/** The user left it out. */
export function runLeftOut(segment: string): Check {
  const message = `Segment ${segment} was to tell the fibre’s stiffness, but it is left out: that run is not used.`;
  return check('fibre_run_left_out', 'note', message);
}

/** It has one that is doubtful. */
export function runDoubtful(segment: string): Check {
  const message = `Segment ${segment}, which tells the fibre’s stiffness, is doubtful: its own checks say why.`;
  return check('fibre_run_doubtful', 'doubt', message);
}

/** The runs at several lengths don't fix a line. */
export function lengthsTooFew(): Check {
  const message =
    'The runs at several fibre lengths are not used: they need two different lengths, three where no uncertainties are given.';
  return check('fibre_lengths_too_few', 'doubt', message);
}

/** The length that the sweep was made with is missing. */
export function lengthInUseMissing(): Check {
  const message =
    'The runs at several fibre lengths are not used: the length of the fibre in the sweep itself (apparatus.fibre.length_m) is missing.';
  return check('fibre_length_missing', 'doubt', message);
}

/** f0² does not rise as the fibre is shortened. */
export function lengthsShowNone(): Check {
  const message =
    'The runs at several fibre lengths are not used: f0² does not rise as the fibre is shortened, so that they show no stiffness.';
  return check('fibre_lengths_show_none', 'doubt', message);
}

/** Segments at several lengths with different currents. */
export function lengthsAtCurrents(): Check {
  const message =
    'The segments at several fibre lengths have different currents; they tell the stiffness only where the field is the same in all of them.';
  return check('fibre_lengths_at_currents', 'doubt', message);
}

/** Several sources that agree; `worst`: largest difference of two over its uncertainty. */
export function sourcesCombined(sources: readonly Source[], weights: readonly number[], worst: number): Check {
  const used = sources.filter((_, i) => weights[i]! > 0);
  if (used.length < 2) {
    const message = `The fibre’s stiffness is known from ${sources.map(text).join(' and from ')}; ${origins[used[0]!.origin]} is used, since ${used[0]!.stated ? 'only it has an uncertainty' : 'none has an uncertainty'}.`;
    return check('fibre_source_chosen', 'note', message);
  }
  const message = `The fibre’s stiffness is known from ${sources.map(text).join(' and from ')} (parts of f0²); they agree within ${worst.toPrecision(2)} standard uncertainties and were combined, weighted by their uncertainties.`;
  return check('fibre_sources_combined', 'note', message);
}

/** Several sources that don't. */
export function sourcesDisagree(sources: readonly Source[], worst: number): Check {
  const message = `What is known of the fibre’s stiffness disagrees by ${worst.toPrecision(2)} standard uncertainties: ${sources.map(text).join(', ')} (parts of f0²). They were combined, and the uncertainty raised to their scatter; one of them is probably wrong.`;
  return check('fibre_sources_disagree', 'doubt', message);
}

/** Where the stiffness that was used comes from. */
export function knownFrom(used: readonly FibreOrigin[]): string {
  return used.map((origin) => origins[origin]).join(' and ');
}

function text({ origin, value, u }: Source): string {
  return `${origins[origin]} (${roundedText(value, u > 0 ? u : null).both} Hz²)`;
}
