import { z } from 'zod';

const finite = z.number();
const positive = z.number().positive();
const uncertainty = z.number().nonnegative();
const text = z.string().max(10_000);
const id = z
  .string()
  .min(1)
  .max(64)
  // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is to be kept out of names.
  .regex(/^[^\u0000-\u001f\u007f]+$/, 'a name without control characters');

const region = z.strictObject({
  x: z.number().nonnegative(),
  y: z.number().nonnegative(),
  width: positive,
  height: positive,
});

const recording = z.strictObject({
  id,
  file: z.string().min(1).max(4096),
  time_scale: positive.optional(),
  u_time_scale: uncertainty.optional(),
});

const coilByDimensions = z.strictObject({
  turns_per_coil: positive,
  u_turns_per_coil: uncertainty.optional(),
  turns_second_coil: positive.optional(),
  u_turns_second_coil: uncertainty.optional(),
  radius_m: positive,
  u_radius_m: uncertainty.optional(),
  radius_second_coil_m: positive.optional(),
  u_radius_second_coil_m: uncertainty.optional(),
  spacing_m: positive,
  u_spacing_m: uncertainty.optional(),
});

const coilByConstant = z.strictObject({
  constant_T_per_A: positive,
  u_constant_T_per_A: uncertainty.optional(),
});

const cylinder = z.strictObject({
  shape: z.literal('cylinder'),
  mass_kg: positive,
  u_mass_kg: uncertainty.optional(),
  length_m: positive,
  u_length_m: uncertainty.optional(),
  diameter_m: positive,
  u_diameter_m: uncertainty.optional(),
});

const bar = z.strictObject({
  shape: z.literal('bar'),
  mass_kg: positive,
  u_mass_kg: uncertainty.optional(),
  length_m: positive,
  u_length_m: uncertainty.optional(),
  width_m: positive,
  u_width_m: uncertainty.optional(),
});

const inertia = z.strictObject({
  inertia_kg_m2: positive,
  u_inertia_kg_m2: uncertainty.optional(),
  length_m: positive.optional(),
  u_length_m: uncertainty.optional(),
});

/** A frequency that tells the fibre's stiffness: typed, or that of a segment of this session. */
const typedFrequency = { f0_Hz: positive, u_f0_Hz: uncertainty.optional() };
const ofSegment = { segment: id };

/** Another body on the fibre that no field turns. */
const body = z.union([
  z.discriminatedUnion('shape', [cylinder, bar]),
  z.strictObject({ inertia_kg_m2: positive, u_inertia_kg_m2: uncertainty.optional() }),
]);
const atLength = { length_m: positive, u_length_m: uncertainty.optional() };

const fibre = z.strictObject({
  stiffness_N_m_per_rad: z.number().nonnegative().optional(),
  u_stiffness_N_m_per_rad: uncertainty.optional(),
  length_m: positive.optional(),
  u_length_m: uncertainty.optional(),
  run_without_field: z
    .union([
      z.strictObject({ ...typedFrequency, body: body.optional() }),
      z.strictObject({ ...ofSegment, body: body.optional() }),
    ])
    .optional(),
  runs_at_lengths: z
    .array(z.union([z.strictObject({ ...atLength, ...typedFrequency }), z.strictObject({ ...atLength, ...ofSegment })]))
    .max(1000)
    .optional(),
});

/** The current meter: what is common to all steps (gain, zero) and what one reading can resolve. */
const meter = z.strictObject({
  u_gain: uncertainty.optional(),
  u_zero_A: uncertainty.optional(),
  resolution_A: uncertainty.optional(),
});

/** The coil pair: its dimensions, or its measured constant. The second coil's values default to the first one's. */
export const coilSchema = z.union([coilByDimensions, coilByConstant]);
/** The bar magnet: a shape with its dimensions, or its moment of inertia. */
export const magnetSchema = z.union([z.discriminatedUnion('shape', [cylinder, bar]), inertia]);

/** The rig: whatever is known of it. */
export const apparatusSchema = z.strictObject({
  coil: coilSchema.optional(),
  magnet: magnetSchema.optional(),
  fibre: fibre.optional(),
  meter: meter.optional(),
});

/** Where and when the recording was made, for the field expected there. */
export const placeSchema = z.strictObject({
  latitude_deg: z.number().min(-90).max(90),
  longitude_deg: z.number().min(-180).max(360),
  height_m: z.number().min(-1000).max(100_000),
  date: z.iso.date(),
});

const planView = z.strictObject({ id, recording: id, kind: z.literal('plan'), region });
const obliqueView = z.strictObject({
  id,
  recording: id,
  kind: z.literal('oblique'),
  region,
  elevation_deg: z.number().gt(0).lte(90),
});
const sideView = z.strictObject({
  id,
  recording: id,
  kind: z.literal('side'),
  region,
  axis_x_px: finite,
  half_length_px: positive.optional(),
  facing_deg: z.number().min(-90).max(90).optional(),
});
const view = z.discriminatedUnion('kind', [planView, obliqueView, sideView]);

const segment = z.strictObject({
  id,
  recording: id,
  view: id,
  start_s: z.number().nonnegative(),
  end_s: z.number().nonnegative(),
  current_A: finite.nullable(),
  u_current_A: uncertainty.optional(),
  sweep: z.enum(['rising', 'falling']).optional(),
  note: text.optional(),
  left_out: text.optional(),
});

/** Scheme of the session file, version 1; what one field can say alone. What fields say of each other is in `read-session.ts`. */
export const sessionSchema = z.strictObject({
  $schema: z.string().optional(),
  format: z.literal('needlebeat/session'),
  version: z.literal(1),
  title: text.optional(),
  recordings: z.array(recording).min(1).max(1000),
  apparatus: apparatusSchema.optional(),
  place: placeSchema.optional(),
  views: z.array(view).max(10_000),
  segments: z.array(segment).max(10_000),
});

export type Session = z.infer<typeof sessionSchema>;
export type SessionRecording = Session['recordings'][number];
export type SessionView = Session['views'][number];
export type SessionSegment = Session['segments'][number];
export type Apparatus = z.infer<typeof apparatusSchema>;
export type Coil = NonNullable<Apparatus['coil']>;
export type Magnet = NonNullable<Apparatus['magnet']>;
export type Fibre = NonNullable<Apparatus['fibre']>;
export type Place = z.infer<typeof placeSchema>;
