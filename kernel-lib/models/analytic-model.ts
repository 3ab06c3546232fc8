import { BAND_NAMES } from '../quantity/band';
import { presentable } from '../quantity/present';
import { ANALYTIC_NAME, isochrone, LOG_AGE_RANGE } from './isochrone';
import { metallicityOf, SOLAR_Z, Z_RANGE } from './metallicity';
import { numbersPresentation } from './show';
import type { StellarModel } from './stellar-model';
import { type MassLoss, massLossWords, windsOf } from './winds/mass-loss';

const SOURCE =
  `Analytic fits of Hurley, Pols & Tout 2000 (MNRAS 315, 543) with zero-age stars of Tout et al. 1996 (MNRAS 281, 257); ` +
  `models with overshooting; [Fe/H] = 0 is Z = ${SOLAR_Z}; within 5 per cent of the detailed models in luminosity and radius`;

/**
 * The built-in model under a choice of mass loss, for any function that takes a StellarModel.
 * @param massLoss 'none', 'winds' or { reimers: efficiency }
 * @throws TypeError or RangeError on another choice
 * @example analyticModelWith({ reimers: 0.3 }).isochrone({ logAge: 10 })
 */
export function analyticModelWith(massLoss: MassLoss): StellarModel {
  const words = massLossWords(windsOf('analyticModelWith', massLoss));
  const name = words === 'none' ? ANALYTIC_NAME : `${ANALYTIC_NAME}, ${words}`;
  const description = `${SOURCE}; mass loss: ${words}.`;
  const model: StellarModel = {
    name,
    description,
    logAgeRange: LOG_AGE_RANGE,
    metallicityRange: Object.freeze([metallicityOf(Z_RANGE[0]), metallicityOf(Z_RANGE[1])] as [number, number]),
    bands: BAND_NAMES,
    isochrone: massLoss === 'none' ? isochrone : (options) => isochrone({ ...options, massLoss }),
  };
  return presentable(model, numbersPresentation('Stellar model', { name, description }));
}

/** The built-in model without winds. */
export const analyticModel: StellarModel = analyticModelWith('none');
