import { findRoot } from '../numeric/find-root';
import { checkOptions, describe } from '../quantity/options';
import { type Fits, fitsAt } from './fits';
import { type Composition, MASS_RANGE, type Masses, massArray, whyNotMass, whyNotZ, zOf } from './metallicity';
import { hookShare, timeBaseGiantBranch } from './phases/main-sequence-fits';

function lifetimeMyr(fits: Fits, mass: number): number {
  const base = timeBaseGiantBranch(fits.a, mass);
  return base * Math.max(hookShare(fits.a, Math.log(mass)), fits.mainSequenceShare);
}

/**
 * Time that a star spends on the main sequence.
 * @param options mass: solar masses, a number or an array of shape (n), range 0.1 to 100; metallicity: [Fe/H], dex (default
 *   0, which is Z = 0.0188), or z: mass fraction, range 0.0001 to 0.03
 * @returns Gyr, a number or shape (n); NaN outside the range
 * @throws TypeError on an unknown option or a mass that is no number
 * @example mainSequenceLifetime({ mass: 1, z: 0.02 }) // => 11.003
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543, Eqs 4-7. Accuracy 5 % of the models it is fitted to (authors).
 */
export function mainSequenceLifetime(options: Composition & { readonly mass: number }): number;
export function mainSequenceLifetime(options: Composition & { readonly mass: ArrayLike<number> }): Float64Array;
export function mainSequenceLifetime(options: Composition & { readonly mass: Masses }): number | Float64Array {
  checkOptions('mainSequenceLifetime', options, ['mass', 'metallicity', 'z']);
  const mass = massArray('mainSequenceLifetime', 'mass', options.mass);
  const z = zOf('mainSequenceLifetime', options);
  const out = new Float64Array(mass.length).fill(Number.NaN);
  if (whyNotZ(z) === '') {
    const fits = fitsAt(z);
    for (let i = 0; i < out.length; i++) if (whyNotMass(mass[i]) === '') out[i] = lifetimeMyr(fits, mass[i]) / 1000;
  }
  return typeof options.mass === 'number' ? out[0] : out;
}

/**
 * Mass of the star that ends its main sequence at an age: the inverse of mainSequenceLifetime.
 * @param options age: Gyr, a number or an array of shape (n); metallicity: [Fe/H], dex (default 0, which is Z = 0.0188), or
 *   z: mass fraction, range 0.0001 to 0.03
 * @returns solar masses, a number or shape (n); NaN where no star of 0.1 to 100 solar masses ends its main sequence then
 * @throws TypeError on an unknown option or an age that is no number
 * @example turnoffMass({ age: 11.003, z: 0.02 }) // => 1.0000
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543, Eqs 4-7, inverted.
 */
export function turnoffMass(options: Composition & { readonly age: number }): number;
export function turnoffMass(options: Composition & { readonly age: ArrayLike<number> }): Float64Array;
export function turnoffMass(
  options: Composition & { readonly age: number | ArrayLike<number> },
): number | Float64Array {
  checkOptions('turnoffMass', options, ['age', 'metallicity', 'z']);
  const single = typeof options.age === 'number';
  const ages = single ? [options.age as number] : (options.age as ArrayLike<number>);
  if (ages == null || typeof ages !== 'object' || (ages.length > 0 && typeof ages[0] !== 'number')) {
    throw new TypeError(
      `turnoffMass: age must be a number or an array of numbers (Gyr), got ${describe(options.age)}.`,
    );
  }
  const z = zOf('turnoffMass', options);
  const out = new Float64Array(ages.length).fill(Number.NaN);
  if (whyNotZ(z) === '') {
    const fits = fitsAt(z);
    for (let i = 0; i < out.length; i++) out[i] = massOfLifetime(fits, ages[i] * 1000);
  }
  return single ? out[0] : out;
}

/** Mass with a main-sequence lifetime in Myr, NaN where there is none. The lifetime falls with mass everywhere. */
function massOfLifetime(fits: Fits, time: number): number {
  if (!(time > 0)) return Number.NaN;
  const lnTime = Math.log(time);
  const lnMass = findRoot(
    (x) => Math.log(lifetimeMyr(fits, Math.exp(x))) - lnTime,
    Math.log(MASS_RANGE[0]),
    Math.log(MASS_RANGE[1]),
    { tolerance: 1e-13 },
  );
  return Math.min(MASS_RANGE[1], Math.max(MASS_RANGE[0], Math.exp(lnMass)));
}
