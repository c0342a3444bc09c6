import type { BenchPlan } from './bench.ts';
import { cameraOf, project } from './camera.ts';
import { placeAt } from './motion.ts';
import type { Run } from './run.ts';
import { withinHalfTurn } from './truth.ts';

const DEG = 180 / Math.PI;

/** The rectangle a user would draw about the bar: all it sweeps between two times, with some room; whole even pixels. */
function regionAbout(run: Run, from_s: number, to_s: number): { x: number; y: number; width: number; height: number } {
  const { plan, motion } = run;
  const { apparatus, look, camera: cameraPlan } = plan;
  const camera = cameraOf(cameraPlan, apparatus.length_m, look.bar.height_m);
  const xs: number[] = [];
  const ys: number[] = [];
  const r = apparatus.diameter_m / 2;
  const ends = cameraPlan.view === 'side' ? null : [-1, 1];
  for (let time = from_s; time <= to_s; time += 0.01) {
    const place = placeAt(motion, time);
    const near = Math.cos(place.angle_rad + cameraPlan.coilAxis_deg / DEG) >= 0 ? 1 : -1;
    for (const end of ends ?? [near]) {
      const x = place.along_m + (end * apparatus.length_m * Math.cos(place.angle_rad)) / 2;
      const y = place.across_m + (end * apparatus.length_m * Math.sin(place.angle_rad)) / 2;
      for (const z of [-r, r]) {
        for (const e of [-r, r]) {
          const [px, py] = project(camera, [x + e, y + e, look.bar.height_m + z]);
          xs.push(px);
          ys.push(py);
        }
      }
    }
  }
  const room = cameraPlan.view === 'side' ? 0.12 * cameraPlan.barLength_px : 0.1 * cameraPlan.barLength_px;
  const low = (values: readonly number[]): number => values.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  const high = (values: readonly number[]): number => values.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);
  const x0 = Math.max(0, Math.floor(low(xs) - room));
  const y0 = Math.max(0, Math.floor(low(ys) - room));
  return {
    x: x0,
    y: y0,
    width: Math.min(cameraPlan.width_px, Math.ceil(high(xs) + room)) - x0,
    height: Math.min(cameraPlan.height_px, Math.ceil(high(ys) + room)) - y0,
  };
}

function viewOf(run: Run, id: string, from_s: number, to_s: number, rest_rad: number): Record<string, unknown> {
  const { plan } = run;
  const { camera: cameraPlan, apparatus } = plan;
  const view = { id, recording: 'A', kind: cameraPlan.view, region: regionAbout(run, from_s, to_s) };
  switch (cameraPlan.view) {
    case 'plan':
      return view;
    case 'oblique':
      return { ...view, elevation_deg: cameraPlan.elevation_deg };
    case 'side': {
      const nearer = cameraPlan.distance_m / (cameraPlan.distance_m - apparatus.length_m / 2);
      return {
        ...view,
        axis_x_px: Number(cameraPlan.axis_px[0].toFixed(1)),
        half_length_px: Number(((cameraPlan.barLength_px / 2) * nearer).toFixed(1)),
        facing_deg: Number(withinHalfTurn(rest_rad * DEG + cameraPlan.coilAxis_deg).toFixed(1)),
      };
    }
  }
}

function apparatusOf(plan: BenchPlan): Record<string, unknown> {
  const { apparatus } = plan;
  return {
    coil: {
      turns_per_coil: apparatus.turnsPerCoil,
      radius_m: apparatus.radius_m,
      u_radius_m: apparatus.u_radius_m,
      spacing_m: apparatus.spacing_m,
    },
    magnet: {
      shape: 'cylinder',
      mass_kg: apparatus.mass_kg,
      length_m: apparatus.length_m,
      diameter_m: apparatus.diameter_m,
    },
  };
}

/** The session file a user would have made of a run: region, segments and the currents read off the meter. */
export function sessionOf(run: Run, recordingFile: string): Record<string, unknown> {
  const { plan, schedule } = run;
  const steps = schedule.steps;
  const views = plan.viewPerSegment
    ? steps.map((step, i) => viewOf(run, `v${i + 1}`, step.start_s, step.end_s, step.rest_rad))
    : [
        // One view for all: what the bar sweeps in any segment.
        (() => {
          const boxes = steps.map((step) => regionAbout(run, step.start_s, step.end_s));
          const x = Math.min(...boxes.map((box) => box.x));
          const y = Math.min(...boxes.map((box) => box.y));
          const region = {
            x,
            y,
            width: Math.max(...boxes.map((box) => box.x + box.width)) - x,
            height: Math.max(...boxes.map((box) => box.y + box.height)) - y,
          };
          return { ...viewOf(run, 'v1', steps[0]!.start_s, steps[0]!.end_s, steps[0]!.rest_rad), region };
        })(),
      ];
  return {
    format: 'needlebeat/session',
    version: 1,
    title: plan.title,
    recordings: [{ id: 'A', file: recordingFile, time_scale: plan.file.timeScale, u_time_scale: 2e-5 }],
    apparatus: apparatusOf(plan),
    views,
    segments: steps.map(({ step, start_s, end_s }, i) => ({
      id: step.id,
      recording: 'A',
      view: plan.viewPerSegment ? `v${i + 1}` : 'v1',
      start_s: Number(start_s.toFixed(2)),
      end_s: Number(end_s.toFixed(2)),
      current_A: step.current_A,
      u_current_A: step.u_current_A,
      ...(step.sweep === undefined ? {} : { sweep: step.sweep }),
      note: step.note ?? '',
    })),
  };
}
