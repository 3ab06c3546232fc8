import { SOLAR_BOLOMETRIC_MAGNITUDE, SOLAR_TEMPERATURE } from '../quantity/constants';
import { type Broadcast, broadcast, type NumberOrArray } from './broadcast';

/**
 * Luminosity from absolute bolometric magnitude: 10^(0.4 (4.74 - M)).
 * @param bolometricMagnitude mag, a number or shape (n)
 * @returns solar luminosities, a number or shape (n); NaN where the input is NaN
 * @throws TypeError when the input is neither a number nor a list
 * @example luminosityFromMagnitude(4.74) // => 1
 * Source: zero point of IAU 2015 Resolution B2.
 */
export function luminosityFromMagnitude<T extends NumberOrArray>(bolometricMagnitude: T): Broadcast<[T]> {
  return broadcast(
    'luminosityFromMagnitude',
    [bolometricMagnitude],
    (m) => 10 ** (0.4 * (SOLAR_BOLOMETRIC_MAGNITUDE - m)),
  );
}

/**
 * Absolute bolometric magnitude from luminosity: 4.74 - 2.5 log10 L.
 * @param luminosity solar luminosities, positive, a number or shape (n)
 * @returns mag, a number or shape (n); NaN where the input is NaN or not positive
 * @throws TypeError when the input is neither a number nor a list
 * @example magnitudeFromLuminosity(100) // => -0.26
 * Source: zero point of IAU 2015 Resolution B2.
 */
export function magnitudeFromLuminosity<T extends NumberOrArray>(luminosity: T): Broadcast<[T]> {
  return broadcast('magnitudeFromLuminosity', [luminosity], (l) =>
    l > 0 ? SOLAR_BOLOMETRIC_MAGNITUDE - 2.5 * Math.log10(l) : Number.NaN,
  );
}

/**
 * Radius from luminosity and effective temperature (Stefan-Boltzmann law): sqrt(L) (5772 / T)^2.
 * @param luminosity  solar luminosities, positive, a number or shape (n)
 * @param temperature K, positive, a number or shape (n)
 * @returns solar radii; NaN where an input is NaN or not positive
 * @throws RangeError when lengths differ
 * @example radiusFromLuminosity(1, 5772) // => 1
 * Source: nominal solar temperature 5772 K, IAU 2015 Resolution B3.
 */
export function radiusFromLuminosity<L extends NumberOrArray, T extends NumberOrArray>(
  luminosity: L,
  temperature: T,
): Broadcast<[L, T]> {
  return broadcast('radiusFromLuminosity', [luminosity, temperature] as [L, T], (l, t) =>
    l > 0 && t > 0 ? Math.sqrt(l) * (SOLAR_TEMPERATURE / t) ** 2 : Number.NaN,
  );
}

/**
 * Luminosity from radius and effective temperature (Stefan-Boltzmann law): R^2 (T / 5772)^4.
 * @param radius      solar radii, positive, a number or shape (n)
 * @param temperature K, positive, a number or shape (n)
 * @returns solar luminosities; NaN where an input is NaN or not positive
 * @throws RangeError when lengths differ
 * @example luminosityFromRadius(1, 5772) // => 1
 * Source: nominal solar temperature 5772 K, IAU 2015 Resolution B3.
 */
export function luminosityFromRadius<R extends NumberOrArray, T extends NumberOrArray>(
  radius: R,
  temperature: T,
): Broadcast<[R, T]> {
  return broadcast('luminosityFromRadius', [radius, temperature] as [R, T], (r, t) =>
    r > 0 && t > 0 ? r * r * (t / SOLAR_TEMPERATURE) ** 4 : Number.NaN,
  );
}
