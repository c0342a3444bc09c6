import type { SegmentResult } from './results.ts';

/** A column of results.csv and a key of a segment in results.json. */
export interface Column {
  readonly name: keyof SegmentResult;
  readonly title: string;
  readonly description: string;
  /** Unit as printed and as UCUM code (The Unified Code for Units of Measure); null where the value is no quantity. */
  readonly unit: { readonly text: string; readonly ucum: string } | null;
  readonly type: 'text' | 'number' | 'count' | 'codes';
  /** The only values a text may have. */
  readonly values?: readonly string[];
  readonly mayBeEmpty: boolean;
}

const second = { text: 's', ucum: 's' };
const ampere = { text: 'A', ucum: 'A' };
const hertz = { text: 'Hz', ucum: 'Hz' };
const perSecond = { text: '1/s', ucum: 's-1' };
const degree = { text: '°', ucum: 'deg' };
const one = { text: '1', ucum: '1' };

type Name = keyof SegmentResult;
const text = (
  name: Name,
  title: string,
  description: string,
  mayBeEmpty = false,
  values?: readonly string[],
): Column => ({
  name,
  title,
  description,
  unit: null,
  type: 'text',
  mayBeEmpty,
  ...(values && { values }),
});
const number = (name: Name, title: string, unit: Column['unit'], description: string, mayBeEmpty = true): Column => ({
  name,
  title,
  description,
  unit,
  type: 'number',
  mayBeEmpty,
});
const count = (name: Name, title: string, description: string): Column => ({
  name,
  title,
  description,
  unit: one,
  type: 'count',
  mayBeEmpty: false,
});
const u = (of: string) => `Standard uncertainty (k = 1) of ${of}.`;

/** Columns of results.csv: those that other programs rely on first, in their fixed order, then those added since. */
export const columns: readonly Column[] = [
  text('id', 'Segment', 'Name of the segment, unique within the session.'),
  text('recording', 'Recording', 'Name of the recording that the segment is a stretch of.'),
  number(
    'start_s',
    'Start',
    second,
    'Start of the segment on the recording’s presentation clock, after its time scale.',
    false,
  ),
  number('end_s', 'End', second, 'End of the segment on the same clock.', false),
  number(
    'current_A',
    'Current',
    ampere,
    'Current of the step; empty where it is not known yet, negative for reversed leads.',
  ),
  number('u_current_A', 'u(current)', ampere, u('current_A'), false),
  text(
    'sweep',
    'Sweep',
    'Whether the step belongs to the rising or the falling half of the sweep; empty: not said.',
    true,
    ['rising', 'falling'],
  ),
  text(
    'status',
    'Status',
    'measured; doubtful: a number is given, and a check of severity doubt says why not to trust it yet; unmeasured: no number, and a check of severity fault says why.',
    false,
    ['measured', 'doubtful', 'unmeasured'],
  ),
  number(
    'f0_Hz',
    'Undamped frequency',
    hertz,
    'Undamped natural frequency in the limit of small amplitude: what is squared in the reduction.',
  ),
  number(
    'u_f0_Hz',
    'u(undamped frequency)',
    hertz,
    `${u('f0_Hz')} Covers what the segment itself shows and the time scale.`,
  ),
  number(
    'fd_Hz',
    'Observed frequency',
    hertz,
    'Frequency as observed: damped, at the mean-square amplitude of the segment.',
  ),
  number('u_fd_Hz', 'u(observed frequency)', hertz, u('fd_Hz')),
  number('gamma_per_s', 'Damping', perSecond, 'Damping rate gamma: the amplitude decays as exp(-gamma t).'),
  number('u_gamma_per_s', 'u(damping)', perSecond, u('gamma_per_s')),
  number(
    'amplitude_start_deg',
    'Amplitude at the start',
    degree,
    'Amplitude of the twist at the start of the segment.',
  ),
  number('amplitude_end_deg', 'Amplitude at the end', degree, 'Amplitude of the twist at the end of the segment.'),
  number(
    'equilibrium_deg',
    'Rest direction',
    degree,
    'Rest direction: for plan and oblique views anticlockwise from the picture’s +x axis, in (-90, 90]; for side views from the line of sight, positive when the near end stands to the right.',
  ),
  number('u_equilibrium_deg', 'u(rest direction)', degree, u('equilibrium_deg')),
  number('cycles', 'Cycles', one, 'Number of oscillations within the segment.'),
  count('frames', 'Frames', 'Frames that the recording claims within the segment.'),
  count('frames_lost', 'Frames lost', 'Frames of those that could not be decoded.'),
  number('residual_rms_deg', 'Residual rms', degree, 'Root mean square of the residuals of the fit.'),
  number(
    'swing_Hz',
    'Swing frequency',
    hertz,
    'Frequency of a second, sideways motion where one stands out, else empty.',
  ),
  number('swing_share', 'Swing share', one, 'Amplitude of the swing at the bar’s end over that of the twist.', false),
  {
    name: 'checks',
    title: 'Checks',
    description:
      'Codes of the findings about the segment, separated by semicolons; their sentences are in results.json.',
    unit: null,
    type: 'codes',
    mayBeEmpty: true,
  },
  text('view', 'View', 'Name of the view in which the bar was followed.', true),
  text(
    'view_kind',
    'Kind of view',
    'How the camera looked: along the fibre (plan), down at an angle (oblique), across it (side).',
    true,
    ['plan', 'oblique', 'side'],
  ),
  number(
    'dof_f0',
    'Degrees of freedom',
    one,
    'Degrees of freedom of u_f0_Hz, as far as the segment itself shows; empty: not limited.',
  ),
  number(
    'q_factor',
    'Quality factor',
    one,
    'Quality factor, pi f0 / gamma; empty where the damping can’t be told from none.',
  ),
  number('u_q_factor', 'u(quality factor)', one, u('q_factor')),
  count('frames_refused', 'Frames refused', 'Decoded frames in which the bar was not followed.'),
  count('frames_used', 'Frames used', 'Frames whose poses were used in the fit.'),
  number(
    'u_time_scale',
    'u(time scale)',
    one,
    'Relative standard uncertainty of the recording’s clock; contained in u_f0_Hz and common to all segments of a recording.',
    false,
  ),
  text('left_out', 'Left out', 'Why the user left the segment out of the reduction; empty: not left out.', true),
  text('note', 'Note', 'The user’s note.', true),
];
