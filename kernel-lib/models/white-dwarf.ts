import { SOLAR_BOLOMETRIC_MAGNITUDE, SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkChoice, checkOptions, checkRange, describe } from '../quantity/options';
import { presentable } from '../quantity/present';
import { progenitorMass } from './initial-final-mass';
import { mainSequenceLifetime } from './lifetime';
import { type Composition, type Masses, massArray, zOf } from './metallicity';
import { PHASE } from './phases/phase';
import { coolingLuminosity, coreBaryons } from './phases/white-dwarf-law';
import { numbersPresentation } from './show';
import { track } from './track';

/** What the core is made of. */
export type WhiteDwarfCore = 'helium' | 'carbon-oxygen' | 'oxygen-neon';

/**
 * Cooling laws: `modified` (Hurley & Shara 2003), the one for dates; `mestel`, the textbook case (Iben & Tutukov 1984);
 * `simple`, that of Hurley, Pols & Tout 2000, which is about ten times too faint at 1 Gyr and only fit for drawing.
 */
export type CoolingLaw = 'modified' | 'mestel' | 'simple';

const CORES: Readonly<Record<WhiteDwarfCore, number>> = {
  helium: PHASE.heliumWhiteDwarf,
  'carbon-oxygen': PHASE.carbonWhiteDwarf,
  'oxygen-neon': PHASE.neonWhiteDwarf,
};
const CORE_NAMES = Object.keys(CORES) as WhiteDwarfCore[];
const LAWS: readonly CoolingLaw[] = ['modified', 'mestel', 'simple'];

/** How far ages by each law are trusted. */
const TRUST: Readonly<Record<CoolingLaw, string>> = {
  modified:
    'modified cooling law (Hurley & Shara 2003): against published cooling sequences of 0.6 solar masses (from memory) ages come out up to 40 % short between 0.3 and 6 Gyr; for a dated cluster use a published grid',
  mestel:
    "Mestel's law: no crystallisation, no neutrinos, one opacity law; good to a factor of 2 between 0.1 and 3 Gyr, far too bright later",
  simple: 'law of Hurley, Pols & Tout 2000: about ten times too faint at 1 Gyr; not for dates',
};

/**
 * Radius of a white dwarf of zero temperature.
 * @param mass    solar masses, a number or shape (n), above 0 and below the limiting mass 5.816/meanWeight^2 (1.454)
 * @param options meanWeight: nucleons per electron, 1 to 3 (default 2)
 * @returns solar radii; NaN outside the range
 * @throws TypeError on an unknown option or a mass that is no number; RangeError on meanWeight
 * @example whiteDwarfRadius(0.6) // => 0.01258
 * Source: Nauenberg 1972, ApJ 175, 417, Eqs 27-28 (numbers of the equations from memory).
 */
export function whiteDwarfRadius(mass: number, options?: { readonly meanWeight?: number }): number;
export function whiteDwarfRadius(mass: ArrayLike<number>, options?: { readonly meanWeight?: number }): Float64Array;
export function whiteDwarfRadius(mass: Masses, options: { readonly meanWeight?: number } = {}): number | Float64Array {
  checkOptions('whiteDwarfRadius', options, ['meanWeight']);
  const { meanWeight = 2 } = options;
  checkRange('whiteDwarfRadius', 'meanWeight', meanWeight, 1, 3);
  const limit = 5.816 / meanWeight ** 2;
  const out = Float64Array.from(massArray('whiteDwarfRadius', 'mass', mass), (m) => {
    if (!(m > 0 && m < limit)) return Number.NaN;
    const x = Math.cbrt(m / limit);
    return ((0.0225 / meanWeight) * Math.sqrt(1 - x ** 4)) / x;
  });
  return typeof mass === 'number' ? out[0] : out;
}

/** What sets the cooling of a white dwarf. */
export interface CoolingOptions extends Composition {
  /** Mass of the white dwarf, solar; 0.1 to 1.4. */
  readonly mass: number;
  readonly core?: WhiteDwarfCore;
  readonly law?: CoolingLaw;
}

/** A white dwarf at an age since it formed. */
export interface CoolingWhiteDwarf {
  readonly mass: number;
  /** Gyr since it formed. */
  readonly age: number;
  /** Solar. */
  readonly luminosity: number;
  /** Solar radii. */
  readonly radius: number;
  /** K. */
  readonly temperature: number;
  readonly core: WhiteDwarfCore;
  readonly law: CoolingLaw;
  /** How far the law is trusted. */
  readonly trust: string;
}

function luminosityAt(law: CoolingLaw, mass: number, z: number, baryons: number, age: number): number {
  if (law === 'modified') return coolingLuminosity(mass, z, baryons, age);
  if (law === 'simple') return (635 * mass * z ** 0.4) / (baryons * (age + 0.1)) ** 1.4;
  return mass * ((age * baryons) / (8.8 * 12)) ** -1.4;
}

/** Time in Myr at which a law reaches a luminosity. */
function timeAt(law: CoolingLaw, mass: number, z: number, baryons: number, luminosity: number): number {
  if (law === 'mestel') return ((8.8 * 12) / baryons) * (mass / luminosity) ** (5 / 7);
  const scale = mass * z ** 0.4;
  if (law === 'simple') return ((635 * scale) / luminosity) ** (1 / 1.4) / baryons - 0.1;
  const early = ((300 * scale) / luminosity) ** (1 / 1.18) / baryons - 0.1;
  if (early < 9000) return early;
  const late = ((300 * (9000 * baryons) ** 5.3 * scale) / luminosity) ** (1 / 6.48) / baryons - 0.1;
  return Math.max(9000, late);
}

function checkCooling(caller: string, options: CoolingOptions): { z: number; baryons: number } {
  const { mass, core = 'carbon-oxygen', law = 'modified' } = options;
  checkChoice(caller, 'core', core, CORE_NAMES);
  checkChoice(caller, 'law', law, LAWS);
  checkRange(caller, 'mass', mass, 0.1, 1.4, 'solar masses');
  const z = zOf(caller, options);
  checkRange(caller, 'z', z, 1e-4 * (1 - 1e-9), 0.03 * (1 + 1e-9));
  return { z, baryons: coreBaryons(CORES[core]) };
}

/**
 * Luminosity, radius and temperature of a cooling white dwarf.
 * @param options mass: 0.1 to 1.4 solar masses; age: Gyr since it formed; core: `helium`, `carbon-oxygen` (default) or
 *   `oxygen-neon`; law: `modified` (default), `mestel` or `simple`; metallicity ([Fe/H]) or z of the star it came from
 * @returns frozen record with how far the law is trusted
 * @throws TypeError on an unknown option or choice; RangeError on mass, age or composition out of range
 * @example whiteDwarfCooling({ mass: 0.6, age: 1 }).luminosity // => 4.3e-4
 * Source: Hurley & Shara 2003, ApJ 589, 179 (modified); Iben & Tutukov 1984, ApJ 282, 615, with a mean molecular weight of 2
 * (mestel); Hurley, Pols & Tout 2000, Eq. 90 (simple). All three from memory.
 */
export function whiteDwarfCooling(options: CoolingOptions & { readonly age: number }): CoolingWhiteDwarf {
  checkOptions('whiteDwarfCooling', options, ['mass', 'age', 'core', 'law', 'metallicity', 'z']);
  const { mass, age, core = 'carbon-oxygen', law = 'modified' } = options;
  const { z, baryons } = checkCooling('whiteDwarfCooling', options);
  checkRange('whiteDwarfCooling', 'age', age, 0, 20, 'Gyr');
  const luminosity = luminosityAt(law, mass, z, baryons, age * 1000);
  const radius = whiteDwarfRadius(mass);
  const temperature = SOLAR_TEMPERATURE * (luminosity / radius ** 2) ** 0.25;
  const star = { mass, age, luminosity, radius, temperature, core, law, trust: TRUST[law] };
  return presentable(star, numbersPresentation('Cooling white dwarf', star));
}

/** How old a white dwarf is. */
export interface WhiteDwarfAge {
  readonly mass: number;
  /** Solar. */
  readonly luminosity: number;
  /** Gyr since the white dwarf formed. */
  readonly coolingAge: number;
  /** Mass of the star it came from, solar; NaN outside the observed relation. */
  readonly initialMass: number;
  /** Gyr on the main sequence. */
  readonly mainSequenceLifetime: number;
  /** Gyr from zero age to the white dwarf; NaN without an initial mass. */
  readonly progenitorLifetime: number;
  /** Sum of the cooling age and the lifetime before it, Gyr. */
  readonly totalAge: number;
  readonly core: WhiteDwarfCore;
  readonly law: CoolingLaw;
  readonly trust: string;
}

/**
 * Age of a white dwarf: the time since it formed from its luminosity, and the life of the star before it from the observed
 * relation between initial and final mass.
 * @param options mass: 0.1 to 1.4 solar masses; one of luminosity (solar), temperature (K) or bolometricMagnitude (mag); core,
 *   law, metallicity or z as whiteDwarfCooling
 * @returns frozen record, ages in Gyr; `trust` says how far the law is believed
 * @throws TypeError on an unknown option or choice, or unless exactly one of the three is given; RangeError out of range
 * @example whiteDwarfAge({ mass: 0.6, luminosity: 1e-3 }).coolingAge // => 0.49
 * Source: laws as whiteDwarfCooling; Cummings et al. 2018, ApJ 866, 21; Hurley, Pols & Tout 2000 (lifetimes).
 */
export function whiteDwarfAge(
  options: CoolingOptions & {
    readonly luminosity?: number;
    readonly temperature?: number;
    readonly bolometricMagnitude?: number;
  },
): WhiteDwarfAge {
  const known = ['mass', 'luminosity', 'temperature', 'bolometricMagnitude', 'core', 'law', 'metallicity', 'z'];
  checkOptions('whiteDwarfAge', options, known);
  const { mass, core = 'carbon-oxygen', law = 'modified' } = options;
  const { z, baryons } = checkCooling('whiteDwarfAge', options);
  const luminosity = luminosityFrom(options);
  const coolingAge = Math.max(0, timeAt(law, mass, z, baryons, luminosity) / 1000);
  const initialMass = progenitorMass(mass);
  const hasProgenitor = Number.isFinite(initialMass);
  const life = hasProgenitor ? track({ mass: initialMass, z, points: 60 }) : null;
  const progenitorLifetime = life === null ? Number.NaN : life.age[life.count - 1];
  const result = {
    mass,
    luminosity,
    coolingAge,
    initialMass,
    mainSequenceLifetime: hasProgenitor ? mainSequenceLifetime({ mass: initialMass, z }) : Number.NaN,
    progenitorLifetime,
    totalAge: coolingAge + progenitorLifetime,
    core,
    law,
    trust: TRUST[law],
  };
  return presentable(result, numbersPresentation('Age of a white dwarf', result));
}

function luminosityFrom(options: {
  mass: number;
  luminosity?: number;
  temperature?: number;
  bolometricMagnitude?: number;
}): number {
  const { mass, luminosity, temperature, bolometricMagnitude } = options;
  const given = [luminosity, temperature, bolometricMagnitude].filter((x) => x !== undefined);
  if (given.length !== 1 || typeof given[0] !== 'number') {
    throw new TypeError(
      `whiteDwarfAge: give one of luminosity (solar), temperature (K) or bolometricMagnitude (mag) as a number, got ${
        given.length === 1 ? describe(given[0]) : `${given.length} of them`
      }.`,
    );
  }
  if (bolometricMagnitude !== undefined) return 10 ** (0.4 * (SOLAR_BOLOMETRIC_MAGNITUDE - bolometricMagnitude));
  if (luminosity !== undefined) {
    checkRange('whiteDwarfAge', 'luminosity', luminosity, 1e-7, 1e4, 'solar');
    return luminosity;
  }
  checkRange('whiteDwarfAge', 'temperature', temperature as number, 1000, 250000, 'K');
  return whiteDwarfRadius(mass) ** 2 * ((temperature as number) / SOLAR_TEMPERATURE) ** 4;
}
