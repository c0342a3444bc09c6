import { cameraOf, project, warpAt, warped } from './camera.ts';
import { amplitudeAt, envelopeOf, meanSquareAmplitude } from './envelope.ts';
import { coilConstant_T_per_A, inertia_kg_m2, smallMotion, totalField } from './magnet.ts';
import { placeAt } from './motion.ts';
import { lineDelay_s, lineReader, type Run } from './run.ts';

const DEG = 180 / Math.PI;
const round = (value: number, digits: number): number => Number(value.toFixed(digits));
const significant = (value: number, digits: number): number => Number(value.toPrecision(digits));

/** The same direction of a bar within (-90, 90] degrees. */
export function withinHalfTurn(angle_deg: number): number {
  const turned = angle_deg - 180 * Math.round(angle_deg / 180);
  return turned === -90 ? 90 : turned;
}

/** What is true of one segment; fields as in a truth file. */
function segmentTruth(run: Run, index: number): Record<string, unknown> {
  const { plan, schedule, motion } = run;
  const scheduled = schedule.steps[index]!;
  const { step, start_s, end_s, rest_rad, current_A } = scheduled;
  const { f0_Hz, shift_per_rad2 } = smallMotion(plan.apparatus, current_A, rest_rad);
  const gamma = plan.apparatus.gamma_per_s;
  const damped2 = f0_Hz * f0_Hz - (gamma / (2 * Math.PI)) ** 2;
  const nudged = step.renudge_s !== undefined;
  const half = 0.6 / f0_Hz;
  const released = scheduled.contacts[0]!.end_s;
  const envelope = envelopeOf(motion, Math.max(released - 1e-3, start_s - 2 * half), end_s + half);
  const first = amplitudeAt(envelope, start_s);
  const last = amplitudeAt(envelope, end_s);
  const meanSquare = meanSquareAmplitude(envelope, start_s, end_s) ?? 0;
  const swing = step.swing_m;
  const decay = Math.exp(-plan.apparatus.swingDecay_per_s * (start_s - released));
  return {
    id: step.id,
    current_A: step.current_A,
    true_current_A: current_A,
    start_s,
    end_s,
    f0_Hz: round(f0_Hz, 8),
    fd_Hz: damped2 > 0 ? round(Math.sqrt(damped2) * (1 + shift_per_rad2 * meanSquare), 8) : null,
    gamma_per_s: gamma,
    gamma_mean_per_s:
      nudged || first === null || last === null ? null : round(Math.log(first / last) / (end_s - start_s), 6),
    equilibrium_deg: round(withinHalfTurn(rest_rad * DEG + plan.camera.coilAxis_deg), 5),
    amplitude_start_deg: first === null ? null : round(first * DEG, 5),
    amplitude_end_deg: last === null ? null : round(last * DEG, 5),
    cycles: round((end_s - start_s) * f0_Hz, 2),
    field_T: significant(totalField(plan.apparatus, current_A).size_T, 10),
    expected_status: step.expected,
    ...(step.why === undefined ? {} : { why: step.why }),
    ...(nudged ? { nudge_s: scheduled.contacts[1]!.end_s } : {}),
    ...(swing === undefined
      ? { swing_Hz: null }
      : {
          swing_Hz: plan.apparatus.swing_Hz[0],
          swing_start_m: round(Math.abs(swing[0]) * decay, 7),
          cross_swing_Hz: plan.apparatus.swing_Hz[1],
          cross_swing_start_m: round(Math.abs(swing[1]) * decay, 7),
        }),
  };
}

/** Everything that is true of a drawn recording, as its truth file says it; see the README of samples for the fields. */
export function truthOf(run: Run, recordingFile: string): Record<string, unknown> {
  const { plan, schedule, times } = run;
  const { apparatus, camera, sensor, file } = plan;
  const inertia = inertia_kg_m2(apparatus);
  const k = coilConstant_T_per_A(apparatus);
  const turn = apparatus.misalignment_deg / DEG;
  const along = apparatus.ambient_T * Math.cos(turn);
  const sideways = file.rotation_deg === 90 || file.rotation_deg === 270;
  let longest = 0;
  for (let i = 1; i < times.time_s.length; i++) longest = Math.max(longest, times.time_s[i]! - times.time_s[i - 1]!);
  const clock = (tick: number): number => round(tick / file.clock_Hz, 7);
  return {
    recording: recordingFile,
    drawn: true,
    about: plan.about,
    view: camera.view,
    width: camera.width_px,
    height: camera.height_px,
    stored_width: sideways ? camera.height_px : camera.width_px,
    stored_height: sideways ? camera.width_px : camera.height_px,
    rotation_deg: file.rotation_deg,
    codec: file.codec === 'h264' ? 'h264' : 'hevc',
    rate: sensor.jitter_s > 0 || sensor.droppedShare > 0 || sensor.dimRateShare !== 1 ? 'varying' : 'constant',
    nominal_rate_Hz: sensor.rate_Hz,
    time_scale: file.timeScale,
    frames: times.ticks.length,
    first_frame_s: clock(times.ticks[0]!),
    last_frame_s: clock(times.ticks[times.ticks.length - 1]!),
    longest_gap_s: round(longest, 6),
    exposure_s: sensor.exposure_s,
    readout_s: sensor.readout_s,
    coil_axis_deg: camera.coilAxis_deg,
    ...(camera.view === 'plan' ? { axis_px: camera.axis_px, bar_length_px: camera.barLength_px } : {}),
    ...(camera.view === 'oblique' ? { elevation_deg: camera.elevation_deg, camera_to_fibre_m: camera.distance_m } : {}),
    ...(camera.view === 'side'
      ? { camera_elevation_deg: camera.elevation_deg, camera_to_fibre_m: camera.distance_m }
      : {}),
    apparatus: {
      ambient_T: apparatus.ambient_T,
      misalignment_deg: apparatus.misalignment_deg,
      ambient_along_axis_T: significant(along, 10),
      ambient_across_axis_T: significant(apparatus.ambient_T * Math.sin(turn), 10),
      coil_constant_T_per_A: significant(k, 10),
      moment_A_m2: apparatus.moment_A_m2,
      inertia_kg_m2: significant(inertia, 10),
      moment_to_inertia: significant(apparatus.moment_A_m2 / inertia, 10),
      fibre_stiffness_N_m_per_rad: apparatus.fibreStiffness_N_m_per_rad,
      fibre_rest_deg: apparatus.fibreRest_deg,
      gamma_per_s: apparatus.gamma_per_s,
      square_drag_per_rad: apparatus.squareDrag_per_rad,
      slope_Hz2_per_A: significant((apparatus.moment_A_m2 * k) / (4 * Math.PI ** 2 * inertia), 10),
      intercept_Hz2: significant(
        (apparatus.moment_A_m2 * along + apparatus.fibreStiffness_N_m_per_rad) / (4 * Math.PI ** 2 * inertia),
        10,
      ),
    },
    segments: schedule.steps.map((_, index) => segmentTruth(run, index)),
  };
}

/** Where the bar truly is in one frame, at the moment the picture's line through the fibre was exposed. */
export function framePose(
  run: Run,
  frame: number,
): { readonly angle_deg: number; readonly x_px: number; readonly y_px: number } {
  const { plan, motion, times } = run;
  const { camera: cameraPlan, apparatus, look } = plan;
  const time = times.time_s[frame]!;
  const warp = warpAt(cameraPlan, time);
  const still = cameraOf(cameraPlan, apparatus.length_m, look.bar.height_m);
  const camera = warp === null ? still : warped(still, warp, cameraPlan.width_px, cameraPlan.height_px);
  const { lines, lineOf } = lineReader(plan);
  const line = lineOf(Math.round(camera.centreX_px), Math.round(camera.centreY_px));
  const place = placeAt(motion, time + lineDelay_s(plan, line, lines));
  const angle_deg = place.angle_rad * DEG + cameraPlan.coilAxis_deg;
  if (cameraPlan.view !== 'side') {
    const [x_px, y_px] = project(camera, [place.along_m, place.across_m, look.bar.height_m]);
    return { angle_deg, x_px, y_px };
  }
  // The near end is the one whose direction, from the line of sight towards the viewer, lies within a quarter turn.
  const half = (Math.cos(angle_deg / DEG) >= 0 ? 0.5 : -0.5) * apparatus.length_m;
  const [x_px, y_px] = project(camera, [
    place.along_m + half * Math.cos(place.angle_rad),
    place.across_m + half * Math.sin(place.angle_rad),
    look.bar.height_m,
  ]);
  return { angle_deg, x_px, y_px };
}

/** The true angle and place in every frame as CSV: the frames.csv beside a truth file. */
export function framesCsv(run: Run): string {
  const { plan, times } = run;
  const place = plan.camera.view === 'side' ? 'near_end_x_px,near_end_y_px' : 'middle_x_px,middle_y_px';
  const lines = [`frame,container_s,time_s,angle_deg,${place}`];
  const first = framePose(run, 0).angle_deg;
  const offset = withinHalfTurn(first) - first;
  for (let frame = 0; frame < times.ticks.length; frame++) {
    const { angle_deg, x_px, y_px } = framePose(run, frame);
    const container = times.ticks[frame]! / plan.file.clock_Hz;
    lines.push(
      `${frame},${container.toFixed(6)},${times.time_s[frame]!.toFixed(6)},${(angle_deg + offset).toFixed(5)},${x_px.toFixed(3)},${y_px.toFixed(3)}`,
    );
  }
  return `${lines.join('\n')}\n`;
}
