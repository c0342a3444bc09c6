import { roundedText } from '../numerics/rounding.ts';
import type { Check, Severity } from '../oscillation/ring-down.ts';
import { fibreShareLimit } from './assumptions.ts';
import type { Model, ModelKind } from './reduction.ts';

/** The sentences of the reduction's checks, all in one place, so that window, terminal and report agree. */
function check(code: string, severity: Severity, message: string): Check {
  return { code, severity, message };
}

/** A field in microtesla, rounded to its uncertainty. */
function microtesla(value_T: number, u_T: number | null = null): string {
  return `${roundedText(value_T * 1e6, u_T === null ? null : u_T * 1e6).both} µT`;
}

function short(value: number, digits = 2): string {
  return Number(value.toPrecision(digits)).toString().replace('-', '−');
}

function list(ids: readonly string[]): string {
  return ids.length < 2 ? (ids[0] ?? '') : `${ids.slice(0, -1).join(', ')} and ${ids.at(-1)}`;
}

/** Nothing can be fitted. */
export function tooFewCurrents(currents: number): Check {
  const found = currents === 0 ? 'no measured segment has a current' : 'all measured segments have the same current';
  const message = `No reduction: ${found}, and a line of f0² against current needs at least two different ones.`;
  return check('too_few_currents', 'fault', message);
}

/** There are points, but no model goes through them. */
export function noFit(): Check {
  const message =
    'No reduction: f0² does not rise with the current on either side of any reversal; check the signs and the order of the currents.';
  return check('no_fit', 'fault', message);
}

/** The coil is not described. */
export function noCoil(): Check {
  const message =
    'The ambient field and m/J can’t be had: the apparatus holds neither the coil’s dimensions nor its constant.';
  return check('no_coil', 'fault', message);
}

/** The magnet is not described. */
export function noMagnet(): Check {
  const message =
    'Moment and inertia can’t be had: the apparatus holds neither the magnet’s shape and mass nor its moment of inertia.';
  return check('no_magnet', 'fault', message);
}

/** Doubtful segments had to be used. */
export function doubtfulUsed(ids: readonly string[]): Check {
  const message = `Doubtful segments (${list(ids)}) had to be used, since fewer than two currents were measured without doubt.`;
  return check('doubtful_used', 'doubt', message);
}

/** No point carries an uncertainty. */
export function noUncertainties(): Check {
  const message =
    'No segment has an uncertainty of its own in frequency or current: all points weigh alike per share of f0², and the uncertainties are those of the scatter alone.';
  return check('no_uncertainties', 'doubt', message);
}

/** As many parameters as points. */
export function noSpareDof(kind: ModelKind): Check {
  const what =
    kind === 'line' ? 'The line goes exactly through its points' : 'The model goes exactly through its points';
  const message = `${what}: nothing shows whether they agree, and the uncertainties are those of the inputs alone. Film one more current.`;
  return check('no_spare_points', 'doubt', message);
}

/** Birge’s ratio of frequencies and currents was above chance; `dof` may be broken. */
export function scatterAbove(scale: number, dof: number): Check {
  const message = `The points scatter ${short(scale)} times more than their uncertainties allow (${short(dof)} degrees of freedom): the uncertainties of frequencies and currents were raised by that factor.`;
  return check('scatter_above_uncertainty', 'doubt', message);
}

/** The same for rest directions. */
export function directionsScatter(scale: number): Check {
  const message = `The rest directions scatter ${short(scale)} times more than their uncertainties allow, which were raised by that factor.`;
  return check('directions_scatter', 'note', message);
}

/** Chi-square is far below what chance would leave of the stated uncertainties. */
export function scatterBelow(): Check {
  const message =
    'The points scatter far less than the uncertainties of their currents would have it. What is stated for each step is then rather common to all steps: given as the meter’s scale or zero it would not average out over them.';
  return check('scatter_below_uncertainty', 'note', message);
}

/** Rest directions that no field gives. */
export function directionsIgnored(): Check {
  const message =
    'The rest directions do not follow any field (was the camera or the region moved between segments?): only the frequencies were used.';
  return check('directions_ignored', 'doubt', message);
}

/** A large standardised residual of f0²; `standardised` with its sign. */
export function offTheLine(id: string, standardised: number): Check {
  const way = standardised > 0 ? 'above' : 'below';
  const message = `Segment ${id} lies ${short(Math.abs(standardised))} standard uncertainties ${way} the fit. It was kept; check its current and its fit.`;
  return check('off_the_line', 'doubt', message);
}

/** A large standardised residual of a rest direction. */
export function directionOff(id: string, standardised: number): Check {
  const message = `The rest direction of segment ${id} lies ${short(Math.abs(standardised))} standard uncertainties from the fit. It was kept.`;
  return check('direction_off', 'note', message);
}

/** A result moves by `moved` standard uncertainties without one segment. */
export function hangsOnOne(id: string, moved: number): Check {
  const message = `The result hangs on segment ${id}: without it a result moves by ${short(moved)} standard uncertainties. Film that current again, and one near it.`;
  return check('hangs_on_one', 'doubt', message);
}

/** Field and fibre can't be told apart; `ambient_T` null: no coil constant. */
export function fibreNotSeparated(ambient_T: number | null): Check {
  const share = `${short(100 * fibreShareLimit)} %`;
  const size = ambient_T === null ? '' : ` (${short(ambient_T * fibreShareLimit * 1e6)} µT)`;
  const message = `The fibre’s share can’t be separated from the field: the ambient field is too high by stiffness / moment. A fibre that carries up to ${share} of the restoring torque without current makes that up to ${share}${size}, which is in the uncertainty. Reversed currents that turn the bar round, or the fibre’s stiffness, would separate it.`;
  return check('fibre_not_separated', 'note', message);
}

/** The fibre's part of f0² as known beforehand against that of the sweep itself, Hz². */
export function fibreDisagrees(found: number, given: number, u: number): Check {
  const message = `The stiffness known for the fibre and that in the frequencies of the sweep differ by ${short(Math.abs(found - given) / u)} standard uncertainties (parts of f0²: ${short(given, 3)} Hz² and ${short(found, 3)} Hz²).`;
  return check('fibre_disagrees', 'doubt', message);
}

/** Only frequencies, one straight line. */
export function misalignmentNotSeen(): Check {
  const message =
    'Frequencies alone show the field along the coil axis; its direction can’t be had without rest directions at several currents. A misalignment of the usual few degrees is in the uncertainty.';
  return check('misalignment_not_seen', 'note', message);
}

/** Only frequencies, but curved. */
export function acrossFromFrequencies(): Check {
  const message =
    'The frequencies follow a hyperbola, not a straight line: part of the ambient field lies across the coil axis. Its side, and so the misalignment, can’t be had without rest directions.';
  return check('across_from_frequencies', 'note', message);
}

/** Segments that could lie on either side; `difference` of the criterion. */
export function branchAmbiguous(ids: readonly string[], difference: number): Check {
  const message = `On which side of the reversal ${list(ids)} lies is not certain: taking the other side fits almost as well (criterion ${short(difference)} higher). A current further from the reversal would settle it.`;
  return check('branch_ambiguous', 'doubt', message);
}

/** Another way for the fibre to have followed fits about as well. */
export function turnAmbiguous(other: Model['turn'], difference: number): Check {
  const message = `How the fibre followed when the bar turned round is not certain: “${other}” fits almost as well (criterion ${short(difference)} higher).`;
  return check('turn_ambiguous', 'note', message);
}

/** Where the fields cancel, and how the fibre followed. */
export function reversalBetween(reversal_A: number, turn: Model['turn']): Check {
  const how = {
    'with the field': 'the fibre was then twisted by half a turn the way the field turned',
    'against the field': 'the bar went round against the field, and twisted the fibre that way',
    'set back': 'the fibre was untwisted again there',
    'one side': '',
  }[turn];
  const message = `Coil and ambient field cancel along the axis at ${short(reversal_A, 3)} A; beyond it the bar points the other way${how === '' ? '' : `, and ${how}`}.`;
  return check('reversal', 'note', message);
}

/** The ambient field is against that of a positive current. */
export function ambientOpposed(): Check {
  const message = 'The ambient field points against the field of a positive current.';
  return check('ambient_opposed', 'note', message);
}

/** Rising and falling steps differ by more than chance. */
export function sweepsDiffer(difference_Hz2: number, u: number, difference_T: number | null): Check {
  const field = difference_T === null ? '' : `, as if the field had changed by ${short(difference_T * 1e6)} µT`;
  const message = `Falling steps lie ${short(Math.abs(difference_Hz2 / u))} standard uncertainties ${difference_Hz2 > 0 ? 'above' : 'below'} rising ones${field}: the field drifted, or something was magnetised.`;
  return check('sweeps_differ', 'doubt', message);
}

/** The bar is long for its coils; `shift` as a share. */
export function unevenField(shift: number): Check {
  const message = `A bar this long lies in an uneven coil field: evenly magnetised it would be turned ${short(Math.abs(shift) * 100)} % ${shift < 0 ? 'less' : 'more'} than the mean field over its length says. The mean is used; the difference is in the uncertainty.`;
  return check('uneven_field', 'note', message);
}

/** Names of inputs that were typed without an uncertainty. */
export function exactInputs(names: readonly string[]): Check {
  const message = `No uncertainty is given for ${list(names)}: taken as exact, which makes the results look better than they are.`;
  return check('inputs_without_uncertainty', 'note', message);
}

/** The field of the World Magnetic Model beside the measured one. */
export function modelFieldNote(expected_T: number, share: number | null): Check {
  const compared =
    share === null ? '' : `; the measured field is ${short(Math.abs(share) * 100)} % ${share < 0 ? 'lower' : 'higher'}`;
  const message = `The World Magnetic Model expects ${microtesla(expected_T, 133e-9)} horizontally at this place and date${compared}. Steel in a building shifts the real field far more than that model’s uncertainty.`;
  return check('expected_field', 'note', message);
}

/** Why there is no expected field. */
export function noModelField(reason: 'date' | 'place', date: string): Check {
  const message =
    reason === 'date'
      ? `No expected field: the date ${date} lies outside the years 2014 to 2029 of the World Magnetic Models at hand.`
      : 'No expected field: latitude, longitude or height of the place is not a place on Earth.';
  return check('no_expected_field', 'note', message);
}

/** Why the chosen model, for people. */
export function modelSentence(
  kind: ModelKind,
  fibre: Model['fibre'],
  turn: Model['turn'],
  fibreKnownFrom: string,
): string {
  const shape = {
    line: 'One straight line of f0² against current, with uncertainties in both: all points lie on one side of the reversal, and frequencies show no bend beyond doubt.',
    'two branches':
      'Two straight branches about the reversal, f0² against |k I + B|: the bar turned round within the sweep.',
    hyperbola:
      'A hyperbola in f0 alone: the frequencies bend where the coil’s field is weak, so part of the ambient field lies across the coil axis.',
    turning:
      'Frequencies and the turning of the rest direction together, for an ambient field in any horizontal direction.',
  }[kind];
  const share = {
    separated: 'The data separate the fibre’s stiffness from the field.',
    given: `The fibre’s stiffness is known from ${fibreKnownFrom}.`,
    assumed: 'The fibre’s stiffness can’t be separated from the field; none is assumed, with an uncertainty for it.',
  }[fibre];
  const followed = {
    'one side': '',
    'with the field': ' Where the bar turned round it twisted the fibre by the way the field turned.',
    'against the field': ' Where the bar turned round it went against the field.',
    'set back': ' Where the bar turned round the fibre was untwisted again.',
  }[turn];
  return `${shape} ${share}${followed}`;
}
