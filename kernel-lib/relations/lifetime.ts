import { checkOptions, describe } from '../quantity/options';

/** Main-sequence lifetime of one solar mass in the power law, Gyr. Common practice, no source. */
const SOLAR_LIFETIME = 10;

/**
 * Main-sequence lifetime by the power law t = 10 Gyr x M^exponent: what follows from luminosity as a power of mass (fuel over
 * burning rate, exponent 1 - 3.5). A rule of thumb: `mainSequenceLifetime` gives the lifetime of the stellar models.
 * @param mass    solar masses, positive; a number or an array of shape (n)
 * @param options exponent: default -2.5
 * @returns Gyr, a number or shape (n); NaN where the mass is not positive
 * @throws TypeError on an unknown option
 * @example lifetimeFromMass(10) // => 0.0316 (32 million years)
 * Source: common practice, no source.
 */
export function lifetimeFromMass(mass: number, options?: { exponent?: number }): number;
export function lifetimeFromMass(mass: ArrayLike<number>, options?: { exponent?: number }): Float64Array;
export function lifetimeFromMass(
  mass: number | ArrayLike<number>,
  options: { exponent?: number } = {},
): number | Float64Array {
  checkOptions('lifetimeFromMass', options, ['exponent']);
  const { exponent = -2.5 } = options;
  if (!Number.isFinite(exponent)) {
    throw new TypeError(`lifetimeFromMass: exponent must be a finite number, got ${describe(exponent)}.`);
  }
  const lifetime = (m: number) => (m > 0 ? SOLAR_LIFETIME * m ** exponent : Number.NaN);
  return typeof mass === 'number' ? lifetime(mass) : Float64Array.from(mass, lifetime);
}
