import { polynomial } from '../numeric/polynomial';

/** B-V for which Hp - V is given, mag. */
export const HIPPARCOS_RANGE: readonly [number, number] = [-0.35, 1.35];

const HP_V = [0.0072, 0.2964, -0.111, -0.0157];

/**
 * Hp - V from Johnson B-V, mag: how V comes from the Hipparcos magnitude.
 * @param bv B-V, mag, -0.35 to 1.35 (cooler stars part by luminosity: their Hp - V falls, to below 0 in M dwarfs)
 * @returns mag; NaN outside the range
 * @example hipparcosMinusV(0.65) // => 0.149
 * Source: Harmanec 1998, A&A 335, 173, without its term of 0.005 (U-B); from memory. Accuracy 0.02 mag.
 */
export function hipparcosMinusV(bv: number): number {
  return bv >= HIPPARCOS_RANGE[0] && bv <= HIPPARCOS_RANGE[1] ? polynomial(HP_V, bv) : Number.NaN;
}
