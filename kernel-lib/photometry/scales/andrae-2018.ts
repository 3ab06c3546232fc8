import { polynomial } from '../../numeric/polynomial';

/** Temperatures for which the correction holds, K. */
export const ANDRAE_RANGE: readonly [number, number] = [3300, 8000];

/**
 * Bolometric correction in Gaia G of dwarfs, mag, for solar metallicity, 3300 to 8000 K.
 * Source: Andrae et al. 2018, A&A 616, A8, equation 7 and Table 4, from memory; set so that the Sun's is 0.06.
 */
export function andraeCorrection(temperature: number): number {
  const x = temperature - 5772;
  return temperature < 4000
    ? polynomial([1.749, 1.977e-3, 3.737e-7, -8.966e-11, -4.183e-14], x)
    : polynomial([6e-2, 6.731e-5, -6.647e-8, 2.859e-11, -7.197e-15], x);
}
