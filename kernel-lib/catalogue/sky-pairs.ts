/** Places and errors of one side. */
export interface SkyPlaces {
  readonly ra: Float64Array;
  readonly dec: Float64Array;
  /** Errors along right ascension (times cos declination) and declination, mas. */
  readonly errors: readonly [Float64Array, Float64Array] | null;
  readonly missing: number;
}

/** Pairs in the order of the left rows. `right` is -1 and `separation` NaN for a left row kept without a match. */
export interface Pairs {
  readonly left: Int32Array;
  readonly right: Int32Array;
  /** arcsec */
  readonly separation: Float64Array;
  readonly count: number;
  readonly matched: number;
}

/** Squared distance of a pair in sigmas along both axes; NaN without errors. */
export function sigmaDistance2(
  left: SkyPlaces,
  right: SkyPlaces,
  i: number,
  j: number,
  separationArcsec: number,
): number {
  if (!left.errors || !right.errors) return Number.NaN;
  const va = left.errors[0][i] ** 2 + right.errors[0][j] ** 2;
  const vd = left.errors[1][i] ** 2 + right.errors[1][j] ** 2;
  if (va === vd) return (separationArcsec * 1000) ** 2 / va;
  // Direction of the pair as seen from the left row; true at the poles too.
  const turn = ((right.ra[j] - left.ra[i]) * Math.PI) / 180;
  const d1 = (left.dec[i] * Math.PI) / 180;
  const d2 = (right.dec[j] * Math.PI) / 180;
  const east = Math.cos(d2) * Math.sin(turn);
  const half = Math.sin(turn / 2);
  const north = Math.sin(d2 - d1) + 2 * Math.sin(d1) * Math.cos(d2) * half * half;
  const length2 = east * east + north * north;
  if (length2 === 0) return va > 0 && vd > 0 ? 0 : Number.NaN;
  return ((separationArcsec * 1000) ** 2 * ((east * east) / va + (north * north) / vd)) / length2;
}
