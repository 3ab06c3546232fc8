import { BAND_NAMES, type Band } from '../quantity/band';
import { SOLAR_BOLOMETRIC_MAGNITUDE } from '../quantity/constants';
import { checkChoice, checkOptions, describe } from '../quantity/options';
import { compositeLight } from './composite/composite-light';
import { magnitudesInto } from './light-table';

/** Stars whose magnitudes are wanted. */
export interface AbsoluteMagnitudesOptions<B extends Band = Band> {
  /** log10 of solar luminosities, shape (n). */
  readonly logL: ArrayLike<number>;
  /** log10 of K, 3.377 to 4.876, shape (n). */
  readonly logTeff: ArrayLike<number>;
  /** log10 of cm/s2, one for all or shape (n). Default: dwarfs. */
  readonly logGravity?: number | ArrayLike<number>;
  /** [Fe/H], dex, -2.5 to 0.5, one for all or shape (n). Default 0. */
  readonly metallicity?: number | ArrayLike<number>;
  readonly bands: readonly B[];
  /** Arrays to write into, shape (n) each, for loops that make no new arrays; bands without one get a new array. */
  readonly out?: Partial<Record<B, Float64Array>>;
}

const OPTIONS = ['logL', 'logTeff', 'logGravity', 'metallicity', 'bands', 'out'];
/** Gravity at which every star counts as a dwarf. */
export const DWARF_GRAVITY = 5;

/**
 * Absolute magnitudes of stars in any bands, by the composite scale: the mean dwarf sequence, smoothed, with metallicity terms for F, G and K
 * stars, and giants and supergiants blended in by gravity.
 * @param options see AbsoluteMagnitudesOptions
 * @returns an array of shape (n) a band, mag; NaN for dwarfs cooler than 2380 K (U, Rc, G, BP, RP 2570 K; Hp 4170 K), giants cooler than 2500 K (Hp
 *   4350 K), stars hotter than 75,000 K, [Fe/H] out of range, and wherever an input is NaN. Beyond the published ranges, but within these, the
 *   relations go on straight: dwarfs hotter than O3 (45,900 K), giants later than M7 (3130 K, V then good to 0.5 mag only). U of M giants is
 *   good to 0.3 mag, of other metallicities to 0.1 mag for each dex. White dwarfs get the light of a dwarf of the same temperature, good for a
 *   sketch only: V to 0.1 mag, but B-V and BP-RP up to 0.2 mag too blue and U-B up to 0.5 mag too red (common practice, no source).
 * @throws TypeError for an unknown option or band, RangeError when lengths differ
 * @example absoluteMagnitudes({ logL: [0], logTeff: [3.7613], logGravity: [4.438], bands: ['V'] }).V[0] // => 4.826
 * Sources: Pecaut & Mamajek 2013 and those named in the files of photometry/composite; M_bol of the Sun 4.74 (IAU 2015 Resolution B2).
 */
export function absoluteMagnitudes<B extends Band>(options: AbsoluteMagnitudesOptions<B>): Record<B, Float64Array> {
  const caller = 'absoluteMagnitudes';
  checkOptions(caller, options, OPTIONS);
  const { logL, logTeff, logGravity = DWARF_GRAVITY, metallicity = 0, bands, out } = options;
  if (!Array.isArray(bands as unknown)) {
    throw new TypeError(`${caller}: bands must be an array of ${BAND_NAMES.join(', ')}, got ${describe(bands)}.`);
  }
  const n = lengthOf(caller, 'logL', logL);
  checkLength(caller, 'logTeff', logTeff, n);
  if (typeof logGravity !== 'number') checkLength(caller, 'logGravity', logGravity, n);
  if (typeof metallicity !== 'number') checkLength(caller, 'metallicity', metallicity, n);
  const light = compositeLight();
  const result = {} as Record<B, Float64Array>;
  const columns: Float64Array[] = [];
  const tables = bands.map((band) => {
    checkChoice<Band>(caller, 'band', band, BAND_NAMES);
    const column = out?.[band] ?? new Float64Array(n);
    checkLength(caller, `out.${band}`, column, n);
    result[band] = column;
    columns.push(column);
    return light[band];
  });
  magnitudesInto(tables, columns, SOLAR_BOLOMETRIC_MAGNITUDE, logL, logTeff, logGravity, metallicity);
  return result;
}

function lengthOf(caller: string, name: string, list: unknown): number {
  const length = (list as ArrayLike<number> | null | undefined)?.length;
  if (typeof list !== 'object' || typeof length !== 'number') {
    throw new TypeError(`${caller}: ${name} must be an array, one value a star, got ${describe(list)}.`);
  }
  return length;
}

function checkLength(caller: string, name: string, list: unknown, n: number): void {
  const length = lengthOf(caller, name, list);
  if (length !== n) throw new RangeError(`${caller}: ${name} has ${length} values for ${n} stars.`);
}
