/**
 * Intrinsic B-V and U-B of supergiants (class Iab), B0 to K3.
 * Source: Schmidt-Kaler 1982, Landolt-Boernstein VI/2b, section 4.1.2.1; from memory, to 0.03 mag.
 */
// biome-ignore format: one spectral type a line
export const SUPERGIANT_COLOURS: readonly (readonly [string, number, number])[] = [
  ['B0', -0.23, -1.06],
  ['B1', -0.19, -1],
  ['B2', -0.17, -0.93],
  ['B3', -0.13, -0.83],
  ['B5', -0.1, -0.72],
  ['B8', -0.03, -0.55],
  ['A0', -0.01, -0.38],
  ['A2', 0.03, -0.25],
  ['A5', 0.09, -0.08],
  ['F0', 0.17, 0.15],
  ['F2', 0.23, 0.18],
  ['F5', 0.32, 0.27],
  ['F8', 0.56, 0.41],
  ['G0', 0.76, 0.52],
  ['G2', 0.87, 0.63],
  ['G5', 1.02, 0.83],
  ['G8', 1.14, 1.07],
  ['K0', 1.25, 1.17],
  ['K2', 1.36, 1.32],
  ['K3', 1.46, 1.6],
];
