import { checkOptions, checkRange, describe } from '../../quantity/options';
import type { Fits } from '../fits';
import { Life } from '../life';
import { type LifeSource, type MomentTable, makeMomentTable } from '../moments';
import { WindLife } from './wind-life';
import type { WindOptions } from './wind-rate';

/** The choice of mass loss: none (the default), the paper's winds, or those with another efficiency of Reimers' law. */
export type MassLoss = 'none' | 'winds' | { readonly reimers: number };

/** Winds meant by a choice, or null for none. @throws TypeError or RangeError on anything else */
export function windsOf(caller: string, massLoss: MassLoss): WindOptions | null {
  if (massLoss === 'none') return null;
  if (massLoss === 'winds') return { reimers: 0.5 };
  if (massLoss !== null && typeof massLoss === 'object') {
    checkOptions(`${caller}, massLoss`, massLoss, ['reimers']);
    checkRange(caller, 'massLoss.reimers', massLoss.reimers, 0, 5);
    return massLoss;
  }
  throw new TypeError(`${caller}: massLoss must be 'none', 'winds' or { reimers: 0.5 }, got ${describe(massLoss)}.`);
}

/** The choice in words, for results. */
export function massLossWords(wind: WindOptions | null): string {
  return wind === null ? 'none' : `winds, Reimers eta ${wind.reimers}`;
}

/** A star's life under a choice of winds. */
export function lifeUnder(fits: Fits, wind: WindOptions | null): Life | WindLife {
  return wind === null ? new Life(fits) : new WindLife(fits, wind);
}

interface Prepared {
  readonly life: LifeSource;
  readonly table: MomentTable;
}

const prepared = new WeakMap<Fits, Map<number, Prepared>>();

/** Life and table of moments of one metallicity and choice of winds, made once. */
export function prepare(fits: Fits, wind: WindOptions | null): Prepared {
  let known = prepared.get(fits);
  if (known === undefined) {
    known = new Map();
    prepared.set(fits, known);
  }
  const key = wind === null ? -1 : wind.reimers;
  let one = known.get(key);
  if (one === undefined) {
    const life = lifeUnder(fits, wind);
    one = { life, table: makeMomentTable(fits, life) };
    if (known.size >= 8) known.delete(known.keys().next().value as number);
    known.set(key, one);
  }
  return one;
}
