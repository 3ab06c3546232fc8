import { KMS_PER_AU_PER_YEAR, RADIANS_PER_DEGREE } from '../quantity/constants';

const RADIANS_PER_MAS = RADIANS_PER_DEGREE / 3.6e6;

/**
 * Moves one star along a straight line at constant velocity: the standard model, without light-time terms.
 * Source: The Hipparcos and Tycho Catalogues, ESA SP-1200 (1997), Vol. 1, Sect. 1.5.5; Butkevich & Lindegren 2014, A&A 570,
 * A62 (both from memory).
 * @param star shape (6), changed in place: right ascension deg, declination deg, parallax mas, proper motion in right
 *   ascension times cos(declination) and in declination mas/yr, radial velocity km/s. Without a positive parallax or without
 *   a radial velocity the radial motion is taken as zero; without a proper motion nothing changes.
 * @param years Julian years
 */
export function moveStar(star: Float64Array, years: number): void {
  const pmRa = star[3] * RADIANS_PER_MAS;
  const pmDec = star[4] * RADIANS_PER_MAS;
  if (Number.isNaN(pmRa) || Number.isNaN(pmDec)) return;
  const ra = star[0] * RADIANS_PER_DEGREE;
  const dec = star[1] * RADIANS_PER_DEGREE;
  const [ca, sa, cd, sd] = [Math.cos(ra), Math.sin(ra), Math.cos(dec), Math.sin(dec)];
  const known = star[2] > 0 && Number.isFinite(star[5]);
  const radial = known ? ((star[5] * star[2]) / KMS_PER_AU_PER_YEAR) * RADIANS_PER_MAS : 0;
  const mx = -sa * pmRa - ca * sd * pmDec;
  const my = ca * pmRa - sa * sd * pmDec;
  const mz = cd * pmDec;
  const mu2 = pmRa * pmRa + pmDec * pmDec;
  const stretch = 1 + radial * years;
  const f = 1 / Math.sqrt(stretch * stretch + mu2 * years * years);
  const ux = (ca * cd * stretch + mx * years) * f;
  const uy = (sa * cd * stretch + my * years) * f;
  const uz = (sd * stretch + mz * years) * f;
  const f3 = f * f * f;
  const vx = (mx * stretch - ca * cd * mu2 * years) * f3;
  const vy = (my * stretch - sa * cd * mu2 * years) * f3;
  const vz = (mz * stretch - sd * mu2 * years) * f3;
  const flat = Math.hypot(ux, uy);
  // At a pole the right ascension is free: keep the one it had, so that the axes stay defined.
  const c = flat > 0 ? ux / flat : ca;
  const s = flat > 0 ? uy / flat : sa;
  const degrees = Math.atan2(s, c) / RADIANS_PER_DEGREE;
  star[0] = degrees < 0 ? degrees + 360 : degrees;
  star[1] = Math.atan2(uz, flat) / RADIANS_PER_DEGREE;
  star[3] = (-s * vx + c * vy) / RADIANS_PER_MAS;
  star[4] = (-uz * (c * vx + s * vy) + flat * vz) / RADIANS_PER_MAS;
  if (!known) return;
  const parallax = star[2] * f;
  star[5] = (((radial + (mu2 + radial * radial) * years) * f * f) / (parallax * RADIANS_PER_MAS)) * KMS_PER_AU_PER_YEAR;
  star[2] = parallax;
}
