import type { ThetaRelation } from './theta-relation';

/**
 * Infrared flux method for giants, F0 to K5, [Fe/H] -3 to 0.5: one relation on the blue side of 0.75 mag, one on the red.
 * Source: Alonso, Arribas & Martinez-Roger 1999, A&AS 140, 261, Table 2, equations 3 and 4. From memory; the two agree within 15 K where they
 * overlap, and with Gonzalez Hernandez & Bonifacio 2009 within 0.03 mag of B-V from 4000 to 6500 K.
 */
export const ALONSO_1999_BLUE: ThetaRelation = {
  colour: 'B-V',
  range: [0.2, 0.8],
  scatter: 167,
  b: [0.5716, 0.5404, -0.06126],
  m: [-0.01777, -0.007969, -0.04862],
};
export const ALONSO_1999_RED: ThetaRelation = {
  colour: 'B-V',
  range: [0.7, 1.9],
  scatter: 96,
  b: [0.6177, 0.4354, -0.004025],
  m: [-0.1127, -0.01385, 0.05204],
};

/** U-V on the blue side of 1.3 mag, and on the red. Same source, equations 1 and 2, from memory. */
export const ALONSO_1999_UV_BLUE: ThetaRelation = {
  colour: 'U-V',
  range: [0.4, 1.2],
  scatter: 164,
  b: [0.6388, 0.4065, -0.1117],
  m: [-0.07783, -0.012, -0.002308],
};
export const ALONSO_1999_UV_RED: ThetaRelation = {
  colour: 'U-V',
  range: [1.5, 3.5],
  scatter: 80,
  b: [0.8323, 0.09374, 0.01184],
  m: [-0.1392, -0.01944, 0.02351],
};

/**
 * Bolometric correction of giants in V, mag. The two equations overlap from log Teff 3.65 to 3.67 and are blended there.
 * Source: same paper, equations 17 (log Teff 3.50 to 3.67) and 18 (3.65 to 3.96), from memory. Zero point of the paper: -0.12 for the Sun with
 * M_bol 4.75.
 */
export function alonsoCorrection(logTeff: number, metallicity: number): number {
  const x = logTeff - 3.52;
  const f = metallicity;
  const w = Math.min(1, Math.max(0, (logTeff - 3.65) / 0.02));
  const cool = w < 1 ? -0.05531 / x - 0.6177 + 4.42 * x - 2.669 * x * x + f * (0.6943 * x - 0.1071 - 0.008612 * f) : 0;
  const warm =
    w > 0 ? -0.0993 / x + 0.02887 + 2.275 * x - 4.425 * x * x + f * (0.3505 * x - 0.05558 - 0.005375 * f) : 0;
  const smooth = w * w * w * (10 + w * (6 * w - 15));
  return (1 - smooth) * cool + smooth * warm;
}
