import { galacticToEquatorialInto } from '../numeric/galactic-frame';
import { KMS_PER_AU_PER_YEAR, RADIANS_PER_DEGREE } from '../quantity/constants';
import type { RandomStream } from '../quantity/random';

/** Motion of a star as an observer sees it. Reused: read it before the next call. */
export interface SeenMotion {
  /** mas/yr; the first includes cos(declination). */
  properMotionRa: number;
  properMotionDec: number;
  /** km/s */
  radialVelocity: number;
}

/**
 * A velocity in space (km/s, equatorial axes, relative to the Sun) as seen from the Sun at a place and distance.
 * @param out filled
 */
export function seenMotionInto(
  velocity: ArrayLike<number>,
  raDeg: number,
  decDeg: number,
  distance: number,
  out: SeenMotion,
): void {
  const a = raDeg * RADIANS_PER_DEGREE;
  const d = decDeg * RADIANS_PER_DEGREE;
  const [x, y, z] = [velocity[0], velocity[1], velocity[2]];
  const perMas = 1000 / (KMS_PER_AU_PER_YEAR * distance);
  out.properMotionRa = (-Math.sin(a) * x + Math.cos(a) * y) * perMas;
  out.properMotionDec = (-Math.sin(d) * Math.cos(a) * x - Math.sin(d) * Math.sin(a) * y + Math.cos(d) * z) * perMas;
  out.radialVelocity = Math.cos(d) * Math.cos(a) * x + Math.cos(d) * Math.sin(a) * y + Math.sin(d) * z;
}

/** The velocity in space (km/s, equatorial axes) behind a motion seen at a place and distance. */
export function spaceVelocity(motion: SeenMotion, raDeg: number, decDeg: number, distance: number): Float64Array {
  const a = raDeg * RADIANS_PER_DEGREE;
  const d = decDeg * RADIANS_PER_DEGREE;
  const east = (motion.properMotionRa * KMS_PER_AU_PER_YEAR * distance) / 1000;
  const north = (motion.properMotionDec * KMS_PER_AU_PER_YEAR * distance) / 1000;
  const r = motion.radialVelocity;
  return Float64Array.of(
    -Math.sin(a) * east - Math.sin(d) * Math.cos(a) * north + Math.cos(d) * Math.cos(a) * r,
    Math.cos(a) * east - Math.sin(d) * Math.sin(a) * north + Math.cos(d) * Math.sin(a) * r,
    Math.cos(d) * north + Math.sin(d) * r,
  );
}

/** The Sun against the local standard of rest, km/s towards the Galactic centre, rotation and pole. Schoenrich, Binney & Dehnen 2010. */
const SOLAR_MOTION = [11.1, 12.24, 7.25];
/** Oort's constants, km/s/kpc. Source: Bovy 2017, MNRAS 468, L63. */
const OORT_A = 15.3;
const OORT_B = -11.9;

/**
 * Velocity of a field star of the disc relative to the Sun, km/s, equatorial axes: Galactic shear, the Sun's own motion, and a
 * random motion that grows with age.
 * @param age Gyr; deviations (35, 24, 18) km/s x (age / 5)^0.33, our own round figures for the old thin disc
 * @param out shape (3)
 */
export function fieldVelocityInto(
  longitudeDeg: number,
  distance: number,
  age: number,
  stream: RandomStream,
  scratch: Float64Array,
  out: Float64Array,
): void {
  const l = longitudeDeg * RADIANS_PER_DEGREE;
  const kpc = distance / 1000;
  const heat = (Math.max(age, 0.05) / 5) ** 0.33;
  // Shear: along the line of sight A d sin 2l; across it d (A cos 2l + B), towards growing longitude.
  const along = OORT_A * kpc * Math.sin(2 * l);
  const across = kpc * (OORT_A * Math.cos(2 * l) + OORT_B);
  scratch[0] = along * Math.cos(l) - across * Math.sin(l) - SOLAR_MOTION[0] + 35 * heat * stream.normal();
  scratch[1] = along * Math.sin(l) + across * Math.cos(l) - SOLAR_MOTION[1] - 8 * heat + 24 * heat * stream.normal();
  scratch[2] = -SOLAR_MOTION[2] + 18 * heat * stream.normal();
  galacticToEquatorialInto(scratch, out);
}
