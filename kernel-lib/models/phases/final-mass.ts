/**
 * White-dwarf mass from initial mass, solar, with the end pieces carried on beyond the published 0.83 to 7.2.
 * Source: Cummings et al. 2018, ApJ 866, 21, Eqs 4-6 (MIST ages).
 */
export function extendedFinalMass(mass: number): number {
  if (mass < 2.85) return 0.08 * mass + 0.489;
  if (mass < 3.6) return 0.187 * mass + 0.184;
  return 0.107 * mass + 0.471;
}
