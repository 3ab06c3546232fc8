import type { ColourName } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { DWARF_GRAVITY } from './absolute-magnitudes';
import { entry, type OneOrEach, overEach } from './each';
import type { ColourRelation } from './scales/temperature-scale';
import { temperatureScale } from './scales/temperature-scales';

/** Options of `temperatureFromColour` and `colourFromTemperature`. */
export interface ColourTemperatureOptions {
  /** Two bands joined by a hyphen, in a catalogue's or a paper's order. Default `B-V`. */
  readonly colour?: ColourName;
  /** Name of a scale, see photometricScales(). Default `composite`. */
  readonly scale?: string;
  /** [Fe/H], dex, one for all or one a star. Default 0. Scales without metallicity terms do not look at it. */
  readonly metallicity?: OneOrEach;
  /** log10 of surface gravity, cm/s2, one for all or one a star; only the composite scale looks at it. Default: dwarfs. */
  readonly logGravity?: OneOrEach;
}

const OPTIONS = ['colour', 'scale', 'metallicity', 'logGravity'];

/**
 * Effective temperature from colour.
 * @param value   colour without reddening, mag, a number or shape (n)
 * @param options see ColourTemperatureOptions
 * @returns K, a number or shape (n); NaN where the colour is missing or outside the scale's range. A colour that turns back, as U-B does,
 *   is read on the branch that holds the Sun.
 * @throws TypeError for an unknown option, scale or colour or a value that is no number, RangeError when lengths differ
 * @example temperatureFromColour(0.65) // => 5756
 * @example temperatureFromColour(stars.numbers('colour.B-V'), { scale: 'casagrande-2010', metallicity: -0.5 })
 * Sources: photometricScales(). The composite gives back what colourFromTemperature and absoluteMagnitudes made, to 1e-6.
 */
export function temperatureFromColour(value: number, options?: ColourTemperatureOptions): number;
export function temperatureFromColour(value: ArrayLike<number>, options?: ColourTemperatureOptions): Float64Array;
export function temperatureFromColour(value: OneOrEach, options?: ColourTemperatureOptions): number | Float64Array;
export function temperatureFromColour(value: OneOrEach, options: ColourTemperatureOptions = {}): number | Float64Array {
  return convert('temperatureFromColour', 'value', value, options, (relation, colour) => relation.temperature(colour));
}

/**
 * Colour from effective temperature.
 * @param temperature K, a number or shape (n)
 * @param options     see ColourTemperatureOptions
 * @returns mag, a number or shape (n); NaN where the temperature is missing or outside the scale's range
 * @throws TypeError for an unknown option, scale or colour or a value that is no number, RangeError when lengths differ
 * @example colourFromTemperature(5772, { colour: 'BP-RP' }) // => 0.82
 * Sources: photometricScales().
 */
export function colourFromTemperature(temperature: number, options?: ColourTemperatureOptions): number;
export function colourFromTemperature(temperature: ArrayLike<number>, options?: ColourTemperatureOptions): Float64Array;
export function colourFromTemperature(
  temperature: OneOrEach,
  options?: ColourTemperatureOptions,
): number | Float64Array;
export function colourFromTemperature(
  temperature: OneOrEach,
  options: ColourTemperatureOptions = {},
): number | Float64Array {
  return convert('colourFromTemperature', 'temperature', temperature, options, (relation, t) => relation.colour(t));
}

function convert(
  caller: string,
  name: string,
  value: OneOrEach,
  options: ColourTemperatureOptions,
  apply: (relation: ColourRelation, x: number) => number,
): number | Float64Array {
  checkOptions(caller, options, OPTIONS);
  const { colour = 'B-V', scale = 'composite', metallicity = 0, logGravity = DWARF_GRAVITY } = options;
  const found = temperatureScale(caller, scale, colour);
  let relation: ColourRelation | undefined;
  let f = Number.NaN;
  let g = Number.NaN;
  return overEach(caller, name, value, { metallicity, logGravity }, (x, i) => {
    // Relations are made anew only when gravity or metallicity changes from star to star.
    const nextF = entry(metallicity, i);
    const nextG = entry(logGravity, i);
    if (relation === undefined || nextF !== f || nextG !== g) {
      f = nextF;
      g = nextG;
      relation = found.relation(colour, f, g);
    }
    return apply(relation, x);
  });
}
