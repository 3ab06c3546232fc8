import { SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkOptions } from '../quantity/options';
import { presentable } from '../quantity/present';
import { fitsAt } from './fits';
import { type Composition, type Masses, massArray, whyNotMass, whyNotZ, zOf } from './metallicity';
import { zeroAgeLuminosity, zeroAgeRadius } from './phases/zero-age-fits';
import { columnsPresentation, numbersPresentation } from './show';

/** A zero-age star, in solar units and K. */
export interface ZeroAgeStar {
  readonly mass: number;
  readonly luminosity: number;
  readonly radius: number;
  readonly temperature: number;
  readonly z: number;
  /** Why the values are NaN, or ''. */
  readonly note: string;
}

/** Zero-age stars, one an entry of each column. */
export interface ZeroAgeStars {
  readonly mass: Float64Array;
  readonly luminosity: Float64Array;
  readonly radius: Float64Array;
  readonly temperature: Float64Array;
  readonly z: number;
  readonly note: string;
}

/**
 * Luminosity, radius and effective temperature of stars that have just begun to burn hydrogen.
 * @param options mass: solar masses, a number or an array of shape (n), range 0.1 to 100; metallicity: [Fe/H], dex (default
 *   0, which is Z = 0.0188), or z: mass fraction, range 0.0001 to 0.03
 * @returns numbers for one mass, columns of shape (n) for an array; NaN outside the range, `note` says why
 * @throws TypeError on an unknown option or a mass that is no number
 * @example zeroAge({ mass: 1, z: 0.02 }).luminosity // => 0.6977
 * Source: Tout, Pols, Eggleton & Han 1996, MNRAS 281, 257. Accuracy (authors, from memory): luminosity 3 %, at worst 7.5 %;
 * radius 1.2 %, at worst 5 %.
 */
export function zeroAge(options: Composition & { readonly mass: number }): ZeroAgeStar;
export function zeroAge(options: Composition & { readonly mass: ArrayLike<number> }): ZeroAgeStars;
export function zeroAge(options: Composition & { readonly mass: Masses }): ZeroAgeStar | ZeroAgeStars {
  checkOptions('zeroAge', options, ['mass', 'metallicity', 'z']);
  const mass = massArray('zeroAge', 'mass', options.mass);
  const z = zOf('zeroAge', options);
  const n = mass.length;
  const luminosity = new Float64Array(n).fill(Number.NaN);
  const radius = new Float64Array(n).fill(Number.NaN);
  const temperature = new Float64Array(n).fill(Number.NaN);
  let note = whyNotZ(z);
  if (note === '') {
    const fits = fitsAt(z);
    for (let i = 0; i < n; i++) {
      const why = whyNotMass(mass[i]);
      if (why !== '') {
        note ||= why;
        continue;
      }
      luminosity[i] = zeroAgeLuminosity(fits, mass[i]);
      radius[i] = zeroAgeRadius(fits, mass[i]);
      temperature[i] = SOLAR_TEMPERATURE * Math.sqrt(Math.sqrt(luminosity[i] / radius[i] ** 2));
    }
  }
  if (typeof options.mass === 'number') {
    const star = { mass: mass[0], luminosity: luminosity[0], radius: radius[0], temperature: temperature[0], z, note };
    return presentable(star, numbersPresentation('Zero-age star', star));
  }
  const stars = { mass: Float64Array.from(mass), luminosity, radius, temperature, z, note };
  return presentable(stars, columnsPresentation('Zero-age stars', stars));
}
