import { BANDS } from '../photometry/bands';
import { BAND_NAMES, type Band, bandsOfColour, type ColourName } from '../quantity/band';
import { checkChoice, checkOptions } from '../quantity/options';
import { type LawName, lawNamed } from './laws';

/** Which extinction. */
export interface BandExtinctionOptions {
  /** A(V)/E(B-V), 2 to 6. Default 3.1. */
  readonly rV?: number;
  /** Default `CCM89`. */
  readonly law?: LawName | (string & {});
}

const OPTIONS = ['rV', 'law'];

/**
 * Extinction in a band in units of that in V, at the band's effective wavelength.
 *
 * V and B are exact: A(V) is the unit, and A(B)/A(V) is 1 + 1/R(V), since R(V) = A(V)/E(B-V) is what the law's parameter means. A law
 * read at the two effective wavelengths would give E(B-V) a few per cent larger than A(V)/R(V).
 * @param band any band
 * @returns A(band)/A(V)
 * @throws TypeError for an unknown band, law or option, RangeError for rV out of range
 * @example bandExtinction('Ks') // => 0.117
 * Sources: wavelengths in BANDS, laws in EXTINCTION_LAWS. One wavelength stands for the whole band: for the wide Gaia bands the true
 * ratio changes with the star's colour, see gaiaExtinction.
 */
export function bandExtinction(band: Band, options: BandExtinctionOptions = {}): number {
  checkOptions('bandExtinction', options, OPTIONS);
  checkChoice('bandExtinction', 'band', band, BAND_NAMES);
  const { rV = 3.1, law = 'CCM89' } = options;
  const { formula } = lawNamed('bandExtinction', law, rV);
  if (band === 'V') return 1;
  if (band === 'B') return 1 + 1 / rV;
  return formula(BANDS[band].wavelength, rV);
}

/**
 * Excess in a colour for each magnitude of E(B-V).
 * @param colour such as `BP-RP`
 * @returns E(colour)/E(B-V); exactly 1 for B-V
 * @throws TypeError for an unknown colour, law or option, RangeError for rV out of range
 * @example colourExcessRatio('BP-RP') // => 1.426
 */
export function colourExcessRatio(colour: ColourName, options: BandExtinctionOptions = {}): number {
  checkOptions('colourExcessRatio', options, OPTIONS);
  const { blue, red } = bandsOfColour(colour);
  const { rV = 3.1 } = options;
  if (blue === 'B' && red === 'V') return 1;
  return rV * (bandExtinction(blue, options) - bandExtinction(red, options));
}
