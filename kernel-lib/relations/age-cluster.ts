import { Catalogue } from '../catalogue/catalogue';
import { evolve, NO_PHASE } from '../models/evolve';
import { INITIAL_MASS_FUNCTIONS, type InitialMassFunction, initialMassFunction } from '../models/initial-mass-function';
import { PHASE, PHASE_NAMES } from '../models/phases/phase';
import { checkChoice, checkOptions, checkRange, describe } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import { STAR_COLUMNS } from '../stars/columns';
import { evolutionaryState } from './evolutionary-state';

/** Options of `ageCluster`. */
export interface AgeClusterOptions {
  /** Age to show the cluster at, Gyr, 0.001 to 20. */
  readonly age: number;
  /** Present age, Gyr: needed when stars come as a catalogue with log_teff and log_l. */
  readonly presentAge?: number;
  /** [Fe/H], dex. Default: 0. */
  readonly metallicity?: number;
  /**
   * Adds the stars that have died by the present age, in the numbers that this initial mass function expects from the stars given, up to
   * 60 solar masses. Default: none are added.
   */
  readonly addDead?: InitialMassFunction;
  /** Default: 1. */
  readonly seed?: number;
}

/** A cluster at another age. */
export interface AgedCluster {
  /** Gyr. */
  readonly age: number;
  readonly count: number;
  /** Stars in each phase, remnants included. */
  readonly phaseCounts: Readonly<Record<string, number>>;
  /** White dwarfs, neutron stars and black holes. */
  readonly remnants: number;
  /** Stars that were added for those that have died by the present age. */
  readonly added: number;
  /** Initial and present mass, log_teff, log_l and phase of every star; neutron stars and black holes have no place on the HR diagram. */
  readonly catalogue: Catalogue;
  readonly notes: readonly string[];
}

/** Most massive star that is added, solar. */
const HEAVIEST = 60;
const REMNANTS: readonly number[] = [
  PHASE.heliumWhiteDwarf,
  PHASE.carbonWhiteDwarf,
  PHASE.neonWhiteDwarf,
  PHASE.neutronStar,
  PHASE.blackHole,
];

/**
 * What the HR diagram of a cluster looks like at another age, with its remnants.
 * @param stars a catalogue with log_teff and log_l (placed on the isochrone of presentAge), or a list of initial masses, solar
 * @param options age (Gyr), presentAge, metallicity, addDead, seed
 * @returns frozen result with a catalogue to give to hrDiagram, and counts by phase
 * @throws TypeError on an unknown option or stars that are neither; RangeError on ages out of range; Error without the columns
 * @example ageCluster([0.8, 1, 2, 6], { age: 1 }).phaseCounts
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543. Binaries, and stars lost from the cluster, are not followed.
 */
export function ageCluster(stars: Catalogue | ArrayLike<number>, options: AgeClusterOptions): AgedCluster {
  const caller = 'ageCluster';
  checkOptions(caller, options, ['age', 'presentAge', 'metallicity', 'addDead', 'seed']);
  const { age, presentAge, metallicity = 0, addDead, seed = 1 } = options ?? {};
  checkRange(caller, 'age', age, 0.001, 20, 'Gyr');
  if (presentAge !== undefined) checkRange(caller, 'presentAge', presentAge, 0.001, 20, 'Gyr');
  if (addDead !== undefined) checkChoice(caller, 'addDead', addDead, INITIAL_MASS_FUNCTIONS);
  const notes: string[] = [];
  const known = massesOf(caller, stars, presentAge, metallicity, notes);
  const extra = addDead === undefined ? new Float64Array(0) : deadMasses(known, addDead, seed);
  const mass = Float64Array.from([...known, ...extra]);
  if (extra.length > 0) {
    notes.push(
      `${extra.length} stars above ${Number(Math.max(...known).toPrecision(3))} solar masses added by ${addDead}: they have died by now.`,
    );
  }
  const state = evolve({ mass, age, metallicity });
  const counts: Record<string, number> = {};
  let remnants = 0;
  for (const p of state.phase) {
    if (p === NO_PHASE) continue;
    counts[PHASE_NAMES[p]] = (counts[PHASE_NAMES[p]] ?? 0) + 1;
    if (REMNANTS.includes(p)) remnants++;
  }
  const shines = (i: number) => state.luminosity[i] > 0 && state.phase[i] < PHASE.neutronStar;
  const catalogue = new Catalogue({
    source: `cluster at ${Number(age.toPrecision(4))} Gyr`,
    rowCount: mass.length,
    columns: [
      { name: 'initial_mass', values: mass, unit: 'Msun', description: 'initial mass' },
      { name: 'mass', values: state.mass, unit: 'Msun', description: 'mass at this age' },
      column(STAR_COLUMNS.logTeff, 'log10 K', (i) => (shines(i) ? Math.log10(state.temperature[i]) : Number.NaN)),
      column(STAR_COLUMNS.logL, 'log10 Lsun', (i) => (shines(i) ? Math.log10(state.luminosity[i]) : Number.NaN)),
      {
        name: 'phase',
        values: Array.from(state.phase, (p) => (p === NO_PHASE ? null : PHASE_NAMES[p])),
        description: 'phase of life',
      },
    ],
    history: [],
  });
  function column(name: string, unit: string, f: (i: number) => number) {
    return {
      name,
      values: Float64Array.from({ length: mass.length }, (_, i) => f(i)),
      unit,
      description: `${name} at this age`,
    };
  }
  const order = PHASE_NAMES.filter((name) => counts[name] > 0);
  const phaseCounts = Object.freeze(Object.fromEntries(order.map((name) => [name, counts[name]])));
  const result: AgedCluster = {
    age,
    count: mass.length,
    phaseCounts,
    remnants,
    added: extra.length,
    catalogue,
    notes: Object.freeze(notes),
  };
  const title = `Cluster of ${mass.length} stars at ${Number(age.toPrecision(4))} Gyr: ${remnants} remnants`;
  const rows = () => order.map((name) => [name, String(counts[name])]);
  return presentable(result, {
    text: () => `${title}\n${textTable(['phase', 'stars'], rows())}\n${notes.join('\n')}`.trimEnd(),
    html: () =>
      `<div>${htmlTable(['phase', 'stars'], rows(), { caption: title, numeric: [1] })}${notes.map((t) => `<div>${escapeHtml(t)}</div>`).join('')}</div>`,
  });
}

function massesOf(
  caller: string,
  stars: Catalogue | ArrayLike<number>,
  presentAge: number | undefined,
  metallicity: number,
  notes: string[],
): Float64Array {
  if (!(stars instanceof Catalogue)) {
    if (stars === null || typeof stars !== 'object' || typeof stars.length !== 'number') {
      throw new TypeError(`${caller}: stars must be a Catalogue or a list of initial masses, got ${describe(stars)}.`);
    }
    return Float64Array.from(stars);
  }
  if (presentAge === undefined) {
    throw new TypeError(
      `${caller}: give presentAge (Gyr), on whose isochrone the stars of ${stars.source} are placed.`,
    );
  }
  const state = evolutionaryState(stars, { age: presentAge, metallicity, samples: 50 });
  const placed = state.mass.filter((_, i) => state.phase[i] !== null);
  if (placed.length < state.count) {
    notes.push(`${state.count - placed.length} stars lie off the isochrone of ${presentAge} Gyr and were left out.`);
  }
  return placed;
}

/** Masses above the heaviest star given, drawn in the number that the initial mass function expects. */
function deadMasses(known: Float64Array, name: InitialMassFunction, seed: number): Float64Array {
  const heaviest = known.reduce((a, b) => Math.max(a, b), 0);
  // Faint stars may be missing, so the upper half in mass sets the scale.
  const lightest = heaviest / 2;
  const here = known.filter((m) => m >= lightest).length;
  const cumulative = tabulate(name, heaviest, HEAVIEST);
  const expected = (here * cumulative.total) / tabulate(name, lightest, heaviest).total;
  const random = randomStream(seed);
  const count = Math.round(expected);
  return Float64Array.from({ length: Number.isFinite(count) ? count : 0 }, () => cumulative.at(random.uniform()));
}

function tabulate(name: InitialMassFunction, low: number, high: number) {
  const steps = 400;
  const mass = Float64Array.from({ length: steps + 1 }, (_, i) => low * (high / low) ** (i / steps));
  const sum = new Float64Array(steps + 1);
  for (let i = 1; i <= steps; i++) {
    const middle = Math.sqrt(mass[i] * mass[i - 1]);
    sum[i] = sum[i - 1] + initialMassFunction(name, middle) * (mass[i] - mass[i - 1]);
  }
  const total = high > low ? sum[steps] : 0;
  const at = (u: number): number => {
    let k = 1;
    while (k < steps && sum[k] < u * total) k++;
    return mass[k - 1] + ((u * total - sum[k - 1]) / (sum[k] - sum[k - 1])) * (mass[k] - mass[k - 1]);
  };
  return { total, at };
}
