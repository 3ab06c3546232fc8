import type { ColourName } from '../../quantity/band';

/** A published or composed relation of colour and effective temperature. */
export interface TemperatureScale {
  readonly name: string;
  /** For which stars. */
  readonly stars: string;
  /** What the authors say of its accuracy, or what was measured here. */
  readonly accuracy: string;
  readonly source: string;
  /** Colours it is made for; 'any' when it knows all pairs of bands. */
  readonly colours: readonly ColourName[] | 'any';
  /** [Fe/H] for which it holds, dex. Scales without a term hold for solar metallicity and do not look at it. */
  readonly metallicities: readonly [number, number] | null;
  /**
   * The relation for one gravity and metallicity.
   * @throws TypeError when the scale does not know the colour
   */
  relation(colour: ColourName, metallicity: number, logGravity: number): ColourRelation;
}

/** One colour against temperature. */
export interface ColourRelation {
  /** Least and greatest colour, mag. */
  readonly range: readonly [number, number];
  /** K from mag; NaN outside the range. */
  temperature(colour: number): number;
  /** mag from K; NaN outside the range. */
  colour(temperature: number): number;
}
