import type { Band } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { compositeLight } from './composite/composite-light';
import { bandCorrection, giantShare } from './light-table';

/** Options of `bolometricCorrection`. */
export interface BolometricCorrectionOptions {
  /** Default `V`. */
  readonly band?: Band;
  /** Name of a scale. Default `composite`. */
  readonly scale?: string;
  /** [Fe/H], dex. Default 0. */
  readonly metallicity?: number | ArrayLike<number>;
  /** log10 of cm/s2. Default: dwarfs. */
  readonly logGravity?: number | ArrayLike<number>;
}

/** Bolometric correction: bolometric less band magnitude, mag. */
export function bolometricCorrection(temperature: number, options?: BolometricCorrectionOptions): number;
export function bolometricCorrection(
  temperature: ArrayLike<number>,
  options?: BolometricCorrectionOptions,
): Float64Array;
export function bolometricCorrection(
  temperature: number | ArrayLike<number>,
  options: BolometricCorrectionOptions = {},
): number | Float64Array {
  checkOptions('bolometricCorrection', options, ['band', 'scale', 'metallicity', 'logGravity']);
  const { band = 'V', metallicity = 0, logGravity = 5 } = options;
  const table = compositeLight()[band];
  const at = (T: number, i: number) => {
    const t = Math.log10(T);
    const g = typeof logGravity === 'number' ? logGravity : logGravity[i];
    const f = typeof metallicity === 'number' ? metallicity : metallicity[i];
    return bandCorrection(table, t, giantShare(t, g), f);
  };
  if (typeof temperature === 'number') return at(temperature, 0);
  const out = new Float64Array(temperature.length);
  for (let i = 0; i < out.length; i++) out[i] = at(temperature[i], i);
  return out;
}
