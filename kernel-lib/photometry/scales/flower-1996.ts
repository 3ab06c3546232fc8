import { polynomial } from '../../numeric/polynomial';

const MAIN = [
  3.979145106714099, -0.654992268598245, 1.740690042385095, -4.608815154057166, 6.792599779944473, -5.396909891322525,
  2.19297037652249, -0.359495739295671,
];
const SUPERGIANT = [
  4.012559732366214, -1.055043117465989, 2.133394538571825, -2.459769794654992, 1.349423943497744, -0.283942579112032,
];
const COOL = [-0.190537291496456e5, 0.155144866764412e5, -0.421278819301717e4, 0.381476328422343e3];
const WARM = [
  -0.370510203809015e5, 0.385672629965804e5, -0.150651486316025e5, 0.261724637119416e4, -0.170623810323864e3,
];
const HOT = [
  -0.118115450538963e6, 0.137145973583929e6, -0.636233812100225e5, 0.147412923562646e5, -0.170587278406872e4,
  0.78873172180499e2,
];

/** B-V for which the relations hold, mag. */
export const FLOWER_RANGE: readonly [number, number] = [-0.35, 1.7];

/** log Teff for which the bolometric correction holds. */
export const FLOWER_LOG_TEFF: readonly [number, number] = [3.55, 4.72];

/**
 * log Teff of main-sequence stars, subgiants and giants from B-V; no check of the range.
 * Source: Flower 1996, ApJ 469, 355, coefficients as corrected by Torres 2010, AJ 140, 1158, Table 2. From memory: they join within 0.025
 * mag where the pieces of the correction meet, and lie within 0.02 mag in B-V of the dwarf sequence from 5000 to 10000 K.
 */
export function flowerLogTeff(bv: number): number {
  return polynomial(MAIN, bv);
}

/** The same for supergiants. */
export function flowerSupergiantLogTeff(bv: number): number {
  return polynomial(SUPERGIANT, bv);
}

/**
 * Bolometric correction in V of stars of all luminosities, mag. Same source. Zero point: -0.080 at 5772 K, to go with M_bol 4.73 for the Sun
 * (Torres 2010). Pieces below log Teff 3.7, from 3.7 to 3.9 and above.
 */
export function flowerCorrection(logTeff: number): number {
  return polynomial(logTeff < 3.7 ? COOL : logTeff < 3.9 ? WARM : HOT, logTeff);
}

/** The same with the step of slope where the two cooler pieces meet rounded off over 0.015 dex to each side. */
export function smoothFlowerCorrection(logTeff: number): number {
  const u = Math.min(1, Math.max(0, (logTeff - 3.685) / 0.03));
  const warm = u * u * u * (10 + u * (6 * u - 15));
  return (1 - warm) * polynomial(COOL, logTeff) + warm * polynomial(WARM, logTeff);
}
