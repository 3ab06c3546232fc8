/** Bands of Gaia. */
export type GaiaBand = 'G' | 'BP' | 'RP';

/** Intrinsic BP-RP for which the coefficients hold, mag. */
export const GAIA_COLOUR_RANGE: readonly [number, number] = [-0.06, 2.5];
/** Extinction at 550 nm for which they hold, mag. */
export const GAIA_A0_RANGE: readonly [number, number] = [0, 5];

/** 1, C, C^2, C^3, A0, A0^2, C A0 with C the intrinsic BP-RP. */
const TERMS: Readonly<Record<GaiaBand, readonly number[]>> = {
  G: [0.9761, -0.1704, 0.0086, 0.0011, -0.0438, 0.0013, 0.0099],
  BP: [1.1517, -0.0871, -0.0333, 0.0173, -0.023, 0.0006, 0.0043],
  RP: [0.6104, -0.017, -0.0026, -0.0017, -0.0078, 0.00005, 0.0006],
};

/**
 * Extinction in a Gaia band in units of A0, the extinction at 550 nm, for a star of given colour.
 *
 * The bands are so wide that what a star loses in them depends on its colour and on the extinction itself: A(G)/A0 falls from 0.98 for an
 * A0 star to 0.62 for an M4 star, where bandExtinction has one value for all.
 * @param band   G, BP or RP
 * @param colour intrinsic BP-RP, mag, -0.06 to 2.5
 * @param a0     mag, 0 to 5
 * @returns A(band)/A0; NaN outside the ranges
 * @example gaiaExtinctionRatio('G', 0.82, 0) // => 0.843
 * Source: Gaia Collaboration, Babusiaux et al. 2018, A&A 616, A10, Table 1 (law of Fitzpatrick & Massa 2007, R_V 3.1); from memory.
 * At the Sun's colour G and RP agree within 0.001 with the law of Fitzpatrick 1999 at the bands' pivot wavelengths, BP is 0.044 less.
 */
export function gaiaExtinctionRatio(band: GaiaBand, colour: number, a0: number): number {
  if (!(colour >= GAIA_COLOUR_RANGE[0] && colour <= GAIA_COLOUR_RANGE[1])) return Number.NaN;
  if (!(a0 >= GAIA_A0_RANGE[0] && a0 <= GAIA_A0_RANGE[1])) return Number.NaN;
  const c = TERMS[band];
  return c[0] + colour * (c[1] + colour * (c[2] + colour * c[3])) + a0 * (c[4] + a0 * c[5] + colour * c[6]);
}

/**
 * Intrinsic BP-RP of a reddened star by the same coefficients, which are held at their limits for stars beyond them.
 * @param observed BP-RP, mag
 * @param a0       mag
 * @returns mag
 */
export function intrinsicGaiaColour(observed: number, a0: number): number {
  let colour = observed;
  // A0 times the slope of the coefficients stays under 0.7, so this closes in; the count is enough for rounding error.
  for (let k = 0; k < 100; k++) {
    const held = heldGaiaColour(colour);
    const next = observed - a0 * (gaiaExtinctionRatio('BP', held, a0) - gaiaExtinctionRatio('RP', held, a0));
    if (Math.abs(next - colour) < 1e-12) return next;
    colour = next;
  }
  return colour;
}

/** A colour held inside the range of the coefficients. */
export function heldGaiaColour(colour: number): number {
  return Math.min(Math.max(colour, GAIA_COLOUR_RANGE[0]), GAIA_COLOUR_RANGE[1]);
}
