import { WIEN_DISPLACEMENT } from '../quantity/constants';
import { type Broadcast, broadcast, type NumberOrArray } from './broadcast';

/**
 * Wavelength at which a black body shines brightest per unit wavelength (Wien's displacement law).
 * @param temperature K, positive, a number or shape (n)
 * @returns micrometres; NaN where the input is NaN or not positive
 * @throws TypeError when the input is neither a number nor a list
 * @example wienPeak(5772) // => 0.502
 * Source: displacement constant 2.897771955e-3 m K, CODATA 2018.
 */
export function wienPeak<T extends NumberOrArray>(temperature: T): Broadcast<[T]> {
  return broadcast('wienPeak', [temperature], (t) => (t > 0 ? (WIEN_DISPLACEMENT / t) * 1e6 : Number.NaN));
}
