import { at } from './sweep-model.ts';

/**
 * The coordinates in which a sweep is fitted. Frequencies show slope · along + fibre and directions slope · across + fibre · twist
 * long before they show either part alone, so that in the physical parameters the sum of squares has a long bent valley, which a
 * fit walks down in hundreds of steps; in these sums the valley is nearly straight. Fibre, twist and zeros are the same in both.
 * Where the across component is held, it is the same in both as well.
 */
export interface FitCoordinates {
  fromPhysical(p: Float64Array): Float64Array;
  toPhysical(v: Float64Array): Float64Array;
  /** Turns derivatives by the physical parameters, one column each, into those by the coordinates, in place. */
  turnColumns(p: Float64Array, columns: readonly Float64Array[]): void;
  /** Covariance of the physical parameters from that of the coordinates, row by row. */
  physicalCovariance(p: Float64Array, covariance: Float64Array): Float64Array;
}

/** Coordinates for a model whose across component is held or free. */
export function fitCoordinates(acrossHeld: boolean): FitCoordinates {
  const fromPhysical = (p: Float64Array) => {
    const v = p.slice();
    v[at.along] = p[at.slope]! * p[at.along]! + p[at.fibre]!;
    if (!acrossHeld) v[at.across] = p[at.slope]! * p[at.across]! + p[at.fibre]! * p[at.twist]!;
    return v;
  };
  const toPhysical = (v: Float64Array) => {
    const p = v.slice();
    p[at.along] = (v[at.along]! - v[at.fibre]!) / v[at.slope]!;
    if (!acrossHeld) p[at.across] = (v[at.across]! - v[at.fibre]! * v[at.twist]!) / v[at.slope]!;
    return p;
  };
  /** Derivatives of along and across by the coordinates slope, along, across, fibre, twist. */
  const derivatives = (p: Float64Array) => {
    const slope = p[at.slope]!;
    const along = [-p[at.along]! / slope, 1 / slope, 0, -1 / slope, 0];
    const across = acrossHeld
      ? [0, 0, 1, 0, 0]
      : [-p[at.across]! / slope, 0, 1 / slope, -p[at.twist]! / slope, -p[at.fibre]! / slope];
    return { along, across };
  };
  const turnColumns = (p: Float64Array, columns: readonly Float64Array[]) => {
    const { along, across } = derivatives(p);
    const [bySlope, byAlong, byAcross, byFibre, byTwist] = columns as [
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
    ];
    for (let i = 0; i < bySlope.length; i++) {
      const a = byAlong[i]!;
      const c = byAcross[i]!;
      bySlope[i] = bySlope[i]! + a * along[at.slope]! + c * across[at.slope]!;
      byAlong[i] = a * along[at.along]! + c * across[at.along]!;
      byAcross[i] = a * along[at.across]! + c * across[at.across]!;
      byFibre[i] = byFibre[i]! + a * along[at.fibre]! + c * across[at.fibre]!;
      byTwist[i] = byTwist[i]! + a * along[at.twist]! + c * across[at.twist]!;
    }
  };
  const physicalCovariance = (p: Float64Array, covariance: Float64Array) => {
    const n = p.length;
    const { along, across } = derivatives(p);
    const turn = Array.from({ length: n }, (_, row) => {
      const line = new Float64Array(n);
      if (row === at.along) line.set(along);
      else if (row === at.across) line.set(across);
      else line[row] = 1;
      return line;
    });
    const half = turn.map((line) =>
      Float64Array.from({ length: n }, (_, j) => {
        let sum = 0;
        for (let k = 0; k < n; k++) sum += line[k]! * covariance[k * n + j]!;
        return sum;
      }),
    );
    const out = new Float64Array(n * n);
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) {
        let sum = 0;
        for (let k = 0; k < n; k++) sum += half[i]![k]! * turn[j]![k]!;
        out[i * n + j] = sum;
      }
    }
    return out;
  };
  return { fromPhysical, toPhysical, turnColumns, physicalCovariance };
}
