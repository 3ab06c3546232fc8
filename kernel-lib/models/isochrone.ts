import { absoluteMagnitudes } from '../photometry/absolute-magnitudes';
import { BAND_NAMES, type Band } from '../quantity/band';
import { SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { massSpans, traceCurve } from './curve';
import { fitsAt } from './fits';
import { emptyIsochrone, finishIsochrone } from './isochrone-result';
import { metallicityOf, whyNotZ, zOf } from './metallicity';
import type { Isochrone, IsochroneOptions } from './stellar-model';
import { type MassLoss, massLossWords, prepare, windsOf } from './winds/mass-loss';

/** Name of the built-in model in results. */
export const ANALYTIC_NAME = 'Hurley, Pols & Tout 2000';

/** log10 of age in years for which the built-in model gives isochrones. */
export const LOG_AGE_RANGE: readonly [number, number] = [6, 10.3];

/** Bands when none are asked for. */
export const DEFAULT_BANDS: readonly Band[] = Object.freeze(['G', 'BP', 'RP'] as Band[]);

const POINTS = 400;
const LOG_SOLAR_TEMPERATURE = Math.log10(SOLAR_TEMPERATURE);
/** What to ask of the built-in model. */
export interface AnalyticIsochroneOptions extends IsochroneOptions {
  /** Mass loss, default 'none'. */
  readonly massLoss?: MassLoss;
}

/**
 * An isochrone: all stars of one age and composition from 0.1 solar masses to the most evolved one still shining, placed
 * at equal steps along the curve in the HR diagram, so that points crowd where the curve bends and not where mass does.
 * @param options logAge: log10 of the age in years, 6 to 10.3; metallicity: [Fe/H], dex (default 0, which is Z = 0.0188), or
 *   z: mass fraction, range 0.0001 to 0.03; bands: in which to give absolute magnitudes (default G, BP, RP); points: 60 to
 *   5000 (default 400); massLoss: 'none' (default), 'winds' or { reimers } (winds follow every star step by step: a second or so)
 * @returns columns of `points` entries, frozen; count 0 and a note outside the ranges
 * @throws TypeError on an unknown option or band, or a logAge that is no number; RangeError on points out of range
 * @example isochrone({ logAge: 9, metallicity: 0.1, bands: ['B', 'V'] }).magnitudes.V
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543 (see evolve). Stars still contracting onto the main sequence are not in it.
 */
export function isochrone(options: AnalyticIsochroneOptions): Isochrone {
  checkOptions('isochrone', options, ['logAge', 'metallicity', 'z', 'bands', 'points', 'massLoss']);
  const { logAge, bands = DEFAULT_BANDS, points = POINTS, massLoss = 'none' } = options;
  if (typeof logAge !== 'number') {
    throw new TypeError(`isochrone: logAge must be a number (log10 of years), got ${describe(logAge)}.`);
  }
  checkBands('isochrone', bands, BAND_NAMES);
  checkRange('isochrone', 'points', points, 60, 5000);
  const wind = windsOf('isochrone', massLoss);
  const z = zOf('isochrone', options);
  const setting = {
    model: ANALYTIC_NAME,
    logAge,
    metallicity: metallicityOf(z),
    z,
    bands,
    massLoss: massLossWords(wind),
  };
  const why = whyNotZ(z) || whyNotAge(logAge, LOG_AGE_RANGE);
  if (why !== '') return emptyIsochrone(setting, why);
  const fits = fitsAt(z);
  const { life, table } = prepare(fits, wind);
  const curve = traceCurve(fits, life, table, 10 ** (logAge - 6), Math.round(points));
  const n = curve.logL.length;
  const logTeff = new Float64Array(n);
  const logGravity = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    logTeff[i] = LOG_SOLAR_TEMPERATURE + 0.25 * (curve.logL[i] - 2 * curve.logR[i]);
    logGravity[i] = SOLAR_LOG_GRAVITY + Math.log10(curve.mass[i]) - 2 * curve.logR[i];
  }
  const { parameter: initialMass, mass, logL, phase, breaks } = curve;
  const weight = massSpans(initialMass, breaks);
  const magnitudes = absoluteMagnitudes({ logL, logTeff, logGravity, metallicity: setting.metallicity, bands });
  return finishIsochrone(
    setting,
    { initialMass, mass, logL, logTeff, logGravity, phase, weight, breaks, magnitudes },
    '',
  );
}

/** Refuses bands that are not known. */
export function checkBands(caller: string, bands: unknown, known: readonly Band[]): asserts bands is readonly Band[] {
  const list = bands as readonly Band[];
  if (Array.isArray(bands) && list.every((b) => known.includes(b))) return;
  const wrong = Array.isArray(bands) ? list.find((b) => !known.includes(b)) : bands;
  throw new TypeError(`${caller}: bands must be an array of ${known.join(', ')}; got ${describe(wrong)}.`);
}

/** Why an age cannot be used, or ''. */
export function whyNotAge(logAge: number, range: readonly [number, number]): string {
  if (logAge >= range[0] - 1e-9 && logAge <= range[1] + 1e-9) return '';
  return `log age ${Number(logAge.toPrecision(6))} lies outside the range of the model, ${range[0]} to ${range[1]}`;
}
