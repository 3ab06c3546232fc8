import { BAND_NAMES, type Band } from '../../quantity/band';
import { checkChoice } from '../../quantity/options';
import { compositeLight } from '../composite/composite-light';
import { bandCorrection, giantShare, METALLICITY_RANGE } from '../light-table';
import { tableCorrection } from '../table-light';
import { alonsoCorrection } from './alonso-1999';
import { ANDRAE_RANGE, andraeCorrection } from './andrae-2018';
import { FLOWER_LOG_TEFF, flowerCorrection } from './flower-1996';

/** A relation of temperature and bolometric correction. */
export interface CorrectionScale {
  readonly name: string;
  readonly stars: string;
  readonly accuracy: string;
  readonly source: string;
  readonly bands: readonly Band[];
  readonly metallicities: readonly [number, number] | null;
  /** mag; NaN outside its range. */
  correction(band: Band, logTeff: number, metallicity: number, logGravity: number): number;
}

/** Every scale of bolometric corrections. The first is the default. */
export const CORRECTION_SCALES: readonly CorrectionScale[] = Object.freeze([
  Object.freeze({
    name: 'composite',
    stars: 'dwarfs by default; giants when a gravity is given',
    accuracy: '0.03 mag in V for A to K dwarfs, 0.08 mag for K giants, 0.1 mag for O, B and M stars',
    source: 'see photometry/composite; what isochrones are made with',
    bands: BAND_NAMES,
    metallicities: METALLICITY_RANGE,
    correction: (band: Band, logTeff: number, metallicity: number, logGravity: number) =>
      bandCorrection(compositeLight()[band], logTeff, giantShare(logTeff, logGravity), metallicity),
  }),
  Object.freeze({
    name: 'pecaut-mamajek-2013',
    stars: 'dwarfs of solar metallicity',
    accuracy: '0.03 mag for A to K, more for O, B and M (the table is given to 0.005 or 0.01)',
    source: 'Pecaut & Mamajek 2013, ApJS 208, 9, Table 5, on-line version 2024.05.15; point by point',
    bands: BAND_NAMES,
    metallicities: null,
    correction: (band: Band, logTeff: number) => tableCorrection(band, logTeff),
  }),
  Object.freeze({
    name: 'flower-1996',
    stars: 'all luminosities',
    accuracy: '0.05 mag (from memory); to go with M_bol 4.73 for the Sun',
    source: 'Flower 1996, ApJ 469, 355, as corrected by Torres 2010, AJ 140, 1158; coefficients from memory',
    bands: ['V'] as const,
    metallicities: null,
    correction: (_band: Band, logTeff: number) =>
      logTeff >= FLOWER_LOG_TEFF[0] && logTeff <= FLOWER_LOG_TEFF[1] ? flowerCorrection(logTeff) : Number.NaN,
  }),
  Object.freeze({
    name: 'alonso-1999',
    stars: 'giants F0 to K5',
    accuracy: '0.05 mag (from memory); to go with M_bol 4.75 for the Sun',
    source: 'Alonso, Arribas & Martinez-Roger 1999, A&AS 140, 261, equations 17 and 18; coefficients from memory',
    bands: ['V'] as const,
    metallicities: [-3, 0.2] as const,
    correction: (_band: Band, logTeff: number, metallicity: number) =>
      logTeff >= 3.55 && logTeff <= 3.96 && metallicity >= -3 && metallicity <= 0.2
        ? alonsoCorrection(logTeff, metallicity)
        : Number.NaN,
  }),
  Object.freeze({
    name: 'andrae-2018',
    stars: 'dwarfs 3300 to 8000 K of solar metallicity',
    accuracy: '0.05 mag above 4000 K, 0.2 mag below (from memory)',
    source: 'Andrae et al. 2018, A&A 616, A8, equation 7; coefficients from memory',
    bands: ['G'] as const,
    metallicities: null,
    correction(_band: Band, logTeff: number) {
      const temperature = 10 ** logTeff;
      return temperature >= ANDRAE_RANGE[0] && temperature <= ANDRAE_RANGE[1]
        ? andraeCorrection(temperature)
        : Number.NaN;
    },
  }),
]);

/**
 * A scale by its name, for a band.
 * @throws TypeError when there is no such scale or band, or it does not know the band
 */
export function correctionScale(caller: string, name: string, band: Band): CorrectionScale {
  const names = CORRECTION_SCALES.map((s) => s.name);
  checkChoice<string>(caller, 'scale', name, names);
  checkChoice(caller, 'band', band, BAND_NAMES);
  const scale = CORRECTION_SCALES[names.indexOf(name)];
  if (scale.bands.includes(band)) return scale;
  const others = CORRECTION_SCALES.filter((s) => s.bands.includes(band)).map((s) => s.name);
  throw new TypeError(
    `${caller}: scale "${name}" has no band ${band}, only ${scale.bands.join(', ')}. Scales with ${band}: ${others.join(', ')}.`,
  );
}
