import type { Band } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { DWARF_GRAVITY } from './absolute-magnitudes';
import { entry, type OneOrEach, overEach } from './each';
import { correctionScale } from './scales/correction-scales';

/** Options of `bolometricCorrection`. */
export interface BolometricCorrectionOptions {
  /** Default `V`. */
  readonly band?: Band;
  /** Name of a scale, see photometricScales(). Default `composite`. */
  readonly scale?: string;
  /** [Fe/H], dex, one for all or one a star. Default 0. Scales without metallicity terms do not look at it. */
  readonly metallicity?: OneOrEach;
  /** log10 of surface gravity, cm/s2, one for all or one a star; only the composite scale looks at it. Default: dwarfs. */
  readonly logGravity?: OneOrEach;
}

/**
 * Bolometric correction: what to add to a magnitude in a band to get the bolometric one.
 * @param temperature effective, K, a number or shape (n)
 * @param options     see BolometricCorrectionOptions
 * @returns mag, a number or shape (n); NaN where the temperature is missing or outside the scale's range
 * @throws TypeError for an unknown option, scale or band or a temperature that is no number, RangeError when lengths differ
 * @example bolometricCorrection(5772) // => -0.086
 * Sources: photometricScales(). The composite goes with M_bol 4.74 for the Sun (IAU 2015 Resolution B2).
 */
export function bolometricCorrection(temperature: number, options?: BolometricCorrectionOptions): number;
export function bolometricCorrection(
  temperature: ArrayLike<number>,
  options?: BolometricCorrectionOptions,
): Float64Array;
export function bolometricCorrection(
  temperature: OneOrEach,
  options?: BolometricCorrectionOptions,
): number | Float64Array;
export function bolometricCorrection(
  temperature: OneOrEach,
  options: BolometricCorrectionOptions = {},
): number | Float64Array {
  const caller = 'bolometricCorrection';
  checkOptions(caller, options, ['band', 'scale', 'metallicity', 'logGravity']);
  const { band = 'V', scale = 'composite', metallicity = 0, logGravity = DWARF_GRAVITY } = options;
  const { correction } = correctionScale(caller, scale, band);
  return overEach(caller, 'temperature', temperature, { metallicity, logGravity }, (t, i) =>
    correction(band, Math.log10(t), entry(metallicity, i), entry(logGravity, i)),
  );
}
