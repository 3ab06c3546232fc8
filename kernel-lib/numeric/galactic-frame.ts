/**
 * Rotation from equatorial (ICRS) to Galactic axes, row by row.
 * Source: The Hipparcos and Tycho Catalogues, ESA SP-1200 (1997), Vol. 1, Eq. 1.5.11 (from memory; agrees with the pole at
 * 192.85948, 27.12825 deg and the node at 32.93192 deg given there).
 */
export const EQUATORIAL_TO_GALACTIC: readonly number[] = [
  -0.0548755604, -0.8734370902, -0.4838350155, 0.4941094279, -0.44482963, 0.7469822445, -0.867666149, -0.1980763734,
  0.4559837762,
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
  return { l: l < 0 ? l + 360 : l, b: (Math.asin(z) * 180) / Math.PI };
}

/** A Galactic vector in equatorial axes. @param out shape (3), not the input */
export function galacticToEquatorialInto(v: ArrayLike<number>, out: Float64Array): void {
  const m = EQUATORIAL_TO_GALACTIC;
  for (let k = 0; k < 3; k++) out[k] = m[k] * v[0] + m[3 + k] * v[1] + m[6 + k] * v[2];
}
