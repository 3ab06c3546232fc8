import { BAND_NAMES, type Band } from '../quantity/band';
import { SOLAR_BOLOMETRIC_MAGNITUDE } from '../quantity/constants';
import { checkOptions, describe } from '../quantity/options';
import { compositeLight } from './composite/composite-light';
import { bandCorrection, giantShare } from './light-table';

/** Stars whose magnitudes are wanted. */
export interface AbsoluteMagnitudesOptions<B extends Band = Band> {
  /** log10 of solar luminosities, shape (n). */
  readonly logL: ArrayLike<number>;
  /** log10 of K, shape (n). */
  readonly logTeff: ArrayLike<number>;
  /** log10 of cm/s2, one for all or shape (n). Default: dwarfs. */
  readonly logGravity?: number | ArrayLike<number>;
  /** [Fe/H], dex, -2.5 to 0.5, one for all or shape (n). Default 0. */
  readonly metallicity?: number | ArrayLike<number>;
  readonly bands: readonly B[];
  /** Arrays to write into, shape (n) each; bands without one get a new array. */
  readonly out?: Partial<Record<B, Float64Array>>;
}

const OPTIONS = ['logL', 'logTeff', 'logGravity', 'metallicity', 'bands', 'out'];
/** Gravity at which every star counts as a dwarf. */
const DWARF_GRAVITY = 5;

/**
 * Absolute magnitudes of stars in any bands, by the composite scale.
 * @param options see AbsoluteMagnitudesOptions
 * @returns an array of shape (n) a band, mag; NaN outside the ranges of the scale
 * @throws TypeError for an unknown option or band, RangeError when lengths differ
 * @example absoluteMagnitudes({ logL: [0], logTeff: [3.7613], logGravity: [4.44], bands: ['V'] }).V[0] // => 4.82
 */
export function absoluteMagnitudes<B extends Band>(options: AbsoluteMagnitudesOptions<B>): Record<B, Float64Array> {
  const caller = 'absoluteMagnitudes';
  checkOptions(caller, options, OPTIONS);
  const { logL, logTeff, logGravity = DWARF_GRAVITY, metallicity = 0, bands, out = {} } = options;
  const n = logL.length;
  const check = (name: string, list: number | ArrayLike<number>) => {
    if (typeof list !== 'number' && list.length !== n) {
      throw new RangeError(`${caller}: ${name} has ${list.length} values for ${n} stars.`);
    }
  };
  check('logTeff', logTeff);
  check('logGravity', logGravity);
  check('metallicity', metallicity);
  const light = compositeLight();
  const result = {} as Record<B, Float64Array>;
  for (const band of bands) {
    if (!BAND_NAMES.includes(band)) {
      throw new TypeError(`${caller}: unknown band ${describe(band)}; bands are ${BAND_NAMES.join(', ')}.`);
    }
    const into = (out as Partial<Record<B, Float64Array>>)[band] ?? new Float64Array(n);
    check(`out.${band}`, into);
    const table = light[band];
    for (let i = 0; i < n; i++) {
      const t = logTeff[i];
      const share = giantShare(t, typeof logGravity === 'number' ? logGravity : logGravity[i]);
      const f = typeof metallicity === 'number' ? metallicity : metallicity[i];
      into[i] = SOLAR_BOLOMETRIC_MAGNITUDE - 2.5 * logL[i] - bandCorrection(table, t, share, f);
    }
    result[band] = into;
  }
  return result;
}
