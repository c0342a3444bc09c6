import { z } from 'zod';
import { apparatusSchema, placeSchema } from '../session/session.ts';
import { checkSchema, reductionSchema } from './reduction-schema.ts';

const text = z.string().max(10_000);
const id = z.string().min(1).max(64);
const value = z.number();
const maybe = value.nullable();
const count = z.number().int().nonnegative();
const uncertainty = z.number().nonnegative();

/**
 * Scheme of one segment of a results file. What the first version of the format had must be there; what was added since may
 * be missing; keys that are not known are kept.
 */
export const segmentSchema = z.looseObject({
  id,
  recording: id,
  start_s: value,
  end_s: value,
  current_A: maybe,
  u_current_A: uncertainty.default(0),
  sweep: z.enum(['rising', 'falling']).nullable().default(null),
  status: z.enum(['measured', 'doubtful', 'unmeasured']),
  f0_Hz: z.number().positive().nullable(),
  u_f0_Hz: uncertainty.nullable(),
  fd_Hz: z.number().positive().nullable(),
  u_fd_Hz: uncertainty.nullable(),
  gamma_per_s: maybe,
  u_gamma_per_s: uncertainty.nullable(),
  amplitude_start_deg: maybe,
  amplitude_end_deg: maybe,
  equilibrium_deg: maybe,
  u_equilibrium_deg: uncertainty.nullable(),
  cycles: maybe,
  frames: count,
  frames_lost: count,
  residual_rms_deg: maybe,
  swing_Hz: maybe,
  swing_share: value,
  checks: z.array(checkSchema).max(1000),
  view: z.string().max(64).default(''),
  view_kind: z.enum(['plan', 'oblique', 'side']).nullable().default(null),
  dof_f0: maybe.default(null),
  q_factor: maybe.default(null),
  u_q_factor: uncertainty.nullable().default(null),
  frames_refused: count.default(0),
  frames_used: count.default(0),
  u_time_scale: uncertainty.default(2e-5),
  left_out: text.nullable().default(null),
  note: text.default(''),
});

const recording = z.looseObject({
  id,
  file: z.string().max(4096),
  bytes: count,
  content: z.string().max(200),
  time_scale: z.number().positive(),
  u_time_scale: uncertainty,
});

/** Scheme of a results file, version 1. The apparatus and the place are those of the session, as strict as there. */
export const resultsSchema = z.looseObject({
  format: z.literal('needlebeat/results'),
  version: z.literal(1),
  program: z.string().max(200),
  session: z.looseObject({ title: text, sha256: z.string().max(200) }),
  recordings: z.array(recording).max(1000).default([]),
  ffmpeg: z.string().max(500).default(''),
  apparatus: apparatusSchema.optional(),
  place: placeSchema.optional(),
  segments: z.array(segmentSchema).max(10_000),
  reduction: reductionSchema.default(() => reductionSchema.parse({})),
});
