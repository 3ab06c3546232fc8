import { type Broadcast, broadcast, type NumberOrArray } from './broadcast';

/**
 * True distance modulus: 5 log10(d / 10 pc).
 * @param distance pc, positive, a number or shape (n)
 * @returns mag; NaN where the input is NaN or not positive
 * @throws TypeError when the input is neither a number nor a list
 * @example distanceModulus(100) // => 5
 */
export function distanceModulus<T extends NumberOrArray>(distance: T): Broadcast<[T]> {
  return broadcast('distanceModulus', [distance], (d) => (d > 0 ? 5 * Math.log10(d) - 5 : Number.NaN));
}

/**
 * Distance from true distance modulus: 10^(1 + modulus / 5).
 * @param modulus mag, a number or shape (n)
 * @returns pc; NaN where the input is NaN
 * @throws TypeError when the input is neither a number nor a list
 * @example distanceFromModulus(5) // => 100
 */
export function distanceFromModulus<T extends NumberOrArray>(modulus: T): Broadcast<[T]> {
  return broadcast('distanceFromModulus', [modulus], (m) => 10 ** (1 + m / 5));
}

/**
 * Absolute magnitude: apparent magnitude, less distance modulus, less extinction.
 * @param magnitude  apparent, mag, a number or shape (n)
 * @param distance   pc, positive, a number or shape (n)
 * @param extinction in the same band, mag, a number or shape (n); default 0
 * @returns mag; NaN where an input is NaN or the distance is not positive
 * @throws RangeError when lengths differ
 * @example absoluteMagnitude(10, 100, 0.3) // => 4.7
 */
export function absoluteMagnitude<M extends NumberOrArray, D extends NumberOrArray, A extends NumberOrArray = number>(
  magnitude: M,
  distance: D,
  extinction?: A,
): Broadcast<[M, D, A]> {
  return broadcast('absoluteMagnitude', [magnitude, distance, extinction ?? 0] as unknown as [M, D, A], (m, d, a) =>
    d > 0 ? m - (5 * Math.log10(d) - 5) - a : Number.NaN,
  );
}
