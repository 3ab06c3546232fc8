import { BAND_NAMES, type Band, type ColourName } from '../quantity/band';
import { checkOptions, describe } from '../quantity/options';
import { type BandExtinctionOptions, bandExtinction, colourExcessRatio } from './band-coefficients';
import { lawNamed } from './laws';

/** A measure of reddening: excess in a colour (`B-V`), extinction in a band (`A(V)`), or `A0`, the extinction at 550 nm. */
export type ReddeningMeasure = ColourName | `A(${Band})` | 'A0';

/** Options of `convertReddening`. */
export interface ConvertReddeningOptions extends BandExtinctionOptions {
  /** What the value is. */
  readonly from: ReddeningMeasure;
  /** What it is wanted as. */
  readonly to: ReddeningMeasure;
}

/**
 * One measure of reddening as another, exact within the law.
 * @param value mag
 * @param options from, to; rV: A(V)/E(B-V), 2 to 6 (default 3.1); law: default `CCM89`
 * @returns mag
 * @throws TypeError for an unknown measure, law or option, RangeError for rV out of range
 * @example convertReddening(0.1, { from: 'B-V', to: 'A(V)' }) // => 0.31
 * @example convertReddening(0.142, { from: 'BP-RP', to: 'B-V' }) // => 0.0996
 * Sources: see bandExtinction.
 */
export function convertReddening(value: number, options: ConvertReddeningOptions): number {
  const caller = 'convertReddening';
  checkOptions(caller, options, ['from', 'to', 'rV', 'law']);
  const { from, to, rV = 3.1, law = 'CCM89' } = options;
  return (value * perReddening(caller, to, { rV, law })) / perReddening(caller, from, { rV, law });
}

/** A measure for each magnitude of E(B-V). */
function perReddening(caller: string, measure: ReddeningMeasure, options: Required<BandExtinctionOptions>): number {
  if (measure === 'A0') return a0PerReddening(caller, options.rV, options.law);
  const band = /^A\((\w+)\)$/.exec(String(measure))?.[1] as Band | undefined;
  if (band !== undefined && BAND_NAMES.includes(band)) return options.rV * bandExtinction(band, options);
  if (typeof measure === 'string' && measure.includes('-')) return colourExcessRatio(measure as ColourName, options);
  throw new TypeError(
    `${caller}: ${describe(measure)} is no measure of reddening; use a colour such as B-V, A(V) or A0. Bands: ${BAND_NAMES.join(', ')}.`,
  );
}

/** A0 for each magnitude of E(B-V). */
export function a0PerReddening(caller: string, rV: number, law: string): number {
  return rV * lawNamed(caller, law, rV).formula(0.55, rV);
}
