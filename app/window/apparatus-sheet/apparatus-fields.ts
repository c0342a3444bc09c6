import type { Session } from '../../contract.ts';

type Apparatus = NonNullable<Session['apparatus']>;
export type Coil = NonNullable<Apparatus['coil']>;
export type Magnet = NonNullable<Apparatus['magnet']>;
export type Place = NonNullable<Session['place']>;

export type CoilKind = 'none' | 'dimensions' | 'constant';
export type MagnetKind = 'none' | 'cylinder' | 'bar' | 'inertia';

/** One number of the rig as the form shows it: shown = stored * factor. */
export interface RigField {
  /** Name in the session file; its uncertainty is `u_` + name. */
  readonly key: string;
  readonly label: string;
  readonly unit: string;
  readonly factor: number;
  readonly optional?: boolean;
  /** It may be zero. */
  readonly zero?: boolean;
  /** It has no uncertainty beside it. */
  readonly alone?: boolean;
}

const mm = (key: string, label: string, optional = false): RigField => ({
  key,
  label,
  unit: 'mm',
  factor: 1e3,
  optional,
});

/** Fields of each kind of coil description. */
export const COIL_FIELDS: Readonly<Record<CoilKind, readonly RigField[]>> = {
  none: [],
  dimensions: [
    { key: 'turns_per_coil', label: 'Turns of each coil', unit: '', factor: 1 },
    mm('radius_m', 'Radius'),
    mm('spacing_m', 'Spacing of the coils'),
    { key: 'turns_second_coil', label: 'Second coil’s turns, if others', unit: '', factor: 1, optional: true },
    mm('radius_second_coil_m', 'Second coil’s radius, if another', true),
  ],
  constant: [{ key: 'constant_T_per_A', label: 'Coil constant', unit: 'µT/A', factor: 1e6 }],
};

/** Fields of each kind of magnet description. */
export const MAGNET_FIELDS: Readonly<Record<MagnetKind, readonly RigField[]>> = {
  none: [],
  cylinder: [
    { key: 'mass_kg', label: 'Mass', unit: 'g', factor: 1e3 },
    mm('length_m', 'Length'),
    mm('diameter_m', 'Diameter'),
  ],
  bar: [
    { key: 'mass_kg', label: 'Mass', unit: 'g', factor: 1e3 },
    mm('length_m', 'Length'),
    mm('width_m', 'Width across, horizontal'),
  ],
  inertia: [
    { key: 'inertia_kg_m2', label: 'Moment of inertia about the fibre', unit: 'g cm²', factor: 1e7 },
    mm('length_m', 'Length, for the mean of the coil field', true),
  ],
};

/** The current meter: each of its numbers is an uncertainty itself, or a step. */
export const METER_FIELDS: readonly RigField[] = [
  { key: 'u_gain', label: 'Standard uncertainty of its scale', unit: '%', factor: 100, optional: true, ...alone() },
  { key: 'u_zero_A', label: 'Standard uncertainty of its zero', unit: 'mA', factor: 1e3, optional: true, ...alone() },
  { key: 'resolution_A', label: 'Step of its last digit', unit: 'mA', factor: 1e3, optional: true, ...alone() },
];

function alone() {
  return { alone: true, zero: true } as const;
}

/** Which way a coil is described. */
export function coilKind(coil: Coil | undefined): CoilKind {
  return coil === undefined ? 'none' : 'constant_T_per_A' in coil ? 'constant' : 'dimensions';
}

/** Which way a magnet is described. */
export function magnetKind(magnet: Magnet | undefined): MagnetKind {
  return magnet === undefined ? 'none' : 'shape' in magnet ? magnet.shape : 'inertia';
}

/**
 * A part of the rig from what the form holds: complete, or null where a needed field is still empty. Empty optional fields and
 * uncertainties are left out of the session.
 */
export function partOf(
  fields: readonly RigField[],
  values: Readonly<Record<string, number | null>>,
  fixed: Readonly<Record<string, string>> = {},
): Record<string, number | string> | null {
  const part: Record<string, number | string> = { ...fixed };
  for (const { key, optional, alone } of fields) {
    const value = values[key] ?? null;
    const u = values[`u_${key}`] ?? null;
    if (value === null) {
      if (!optional) return null;
      continue;
    }
    part[key] = value;
    if (u !== null && !alone) part[`u_${key}`] = u;
  }
  return part;
}

/** What a part holds as the form's values. */
export function valuesOf(part: object | undefined): Record<string, number | null> {
  const numbers = Object.entries(part ?? {}).filter((entry): entry is [string, number] => typeof entry[1] === 'number');
  return Object.fromEntries(numbers);
}

/** A session with one part of the rig replaced; undefined takes it away, and an empty apparatus with it. */
export function withPart(
  session: Session,
  name: 'coil' | 'magnet' | 'fibre' | 'meter',
  part: object | undefined,
): Session {
  const { [name]: _before, ...others } = session.apparatus ?? {};
  const apparatus = (part === undefined ? others : { ...others, [name]: part }) as Apparatus;
  const { apparatus: _old, ...rest } = session;
  return Object.keys(apparatus).length === 0 ? rest : { ...rest, apparatus };
}

/** A session with another place, or none. */
export function withPlace(session: Session, place: Place | undefined): Session {
  const { place: _old, ...rest } = session;
  return place === undefined ? rest : { ...rest, place };
}
