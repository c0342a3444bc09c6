const RAD = 180 / Math.PI;

/** A number with a sensible count of digits for a sentence. */
function figure(value: number, digits = 2): string {
  return Number(value.toPrecision(digits)).toString();
}

/** A relative size as a percentage or, where small, in parts per million. */
function relative(value: number): string {
  return Math.abs(value) >= 1e-3 ? `${figure(value * 100)} %` : `${figure(value * 1e6)} ppm`;
}

/** An angle in degrees, or a length in pixels where the view has no scale. */
function excursion(value: number, unit: 'rad' | 'px'): string {
  return unit === 'rad' ? `${figure(value * RAD)}°` : `${figure(value)} px`;
}

/** Every sentence the ring-down's checks can say, by code: what is wrong and what to do. */
export const SENTENCES = {
  too_few_poses: (f: { poses: number; refused: number }) =>
    `The bar was found in only ${f.poses} frames${f.refused > 0 ? ` (${f.refused} more were refused)` : ''}, too few to time a swing; mark a longer stretch in which the bar is in plain view.`,
  no_oscillation: () =>
    'No oscillation stands out of the noise; nudge the bar a little more, or check that the region holds the bar and nothing else that moves.',
  fit_failed: () =>
    'The damped oscillation could not be fitted to this stretch; look at the trace and mark a part of it in which the bar is left alone.',
  too_few_cycles: (f: { cycles: number }) =>
    `Only ${f.cycles.toFixed(1)} cycles fit into the segment, too few to time; film at least five at this current.`,
  not_determined: (f: { relative: number }) =>
    `The frequency is uncertain by ${relative(f.relative)}, as good as unknown; film a longer ring-down or nudge the bar more.`,
  imprecise: (f: { relative: number }) =>
    `The frequency is uncertain by ${relative(f.relative)}, far more than usual; film a longer ring-down or nudge the bar more.`,
  near_half_frame_rate: (f: { frequency_Hz: number; rate_Hz: number }) =>
    `The bar turns at ${figure(f.frequency_Hz, 3)} Hz with only ${figure(f.rate_Hz / f.frequency_Hz)} frames a cycle (${figure(f.rate_Hz, 3)} frames/s), and could as well be faster than seen; film at a higher frame rate.`,
  few_frames_per_cycle: (f: { frequency_Hz: number; rate_Hz: number }) =>
    `There are only ${figure(f.rate_Hz / f.frequency_Hz)} frames a cycle; a higher frame rate would be safer.`,
  folded_frequency: (f: { frequency_Hz: number; other_Hz: number }) =>
    `The uneven frame times fit ${figure(f.other_Hz, 4)} Hz better than ${figure(f.frequency_Hz, 4)} Hz: the motion is faster than half the frame rate and folded about it; film at a higher frame rate.`,
  ambiguous_frequency: (f: { frequency_Hz: number; other_Hz: number }) =>
    `Gaps leave it open whether the frequency is ${figure(f.frequency_Hz, 4)} or ${figure(f.other_Hz, 4)} Hz; mark a stretch without the gap.`,
  long_gap: (f: { gap_s: number; cycles: number }) =>
    `For ${figure(f.gap_s)} s (${figure(f.cycles)} cycles) in a row no pose could be used; the swings across the gap are taken as counted by the model.`,
  broadside_view: (f: { facing_deg: number }) =>
    `The bar rests nearly broadside to the camera (facing ${Math.round(f.facing_deg)}°), where its end swings to and fro twice a cycle; check the frequency against another step, or film from nearly along the bar.`,
  second_line: (f: { frequency_Hz: number; share: number }) =>
    `A second oscillation at ${figure(f.frequency_Hz, 3)} Hz is ${relative(f.share)} of the twist in the angle itself, so that it is not certain which of them is the twist; let the swing die down before the nudge.`,
  swing_seen: (f: { frequency_Hz: number; share: number }) =>
    `The bar swings sideways as well, at ${figure(f.frequency_Hz, 3)} Hz by ${relative(f.share)} of the twist; it is fitted beside it.`,
  swing_close: (f: { frequency_Hz: number; twist_Hz: number; share: number }) =>
    `The bar swings sideways at ${figure(f.frequency_Hz, 3)} Hz, too close to the twist at ${figure(f.twist_Hz, 3)} Hz to be told apart in this length; let the swing die down first or film longer.`,
  swing_with_twist: (f: { twist_Hz: number }) =>
    `The bar's middle moves at the twist's own ${figure(f.twist_Hz, 3)} Hz, so that a swing can't be told from the twist; let the swing die down first, or hang the bar by its middle.`,
  jump: (f: { time_s: number; size: number }) =>
    `Amplitude and phase jump by ${relative(f.size)} about ${figure(f.time_s, 3)} s into the segment, as after a nudge or a touch; mark only the stretch before or after it.`,
  rest_jumps: (f: { time_s: number; size: number; unit: 'rad' | 'px' }) =>
    `The rest direction jumps by ${excursion(f.size, f.unit)} about ${figure(f.time_s, 3)} s into the segment, as when the current changes or the bench is knocked; mark only the stretch before or after it.`,
  crossings_disagree: (f: { counted_Hz: number; fitted_Hz: number }) =>
    `Counting passages through rest gives ${figure(f.counted_Hz, 6)} Hz where the fit says ${figure(f.fitted_Hz, 6)} Hz; look at the trace for a disturbance.`,
  amplitude_large: (f: { amplitude: number; shift: number }) =>
    `At ${excursion(f.amplitude, 'rad')} the amplitude lowers the frequency by ${relative(f.shift)}, which is corrected for; a smaller nudge would depend less on that correction.`,
  amplitude_extreme: (f: { amplitude: number }) =>
    `The amplitude of ${excursion(f.amplitude, 'rad')} is beyond what the correction for it is good for; let the bar calm down to below 40° before the segment begins.`,
  amplitude_law_odd: () =>
    'The frequency changes with the amplitude otherwise than the fibre share assumed would have it; the data are believed. Check the scale of the view (elevation, half length), or give the stiffness of the fibre.',
  angle_distorted: () =>
    'The curve misses the trace by an amount that depends on where the bar stands, not on time: the angle is followed wrongly, as where an edge, a hard shadow or a reflection lies across the bar, and the amplitude is not to be trusted; light the bench softly from above and film it again.',
  heavily_damped: (f: { q: number; cycles: number }) =>
    `The twist dies down to a third of its amplitude within ${figure(f.cycles)} cycles (Q about ${figure(f.q)}), so that frequency and damping hang on the first few swings; take off what brakes the bar, or compare several nudges.`,
  unscaled_view: () =>
    'The side view has no half length, so that the motion has no scale in degrees: the frequency is given, but how much the amplitude lowered it can only be guessed (it is in the uncertainty); give half_length_px.',
  drag_quadratic: (f: { share: number }) =>
    `The damping is not exponential: a drag that grows with speed takes ${relative(f.share)} of the loss at the start; gamma is its small-amplitude part.`,
  amplitude_grows: (f: { start: number; end: number; unit: 'rad' | 'px' }) =>
    `The amplitude grows from ${excursion(f.start, f.unit)} to ${excursion(f.end, f.unit)} instead of dying down: something drives the bar; keep draughts and hands away.`,
  rest_drifts: (f: { drift: number; unit: 'rad' | 'px' }) =>
    `The rest direction drifts by ${excursion(f.drift, f.unit)} over the segment; wait until fibre and supply have settled.`,
  bad_poses: (f: { refused: number; frames: number }) =>
    `In ${f.refused} of ${f.frames} frames the bar could not be followed; they are left out. Keep hands and papers away and light the bench evenly.`,
  outliers: (f: { count: number; poses: number }) =>
    `${f.count} of ${f.poses} poses lie far off the curve and are left out; look for what crossed the picture there.`,
  residuals_not_noise: (f: { rms: number; amplitude: number; unit: 'rad' | 'px' }) =>
    `The curve misses the trace by ${excursion(f.rms, f.unit)} rms, ${relative(f.rms / f.amplitude)} of the amplitude: this is no free ring-down all the way; look at the trace and mark a quieter part.`,
  pushed_about: (f: { factor: number }) =>
    `Amplitude and phase wander as if draughts or tremors pushed the bar as it swung; the uncertainties are ${figure(f.factor)} times what plain noise would give. Shield the bench from draughts and footsteps.`,
  residuals_correlated: (f: { factor: number }) =>
    `What the curve leaves over is not plain noise; the uncertainties are ${figure(f.factor)} times what plain noise would give.`,
  clock_unverified: (f: { relative: number }) =>
    `Most of the uncertainty is the camera clock's ${relative(f.relative)}, which is assumed, not measured; film a reference clock to check it.`,
} as const;

/** Code of a check of the ring-down. */
export type RingDownCode = keyof typeof SENTENCES;
