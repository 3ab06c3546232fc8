import { type Coefficients, makeCoefficients } from './coefficients/coefficients';
import { type GiantJoins, giantJoins } from './phases/giant-fits';
import { type MainSequenceJoins, mainSequenceJoins } from './phases/main-sequence-fits';

/** Everything the evolution fits need that depends on the metallicity alone. */
export interface Fits extends Coefficients {
  readonly mainSequence: MainSequenceJoins;
  readonly giants: GiantJoins;
  /** Least share of the time to the base of the giant branch that the main sequence takes (x of Eq. 6). */
  readonly mainSequenceShare: number;
  /** Radius of a degenerate star of 1 solar mass (Eq. 24), solar radii. */
  readonly degenerateRadius: number;
}

const KEPT = 64;
const cache = new Map<number, Fits>();

/** The fits at a mass fraction Z; the 64 used last are kept. */
export function fitsAt(z: number): Fits {
  const known = cache.get(z);
  if (known !== undefined) return known;
  const coefficients = makeCoefficients(z);
  const fits: Fits = Object.freeze({
    ...coefficients,
    mainSequence: mainSequenceJoins(coefficients),
    giants: giantJoins(coefficients),
    mainSequenceShare: Math.max(0.95, Math.min(0.95 - 0.03 * (coefficients.zeta + 0.30103), 0.99)),
    degenerateRadius: 0.0258 * (1.76 - 3 * z) ** (5 / 3),
  });
  if (cache.size >= KEPT) cache.delete(cache.keys().next().value as number);
  cache.set(z, fits);
  return fits;
}
