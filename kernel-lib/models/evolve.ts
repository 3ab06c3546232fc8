import { SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkOptions, describe } from '../quantity/options';
import { presentable } from '../quantity/present';
import { fitsAt } from './fits';
import { type Composition, type Masses, massArray, metallicityOf, whyNotMass, whyNotZ, zOf } from './metallicity';
import { PHASE_NAMES, StarState } from './phases/phase';
import { columnsPresentation, numbersPresentation } from './show';
import { lifeUnder, type MassLoss, massLossWords, windsOf } from './winds/mass-loss';
import type { WindOptions } from './winds/wind-rate';

/** What a star is like at an age. */
export interface EvolvedStar {
  /** Phase in words, such as 'main sequence'; '' where there is no answer. */
  readonly phase: string;
  readonly initialMass: number;
  /** Current mass, solar. */
  readonly mass: number;
  /** Solar. */
  readonly luminosity: number;
  /** Solar radii. */
  readonly radius: number;
  /** Effective temperature, K. */
  readonly temperature: number;
  /** log10 of surface gravity in cm/s2. */
  readonly logGravity: number;
  /** Core mass, solar: the helium core, or the common core once the branch pulses; 0 on the main sequence. */
  readonly coreMass: number;
  /** Gyr. */
  readonly age: number;
  /** [Fe/H], dex. */
  readonly metallicity: number;
  readonly z: number;
  /** The choice of mass loss. */
  readonly massLoss: string;
  /** Why the values are NaN, or ''. */
  readonly note: string;
}

/** As EvolvedStar, a column an entry; `phase` numbers into `phaseNames`, 255 where there is no answer. */
export interface EvolvedStars {
  readonly phase: Uint8Array;
  readonly phaseNames: readonly string[];
  readonly initialMass: Float64Array;
  readonly mass: Float64Array;
  readonly luminosity: Float64Array;
  readonly radius: Float64Array;
  readonly temperature: Float64Array;
  readonly logGravity: Float64Array;
  readonly coreMass: Float64Array;
  readonly age: number;
  readonly metallicity: number;
  readonly z: number;
  readonly massLoss: string;
  readonly note: string;
}

/** What evolve takes. */
export interface EvolveOptions extends Composition {
  /** Initial mass, solar masses: one or many. */
  readonly mass: Masses;
  /** Gyr since the zero-age main sequence. */
  readonly age: number;
  /** Mass loss, default 'none'. */
  readonly massLoss?: MassLoss;
}

/** Number that stands for no phase in columns. */
export const NO_PHASE = 255;

/**
 * A star, or many stars of one composition, at an age: luminosity, radius, temperature, core and phase.
 * @param options mass: initial mass in solar masses, a number or an array of shape (n), range 0.1 to 100; age: Gyr since the
 *   zero-age main sequence, 0 or more; metallicity: [Fe/H], dex (default 0, which is Z = 0.0188), or z: mass fraction,
 *   range 0.0001 to 0.03; massLoss: 'none' (default), 'winds' or { reimers: efficiency of Reimers' law, the paper's is 0.5 }
 * @returns numbers for one mass, columns of shape (n) for an array; NaN outside the range, `note` says why
 * @throws TypeError on an unknown option or a value that is no number
 * @example evolve({ mass: 1, age: 4.57 }).temperature // => 5790.6
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543; accuracy 5 % of the models it is fitted to (authors). White dwarfs cool
 * by Hurley & Shara 2003, ApJ 589, 179. Without winds the asymptotic branch ends at the observed white-dwarf mass of
 * Cummings et al. 2018, ApJ 866, 21: our choice in place of the paper's winds.
 */
export function evolve(options: EvolveOptions & { readonly mass: number }): EvolvedStar;
export function evolve(options: EvolveOptions & { readonly mass: ArrayLike<number> }): EvolvedStars;
export function evolve(options: EvolveOptions): EvolvedStar | EvolvedStars {
  checkOptions('evolve', options, ['mass', 'age', 'metallicity', 'z', 'massLoss']);
  const masses = massArray('evolve', 'mass', options.mass);
  const { age } = options;
  if (typeof age !== 'number') throw new TypeError(`evolve: age must be a number (Gyr), got ${describe(age)}.`);
  const wind = windsOf('evolve', options.massLoss ?? 'none');
  const z = zOf('evolve', options);
  const n = masses.length;
  const column = () => new Float64Array(n).fill(Number.NaN);
  const stars = {
    phase: new Uint8Array(n).fill(NO_PHASE),
    phaseNames: PHASE_NAMES,
    initialMass: Float64Array.from(masses),
    mass: column(),
    luminosity: column(),
    radius: column(),
    temperature: column(),
    logGravity: column(),
    coreMass: column(),
    age,
    metallicity: metallicityOf(z),
    z,
    massLoss: massLossWords(wind),
    note: whyNotZ(z) || (age >= 0 && Number.isFinite(age) ? '' : `age ${age} Gyr is not 0 or more`),
  };
  if (stars.note === '') stars.note = fill(stars, age * 1000, wind);
  if (typeof options.mass !== 'number') return presentable(stars, columnsPresentation('Evolved stars', stars));
  const { phase, phaseNames, ...rest } = stars;
  const one = Object.fromEntries(
    Object.entries(rest).map(([k, v]) => [k, ArrayBuffer.isView(v) ? (v as Float64Array)[0] : v]),
  );
  const star = { phase: phase[0] === NO_PHASE ? '' : phaseNames[phase[0]], ...one } as unknown as EvolvedStar;
  return presentable(star, numbersPresentation('Evolved star', star));
}

type Columns = {
  -readonly [K in keyof EvolvedStars]: EvolvedStars[K];
};

function fill(stars: Columns, time: number, wind: WindOptions | null): string {
  const life = lifeUnder(fitsAt(stars.z), wind);
  const state = new StarState();
  let note = '';
  for (let i = 0; i < stars.initialMass.length; i++) {
    const why = whyNotMass(stars.initialMass[i]);
    if (why !== '') {
      note ||= why;
      continue;
    }
    life.setMass(stars.initialMass[i]);
    life.stateIn(life.phaseAt(time), time, state);
    stars.phase[i] = state.phase;
    stars.mass[i] = state.mass;
    stars.luminosity[i] = state.luminosity;
    stars.radius[i] = state.radius;
    stars.temperature[i] = SOLAR_TEMPERATURE * Math.sqrt(Math.sqrt(state.luminosity / state.radius ** 2));
    stars.logGravity[i] = SOLAR_LOG_GRAVITY + Math.log10(state.mass / state.radius ** 2);
    stars.coreMass[i] = state.coreMass;
  }
  return note;
}
