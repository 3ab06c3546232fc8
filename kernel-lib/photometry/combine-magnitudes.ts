import { entry, type OneOrEach, overEach } from './each';

/**
 * Magnitude of two stars seen as one.
 * @param first  mag, a number or shape (n)
 * @param second mag, a number or shape (n); a companion without light is Infinity
 * @returns mag, a number or shape (n); NaN where one is NaN
 * @throws TypeError when an argument is neither a number nor a list, RangeError when lengths differ
 * @example combineMagnitudes(10, 10) // => 9.2474
 * Source: fluxes add (Pogson's scale).
 */
export function combineMagnitudes(first: number, second: number): number;
export function combineMagnitudes(first: ArrayLike<number>, second: OneOrEach): Float64Array;
export function combineMagnitudes(first: OneOrEach, second: OneOrEach): number | Float64Array {
  return overEach('combineMagnitudes', 'first', first, { second }, (a, i) => combinedMagnitude(a, entry(second, i)));
}

/** The same for one pair, for hot loops. */
export function combinedMagnitude(a: number, b: number): number {
  // From the brighter, so that nothing overflows.
  const bright = Math.min(a, b);
  const faint = Math.max(a, b);
  return faint === Number.POSITIVE_INFINITY ? bright : bright - 2.5 * Math.log10(1 + 10 ** (-0.4 * (faint - bright)));
}
