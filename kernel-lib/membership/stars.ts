/** The stars of a fit, in typed arrays; a row a star, only stars with everything the fit needs. */
export interface Stars {
  readonly count: number;
  /** Proper motion in right ascension (with cos of declination) and declination, mas/yr, and parallax, mas; shape (count, 3). */
  readonly values: Float64Array;
  /** Covariance of the errors, packed 00 01 02 11 12 22; shape (count, 6). */
  readonly covariance: Float64Array;
  /** False when parallax is left out: its place then holds 0 with variance 1 for every star and every component. */
  readonly useParallax: boolean;
  /** Class of error size of each star, 0 to classes - 1: faint stars mix otherwise than bright ones. Shape (count). */
  readonly errorClass: Uint8Array;
  readonly classes: number;
  /** Density of a component that is uniform over everything seen, per (mas/yr)^2 mas. */
  readonly uniformDensity: number;
  /** Robust centre (median) of the three values, shape (3). */
  readonly centre: Float64Array;
  /** Robust spread of the three values, the central 90 % read as a Gaussian, shape (3). */
  readonly spread: Float64Array;
  /** Spread of a uniform distribution over the central 98 %: not narrowed by a cluster that dominates. Shape (3). */
  readonly extent: Float64Array;
  /** Unit vectors east, north and away from us at each star, equatorial axes, where positions are used; shape (count, 9). */
  readonly basis: Float64Array | null;
  /** Radial velocities where any are used. */
  readonly radialVelocity: RadialVelocities | null;
}

/** Radial velocities of the stars, and what the field's look like. */
export interface RadialVelocities {
  /** km/s, NaN where unknown, shape (count) */
  readonly value: Float64Array;
  readonly error: Float64Array;
  /** Median and spread of all stars' velocities, km/s: the field is taken as a Gaussian of these. */
  readonly fieldMean: number;
  readonly fieldSpread: number;
}

/** The stars at the given rows. */
export function takeStars(stars: Stars, rows: Uint32Array): Stars {
  const n = rows.length;
  const values = new Float64Array(3 * n);
  const covariance = new Float64Array(6 * n);
  const errorClass = new Uint8Array(n);
  for (let i = 0; i < n; i++) {
    const r = rows[i];
    for (let d = 0; d < 3; d++) values[3 * i + d] = stars.values[3 * r + d];
    for (let d = 0; d < 6; d++) covariance[6 * i + d] = stars.covariance[6 * r + d];
    errorClass[i] = stars.errorClass[r];
  }
  const take = (a: Float64Array) => Float64Array.from(rows, (r) => a[r]);
  const { radialVelocity } = stars;
  let basis: Float64Array | null = null;
  if (stars.basis !== null) {
    basis = new Float64Array(9 * n);
    for (let i = 0; i < n; i++) for (let d = 0; d < 9; d++) basis[9 * i + d] = stars.basis[9 * rows[i] + d];
  }
  return {
    ...stars,
    count: n,
    values,
    covariance,
    errorClass,
    basis,
    radialVelocity: radialVelocity && {
      ...radialVelocity,
      value: take(radialVelocity.value),
      error: take(radialVelocity.error),
    },
  };
}
