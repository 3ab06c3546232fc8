/** Initial mass functions by name. */
export type InitialMassFunction = 'salpeter1955' | 'kroupa2001' | 'chabrier2003';

export const INITIAL_MASS_FUNCTIONS: readonly InitialMassFunction[] = ['salpeter1955', 'kroupa2001', 'chabrier2003'];

/**
 * Initial mass function: relative number of stars a unit of mass, not normalised.
 * @param name which
 * @param mass solar masses, positive
 * @example initialMassFunction('salpeter1955', 1) // => 1
 * Sources: Salpeter 1955, ApJ 121, 161 (slope 2.35); Kroupa 2001, MNRAS 322, 231, Eq. 2 (0.3 below 0.08, 1.3 to 0.5, 2.3 above);
 * Chabrier 2003, PASP 115, 763, Table 1 (single stars: lognormal about 0.079 with deviation 0.69 dex below 1, slope 2.3 above).
 */
export function initialMassFunction(name: InitialMassFunction, mass: number): number {
  if (!(mass > 0)) return Number.NaN;
  if (name === 'salpeter1955') return mass ** -2.35;
  if (name === 'kroupa2001') {
    if (mass >= 0.5) return mass ** -2.3;
    const atHalf = 0.5 ** -2.3 / 0.5 ** -1.3;
    if (mass >= 0.08) return atHalf * mass ** -1.3;
    return ((atHalf * 0.08 ** -1.3) / 0.08 ** -0.3) * mass ** -0.3;
  }
  const lognormal = (m: number) => Math.exp(-0.5 * ((Math.log10(m) - Math.log10(0.079)) / 0.69) ** 2) / m;
  return mass < 1 ? lognormal(mass) : lognormal(1) * mass ** -2.3;
}
