import { SOLAR_LOG_GRAVITY } from '../quantity/constants';
import { type Broadcast, broadcast, type NumberOrArray } from './broadcast';

/**
 * Surface gravity from mass and radius: log10 g = 4.438 + log10 M - 2 log10 R.
 * @param mass   solar masses, positive, a number or shape (n)
 * @param radius solar radii, positive, a number or shape (n)
 * @returns log10 of g in cm s^-2; NaN where an input is NaN or not positive
 * @throws RangeError when lengths differ
 * @example surfaceGravity(1, 1) // => 4.438
 * Source: nominal solar mass parameter and radius, IAU 2015 Resolution B3.
 */
export function surfaceGravity<M extends NumberOrArray, R extends NumberOrArray>(
  mass: M,
  radius: R,
): Broadcast<[M, R]> {
  return broadcast('surfaceGravity', [mass, radius] as [M, R], (m, r) =>
    m > 0 && r > 0 ? SOLAR_LOG_GRAVITY + Math.log10(m) - 2 * Math.log10(r) : Number.NaN,
  );
}
