import geomagnetism from 'geomagnetism';
import type { Place } from './apparatus.ts';

/** The field that the World Magnetic Model expects; SI units and degrees. */
export interface ModelField {
  readonly model: string;
  readonly horizontal_T: number;
  readonly vertical_T: number;
  readonly declination_deg: number;
  readonly inclination_deg: number;
}

/** Either the field, or the reason why there is none. */
export type FieldOutcome =
  | { readonly ok: true; readonly field: ModelField }
  | { readonly ok: false; readonly reason: 'date' | 'place' };

/** One-sigma error of the horizontal component that the model's makers state for WMM2025, worldwide and outdoors. */
export const u_modelHorizontal_T = 133e-9;

/** Dates between which the coefficients in the package hold. */
const from = '2014-12-15';
const until = '2029-12-31';
/** Beyond its release calendar the package refuses dates that WMM2025 is still valid for, unless told otherwise. */
const packageEnd = '2029-11-13';

/**
 * Horizontal and vertical field at a place and date. Height is above the WGS84 ellipsoid (the package's own documentation says
 * sea level; the difference is below 3 nT).
 */
export function expectedField(place: Place): FieldOutcome {
  const date = new Date(`${place.date}T12:00:00Z`);
  if (!Number.isFinite(date.getTime()) || place.date < from || place.date > until) return { ok: false, reason: 'date' };
  const inRange =
    Math.abs(place.latitude_deg) <= 90 && Number.isFinite(place.longitude_deg) && Number.isFinite(place.height_m);
  if (!inRange) return { ok: false, reason: 'place' };
  const late = place.date >= packageEnd;
  // The package would complain on the console about a late date: it is asked for its last one and carried on by its own yearly change.
  const model = geomagnetism.model(late ? new Date(`${packageEnd}T00:00:00Z`) : date);
  const here = [place.latitude_deg, place.longitude_deg, place.height_m / 1000];
  const point = model.point(here);
  const vector = late ? carriedOn(point, here, date) : point;
  const { x, y, z } = vector;
  if (![x, y, z].every(Number.isFinite)) return { ok: false, reason: 'place' };
  const horizontal = Math.hypot(x, y);
  const degree = Math.PI / 180;
  return {
    ok: true,
    field: {
      model: model.name,
      horizontal_T: horizontal * 1e-9,
      vertical_T: z * 1e-9,
      declination_deg: Math.atan2(y, x) / degree,
      inclination_deg: Math.atan2(z, horizontal) / degree,
    },
  };
}

interface Vector {
  readonly x: number;
  readonly y: number;
  readonly z: number;
}

/** The model is linear in time: its field some years later, from two dates that the package accepts. */
function carriedOn(last: Vector, here: number[], date: Date): Vector {
  const lastDate = new Date(`${packageEnd}T00:00:00Z`);
  const earlierDate = new Date(lastDate.getTime() - 365 * 86_400_000);
  const earlier = geomagnetism.model(earlierDate).point(here);
  const years = (date.getTime() - lastDate.getTime()) / (365 * 86_400_000);
  const on = (axis: 'x' | 'y' | 'z') => last[axis] + (last[axis] - earlier[axis]) * years;
  return { x: on('x'), y: on('y'), z: on('z') };
}
