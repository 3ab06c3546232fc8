/**
 * Rotation from equatorial (ICRS) to Galactic axes, row by row.
 * Source: The Hipparcos and Tycho Catalogues, ESA SP-1200 (1997), Vol. 1, Eq. 1.5.11 (from memory): the pole at
 * 192.85948, 27.12825 deg and the node at 32.93192 deg given there, carried to the last digit of a double.
 */
export const EQUATORIAL_TO_GALACTIC: readonly number[] = [
  -0.05487556041621537, -0.873437090234885, -0.4838350155487132, 0.4941094278755837, -0.4448296299600112,
  0.746982244497219, -0.8676661490190047, -0.1980763734312015, 0.4559837761750669,
];

/** Unit vector towards a place on the sky. @param out shape (3) */
export function directionInto(longitudeDeg: number, latitudeDeg: number, out: Float64Array): void {
  const l = (longitudeDeg * Math.PI) / 180;
  const b = (latitudeDeg * Math.PI) / 180;
  out[0] = Math.cos(b) * Math.cos(l);
  out[1] = Math.cos(b) * Math.sin(l);
  out[2] = Math.sin(b);
}

/** Galactic longitude and latitude of an equatorial place, deg. */
export function galacticOf(raDeg: number, decDeg: number): { l: number; b: number } {
  const v = new Float64Array(3);
  directionInto(raDeg, decDeg, v);
  const m = EQUATORIAL_TO_GALACTIC;
  const x = m[0] * v[0] + m[1] * v[1] + m[2] * v[2];
  const y = m[3] * v[0] + m[4] * v[1] + m[5] * v[2];
  const z = m[6] * v[0] + m[7] * v[1] + m[8] * v[2];
  const l = (Math.atan2(y, x) * 180) / Math.PI;
  return { l: l < 0 ? l + 360 : l, b: (Math.atan2(z, Math.hypot(x, y)) * 180) / Math.PI };
}

/** Equatorial (ICRS) place of a Galactic one, deg; right ascension 0 to 360. */
export function equatorialOf(lDeg: number, bDeg: number): { ra: number; dec: number } {
  const v = new Float64Array(3);
  const e = new Float64Array(3);
  directionInto(lDeg, bDeg, v);
  galacticToEquatorialInto(v, e);
  const ra = (Math.atan2(e[1], e[0]) * 180) / Math.PI;
  return { ra: ra < 0 ? ra + 360 : ra, dec: (Math.atan2(e[2], Math.hypot(e[0], e[1])) * 180) / Math.PI };
}

/** A Galactic vector in equatorial axes. @param out shape (3), not the input */
export function galacticToEquatorialInto(v: ArrayLike<number>, out: Float64Array): void {
  const m = EQUATORIAL_TO_GALACTIC;
  for (let k = 0; k < 3; k++) out[k] = m[k] * v[0] + m[3 + k] * v[1] + m[6 + k] * v[2];
}
