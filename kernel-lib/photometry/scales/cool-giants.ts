/**
 * Temperature of cool giants from V-K, K. V-K 2.5 to 8 mag.
 * Source: van Belle et al. 1999, AJ 117, 521 (angular diameters); from memory. It gives 3920 K at V-K 3.85, the M0 giants of Ridgway et al.
 * 1980, ApJ 235, 126 (3895 K, from memory), and comes within 0.1 mag of the infrared flux method at 4250 K.
 */
export function vanBelleTemperature(vk: number): number {
  return 3030 + 4750 * 10 ** (-0.187 * vk);
}

/** Its inverse: V-K, mag. */
export function vanBelleColour(temperature: number): number {
  return Math.log10((temperature - 3030) / 4750) / -0.187;
}

/**
 * V-K of giants M5 to M7 as a function of log Teff, and straight on to 2500 K, mag.
 * Source: V-K 5.96 and 7.8 of types M5 and M7 (Bessell & Brett 1988) at their temperatures 3434 and 3126 K (Fluks et al. 1994, A&AS 105, 311); from
 * memory. Cooler giants have no colours in these sources; the line is there so that the tips of giant branches have a place, and V is
 * good to 0.5 mag there. Fluks et al. put M10 at 2500 K.
 */
export function coolestGiantColour(logTeff: number): number {
  return 7.8 + 45 * (3.495 - logTeff);
}

/** Bolometric correction in K from J-K of M giants, mag. Source: Bessell & Wood 1984, PASP 96, 247; from memory. */
export function bessellWoodCorrection(jk: number): number {
  return 0.6 + jk * (2.65 - 0.67 * jk);
}

/**
 * Intrinsic colours of giants G0 to M7: V-K, V-Ic, J-H, H-K.
 * Source: Bessell & Brett 1988, PASP 100, 1134, Table III, from memory. V-Ic of M6 and M7 continue the line M4-M5 in V-K.
 */
// biome-ignore format: one spectral type a line
export const GIANT_COLOURS: readonly (readonly [string, number, number, number, number])[] = [
  ['G8', 2.16, 0.94, 0.5, 0.085],
  ['K0', 2.31, 1, 0.54, 0.095],
  ['K1', 2.5, 1.08, 0.58, 0.1],
  ['K2', 2.7, 1.17, 0.63, 0.115],
  ['K3', 3, 1.36, 0.68, 0.14],
  ['K4', 3.26, 1.5, 0.73, 0.15],
  ['K5', 3.6, 1.63, 0.79, 0.165],
  ['M0', 3.85, 1.78, 0.83, 0.19],
  ['M1', 4.05, 1.9, 0.85, 0.205],
  ['M2', 4.3, 2.05, 0.87, 0.215],
  ['M3', 4.64, 2.25, 0.9, 0.235],
  ['M4', 5.1, 2.55, 0.93, 0.245],
  ['M5', 5.96, 3.05, 0.95, 0.285],
  ['M6', 6.84, 3.56, 0.96, 0.3],
  ['M7', 7.8, 4.12, 0.96, 0.31],
];
