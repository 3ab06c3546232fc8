import type { ColourName } from '../../quantity/band';

/** Colour and temperature tied by 5040 K / T = b0 + b1 C + b2 C^2 + m1 [Fe/H] + m2 [Fe/H]^2 + m3 C [Fe/H]. */
export interface ThetaRelation {
  readonly colour: ColourName;
  /** Colours for which it was fitted, mag. */
  readonly range: readonly [number, number];
  /** Scatter of the stars about it, K. */
  readonly scatter: number;
  readonly b: readonly [number, number, number];
  readonly m: readonly [number, number, number];
}

/** K; no check of the range. */
export function thetaTemperature(relation: ThetaRelation, colour: number, metallicity: number): number {
  const { b, m } = relation;
  return 5040 / (b[0] + colour * (b[1] + b[2] * colour) + metallicity * (m[0] + m[1] * metallicity + m[2] * colour));
}

/** mag, on the branch where redder is cooler; NaN where there is none; no check of the range. */
export function thetaColour(relation: ThetaRelation, temperature: number, metallicity: number): number {
  const { b, m } = relation;
  const c0 = b[0] + metallicity * (m[0] + m[1] * metallicity) - 5040 / temperature;
  const c1 = b[1] + m[2] * metallicity;
  const root = Math.sqrt(c1 * c1 - 4 * b[2] * c0);
  return (-2 * c0) / (c1 + root);
}
