import { Catalogue } from '../catalogue/catalogue';
import { evolve, NO_PHASE } from '../models/evolve';
import { isochrone } from '../models/isochrone';
import { mainSequenceLifetime } from '../models/lifetime';
import { PHASE_NAMES } from '../models/phases/phase';
import { type Measured, sortedQuantile } from '../quantity/measured';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import { STAR_COLUMNS } from '../stars/columns';
import { placeOnIsochrone } from './isochrone-place';

/** Options of `evolutionaryState`. */
export interface EvolutionaryStateOptions {
  /** Age of the cluster, Gyr, with or without its error. */
  readonly age: number | Measured;
  /** [Fe/H], dex. Default: 0. */
  readonly metallicity?: number;
  /** Monte Carlo draws of age and mass, 50 to 10,000. Default: 300. */
  readonly samples?: number;
  /** Default: 1. */
  readonly seed?: number;
}

/** Median and 68 % interval of every star, shape (n). */
interface Interval {
  readonly value: Float64Array;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

/** Where each star is in its life. */
export interface EvolutionaryState {
  readonly count: number;
  /** Gyr. */
  readonly age: number;
  /** Initial mass, solar: as given, or of the nearest point of the cluster's isochrone. */
  readonly mass: Float64Array;
  /** Phase in words; null where there is none. */
  readonly phase: readonly (string | null)[];
  /** Distance from the isochrone in units of the errors; NaN where masses were given. */
  readonly sigmasFromIsochrone: Float64Array;
  /** Gyr. */
  readonly mainSequenceLifetime: Float64Array;
  /** Share of the main-sequence life that is spent; more than 1 for stars past it. */
  readonly fractionSpent: Interval;
  /** Time until the star leaves the main sequence, Gyr; negative: since it left. */
  readonly timeToLeave: Interval;
  /** Stars in each phase. */
  readonly phaseCounts: Readonly<Record<string, number>>;
  readonly notes: readonly string[];
}

/** Beyond this a star does not belong to the isochrone. */
const OFF_ISOCHRONE = 4;

/**
 * Where stars are in their lives at the cluster's age: phase, share of the main-sequence life spent, time left on it.
 * @param stars a catalogue with log_teff and log_l (made by physicalProperties), whose stars are placed at the nearest point of the
 *   cluster's isochrone; or { mass, massError? }, initial masses in solar units, shape (n)
 * @param options age (Gyr), metallicity, samples, seed
 * @returns frozen columns with 68 % intervals from the errors of age and mass; NaN and null where a star lies outside the models
 * @throws TypeError on an unknown option or stars that are neither; RangeError on values out of range; Error without the columns
 * @example evolutionaryState({ mass: [1] }, { age: 4.57 }).fractionSpent.value[0] // => 0.42
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543.
 */
export function evolutionaryState(
  stars: Catalogue | { readonly mass: ArrayLike<number>; readonly massError?: ArrayLike<number> },
  options: EvolutionaryStateOptions,
): EvolutionaryState {
  const caller = 'evolutionaryState';
  checkOptions(caller, options, ['age', 'metallicity', 'samples', 'seed']);
  const { metallicity = 0, samples = 300, seed = 1 } = options ?? {};
  const age = ageOf(caller, options?.age);
  checkRange(caller, 'samples', samples, 50, 10000);
  const notes: string[] = [];
  const placed = stars instanceof Catalogue ? place(caller, stars, age.value, metallicity) : given(caller, stars);
  const { mass, massError, sigmas } = placed;
  const n = mass.length;
  const off = sigmas.filter((s) => s > OFF_ISOCHRONE).length;
  if (off > 0) notes.push(`${off} stars lie more than ${OFF_ISOCHRONE} sigma from the isochrone and have no state.`);
  const state = evolve({ mass, age: age.value, metallicity });
  const known = (i: number) => state.phase[i] !== NO_PHASE && !(sigmas[i] > OFF_ISOCHRONE);
  const phase = Array.from(mass, (_, i) => {
    if (!known(i)) return null;
    return placed.phase?.[i] ?? PHASE_NAMES[state.phase[i]];
  });
  const lifetime = mainSequenceLifetime({ mass, metallicity });
  const draws = Math.round(samples);
  const spent = new Float64Array(n * draws).fill(Number.NaN);
  const left = new Float64Array(n * draws).fill(Number.NaN);
  const random = randomStream(seed);
  const drawnMass = new Float64Array(n);
  for (let t = 0; t < draws; t++) {
    // Lower and upper half of the age's interval may differ.
    const chance = random.normal();
    const drawnAge = Math.max(0, age.value + chance * (chance < 0 ? age.below : age.above));
    for (let i = 0; i < n; i++) drawnMass[i] = mass[i] + massError[i] * random.normal();
    const life = mainSequenceLifetime({ mass: drawnMass, metallicity });
    for (let i = 0; i < n; i++) {
      if (!known(i)) continue;
      spent[i * draws + t] = drawnAge / life[i];
      left[i * draws + t] = life[i] - drawnAge;
    }
  }
  const counts: Record<string, number> = {};
  for (const name of PHASE_NAMES) {
    const count = phase.filter((p) => p === name).length;
    if (count > 0) counts[name] = count;
  }
  if (placed.phase !== null) notes.push('Masses and phases: of the nearest point of the isochrone.');
  const result: EvolutionaryState = {
    count: n,
    age: age.value,
    mass,
    phase: Object.freeze(phase),
    sigmasFromIsochrone: sigmas,
    mainSequenceLifetime: lifetime,
    fractionSpent: intervals(spent, n, draws),
    timeToLeave: intervals(left, n, draws),
    phaseCounts: Object.freeze(counts),
    notes: Object.freeze(notes),
  };
  return show(result);
}

/** Value and both halves of the interval of an age in Gyr. */
export function ageOf(
  caller: string,
  age: number | Measured | undefined,
): { value: number; below: number; above: number } {
  if (typeof age === 'number') {
    checkRange(caller, 'age', age, 0.001, 20, 'Gyr');
    return { value: age, below: 0, above: 0 };
  }
  const { value, lower, upper } = (age ?? {}) as Partial<Measured>;
  if (typeof value !== 'number' || typeof lower !== 'number' || typeof upper !== 'number') {
    throw new TypeError(`${caller}: age must be Gyr, a number or a measured value, got ${describe(age)}.`);
  }
  checkRange(caller, 'age', value, 0.001, 20, 'Gyr');
  const finite = (v: number) => (Number.isFinite(v) ? v : 0);
  return { value, below: finite(value - lower), above: finite(upper - value) };
}

interface Placed {
  readonly mass: Float64Array;
  readonly massError: Float64Array;
  readonly sigmas: Float64Array;
  readonly phase: readonly (string | null)[] | null;
}

function given(caller: string, stars: { mass: ArrayLike<number>; massError?: ArrayLike<number> }): Placed {
  checkOptions(`${caller}, stars`, stars, ['mass', 'massError']);
  const { mass, massError } = stars;
  if (mass === null || typeof mass !== 'object' || typeof mass.length !== 'number') {
    throw new TypeError(`${caller}: mass must be a list of solar masses, got ${describe(mass)}.`);
  }
  if (massError !== undefined && massError.length !== mass.length) {
    throw new RangeError(`${caller}: massError has ${massError.length} values for ${mass.length} stars.`);
  }
  return {
    mass: Float64Array.from(mass),
    massError: Float64Array.from(mass, (_, i) => massError?.[i] || 0),
    sigmas: new Float64Array(mass.length).fill(Number.NaN),
    phase: null,
  };
}

function place(caller: string, catalogue: Catalogue, age: number, metallicity: number): Placed {
  const { logTeff, logL } = hrColumns(caller, catalogue);
  const errorOf = (name: string) => (catalogue.has(name) ? catalogue.numbers(name) : null);
  const iso = isochrone({ logAge: 9 + Math.log10(age), metallicity, bands: [], points: 1500 });
  const logLError = errorOf(STAR_COLUMNS.logLError);
  const { point, sigmas } = placeOnIsochrone(iso, logTeff, logL, errorOf(STAR_COLUMNS.logTeffError), logLError);
  const at = (column: ArrayLike<number>) => Float64Array.from(point, (k) => (k < 0 ? Number.NaN : column[k]));
  const mass = at(iso.initialMass);
  // Along the main sequence log L rises about four times as fast as log M (common practice, no source).
  const massError = mass.map((m, i) => m * Math.LN10 * (Math.hypot(0.03, logLError?.[i] || 0) / 4));
  return { mass, massError, sigmas, phase: Array.from(point, (k) => (k < 0 ? null : iso.phaseNames[iso.phase[k]])) };
}

/** log_teff and log_l of a catalogue. @throws Error saying how to get them */
export function hrColumns(caller: string, catalogue: Catalogue): { logTeff: Float64Array; logL: Float64Array } {
  for (const name of [STAR_COLUMNS.logTeff, STAR_COLUMNS.logL]) {
    if (!catalogue.has(name)) {
      throw new Error(`${caller}: ${catalogue.source} has no column ${name}; call physicalProperties first.`);
    }
  }
  return { logTeff: catalogue.numbers(STAR_COLUMNS.logTeff), logL: catalogue.numbers(STAR_COLUMNS.logL) };
}

function intervals(kept: Float64Array, n: number, draws: number): Interval {
  const column = (fraction: number) =>
    Float64Array.from({ length: n }, (_, i) => {
      const sorted = kept
        .slice(i * draws, (i + 1) * draws)
        .filter(Number.isFinite)
        .sort();
      return sorted.length * 2 > draws ? sortedQuantile(sorted, fraction) : Number.NaN;
    });
  return Object.freeze({ value: column(0.5), lower: column(0.158655254), upper: column(0.841344746) });
}

const SHOWN = 10;

function show(state: EvolutionaryState): EvolutionaryState {
  const number = (v: number) => (Number.isNaN(v) ? '' : String(Number(v.toPrecision(3))));
  const head = ['row', 'mass', 'phase', 'main-sequence life (Gyr)', 'spent', 'time to leave (Gyr)'];
  const rows = () =>
    Array.from({ length: Math.min(SHOWN, state.count) }, (_, i) => [
      String(i + 1),
      number(state.mass[i]),
      state.phase[i] ?? '',
      number(state.mainSequenceLifetime[i]),
      number(state.fractionSpent.value[i]),
      number(state.timeToLeave.value[i]),
    ]);
  const title = `Evolutionary state of ${state.count} stars at ${number(state.age)} Gyr`;
  const counts = () =>
    Object.entries(state.phaseCounts)
      .map(([name, count]) => `${count} ${name}`)
      .join(', ');
  const lines = () => [counts(), ...state.notes];
  return presentable(state, {
    text: () => `${title}\n${textTable(head, rows())}\n${lines().join('\n')}`,
    html: () =>
      `<div>${htmlTable(head, rows(), { caption: title, numeric: [1, 3, 4, 5] })}${lines()
        .map((l) => `<div>${escapeHtml(l)}</div>`)
        .join('')}</div>`,
  });
}
