import { BAND_NAMES } from '../quantity/band';
import { presentable } from '../quantity/present';
import { ANALYTIC_NAME, isochrone, LOG_AGE_RANGE } from './isochrone';
import { metallicityOf, SOLAR_Z, Z_RANGE } from './metallicity';
import { numbersPresentation } from './show';
import type { StellarModel } from './stellar-model';

const description =
  `Analytic fits of Hurley, Pols & Tout 2000 (MNRAS 315, 543) with zero-age stars of Tout et al. 1996 (MNRAS 281, 257); ` +
  `models with overshooting; [Fe/H] = 0 is Z = ${SOLAR_Z}; within 5 per cent of the detailed models in luminosity and radius; no winds.`;

/** The built-in model, for any function that takes a StellarModel. */
export const analyticModel: StellarModel = presentable(
  {
    name: ANALYTIC_NAME,
    description,
    logAgeRange: LOG_AGE_RANGE,
    metallicityRange: Object.freeze([metallicityOf(Z_RANGE[0]), metallicityOf(Z_RANGE[1])] as [number, number]),
    bands: BAND_NAMES,
    isochrone,
  },
  numbersPresentation('Stellar model', { name: ANALYTIC_NAME, description }),
);
