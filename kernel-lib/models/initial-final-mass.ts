import { checkChoice, checkOptions } from '../quantity/options';
import { type Masses, massArray } from './metallicity';

/** A straight piece of a relation between initial and final mass: final = slope x initial + constant. */
interface Piece {
  readonly from: number;
  readonly to: number;
  readonly slope: number;
  readonly constant: number;
}

/** The relations that can be chosen. */
export type InitialFinalRelation = 'Cummings2018' | 'Kalirai2008';

const RELATIONS: Readonly<Record<InitialFinalRelation, readonly Piece[]>> = {
  Cummings2018: [
    { from: 0.83, to: 2.85, slope: 0.08, constant: 0.489 },
    { from: 2.85, to: 3.6, slope: 0.187, constant: 0.184 },
    { from: 3.6, to: 7.2, slope: 0.107, constant: 0.471 },
  ],
  Kalirai2008: [{ from: 1.16, to: 6.5, slope: 0.109, constant: 0.394 }],
};
const NAMES = Object.keys(RELATIONS) as InitialFinalRelation[];

/** Options of the relations between initial and final mass. */
export interface InitialFinalOptions {
  /** Cummings et al. 2018 (default; 0.83 to 7.2 solar masses) or Kalirai et al. 2008 (1.16 to 6.5). */
  readonly relation?: InitialFinalRelation;
}

function apply(
  caller: string,
  mass: Masses,
  options: InitialFinalOptions,
  f: (m: number, p: readonly Piece[]) => number,
) {
  checkOptions(caller, options, ['relation']);
  const { relation = 'Cummings2018' } = options;
  checkChoice(caller, 'relation', relation, NAMES);
  const masses = massArray(caller, 'mass', mass);
  const out = Float64Array.from(masses, (m) => f(m, RELATIONS[relation]));
  return typeof mass === 'number' ? out[0] : out;
}

/**
 * Mass of the white dwarf that a star leaves, as observed in clusters.
 * @param mass    initial mass, solar masses, a number or shape (n)
 * @param options relation: `Cummings2018` (default) or `Kalirai2008`
 * @returns solar masses; NaN outside the range of the relation
 * @throws TypeError on an unknown option, relation or a mass that is no number
 * @example initialFinalMass(3) // => 0.745
 * Source: Cummings et al. 2018, ApJ 866, 21, Eqs 4-6 (scatter about 0.06); Kalirai et al. 2008, ApJ 676, 594, Eq. 1 (range from memory).
 */
export function initialFinalMass(mass: number, options?: InitialFinalOptions): number;
export function initialFinalMass(mass: ArrayLike<number>, options?: InitialFinalOptions): Float64Array;
export function initialFinalMass(mass: Masses, options: InitialFinalOptions = {}): number | Float64Array {
  return apply('initialFinalMass', mass, options, (m, pieces) => {
    for (const p of pieces) if (m >= p.from && m <= p.to) return p.slope * m + p.constant;
    return Number.NaN;
  });
}

/**
 * Initial mass of the star that left a white dwarf: the inverse of initialFinalMass.
 * @param mass    mass of the white dwarf, solar masses, a number or shape (n)
 * @param options relation: `Cummings2018` (default) or `Kalirai2008`
 * @returns solar masses; NaN outside the range of the relation
 * @throws TypeError on an unknown option, relation or a mass that is no number
 * @example progenitorMass(0.745) // => 3.0
 * Source: as initialFinalMass.
 */
export function progenitorMass(mass: number, options?: InitialFinalOptions): number;
export function progenitorMass(mass: ArrayLike<number>, options?: InitialFinalOptions): Float64Array;
export function progenitorMass(mass: Masses, options: InitialFinalOptions = {}): number | Float64Array {
  return apply('progenitorMass', mass, options, (m, pieces) => {
    for (const p of pieces) {
      const initial = (m - p.constant) / p.slope;
      // The pieces meet within 0.001 solar masses only, so the gap between two belongs to the lower one's end.
      if (initial < p.from - 1e-9) return p === pieces[0] ? Number.NaN : p.from;
      if (initial <= p.to + 1e-9) return initial;
    }
    return Number.NaN;
  });
}
