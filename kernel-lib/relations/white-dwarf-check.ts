import { progenitorMass } from '../models/initial-final-mass';
import { track } from '../models/track';
import { type CoolingLaw, type WhiteDwarfCore, whiteDwarfAge, whiteDwarfRadius } from '../models/white-dwarf';
import { SOLAR_BOLOMETRIC_MAGNITUDE, SOLAR_TEMPERATURE } from '../quantity/constants';
import { type Measured, measuredFromSamples } from '../quantity/measured';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import { interpolate } from './mass-source';

/** Options of `whiteDwarfCheck`. */
export interface WhiteDwarfCheckOptions {
  /** Mass of the white dwarf, solar. Without it the radius, from temperature and luminosity together, gives the mass. */
  readonly mass?: number | Measured;
  /** Solar luminosities. */
  readonly luminosity?: number | Measured;
  /** K. */
  readonly temperature?: number | Measured;
  /** mag. */
  readonly bolometricMagnitude?: number | Measured;
  /** Age of the cluster from its turnoff, Gyr. */
  readonly turnoffAge: number | Measured;
  /** [Fe/H] of the progenitor, dex. Default: 0. */
  readonly metallicity?: number;
  /** Default: `carbon-oxygen`. */
  readonly core?: WhiteDwarfCore;
  /** Default: `modified`. */
  readonly law?: CoolingLaw;
  /** Relative error of the cooling ages. Default: 0.2, half of what the law is known to be off by at worst. */
  readonly coolingError?: number;
  /** Scatter of the final mass about the initial-final mass relation, solar. Default: 0.06 (Cummings et al. 2018). */
  readonly relationScatter?: number;
  /** Monte Carlo draws, 100 to 100,000. Default: 1000. */
  readonly samples?: number;
  /** Default: 1. */
  readonly seed?: number;
}

/** Total age of a white dwarf beside the turnoff age of its cluster. */
export interface WhiteDwarfCheck {
  /** Solar. */
  readonly mass: Measured;
  /** Solar radii, by the mass-radius relation of cold white dwarfs. */
  readonly radius: Measured;
  /** Solar. */
  readonly luminosity: Measured;
  /** Gyr since the white dwarf formed. */
  readonly coolingAge: Measured;
  /** Initial mass of the star it came from, solar. */
  readonly progenitorMass: Measured;
  /** Gyr from zero age to the white dwarf. */
  readonly progenitorLifetime: Measured;
  /** Gyr. */
  readonly totalAge: Measured;
  /** Gyr. */
  readonly turnoffAge: Measured;
  /** Total age less turnoff age, Gyr. */
  readonly difference: Measured;
  /** The difference in units of its standard error. */
  readonly sigmas: number;
  readonly agrees: boolean;
  readonly notes: readonly string[];
}

const OPTIONS = [
  'mass',
  'luminosity',
  'temperature',
  'bolometricMagnitude',
  'turnoffAge',
  'metallicity',
  'core',
  'law',
  'coolingError',
  'relationScatter',
  'samples',
  'seed',
];
/** Differences up to this many standard errors count as agreement. */
const AGREES = 2;

/**
 * Age of a white dwarf, cooling and life of its progenitor together, as an independent check of a cluster's turnoff age.
 * @param options mass (solar) with one of luminosity (solar), temperature (K) or bolometricMagnitude; or, without a mass, temperature
 *   with luminosity or magnitude; turnoffAge (Gyr); metallicity, core, law, coolingError, relationScatter, samples, seed
 * @returns frozen result with 68 % intervals and the difference in sigmas
 * @throws TypeError on an unknown option or a choice of data that does not fix the star; RangeError out of range
 * @example whiteDwarfCheck({ mass: 0.7, temperature: 20000, turnoffAge: 0.65 }).sigmas
 * Source: Hurley & Shara 2003 (cooling), Nauenberg 1972 (radius), Cummings et al. 2018 (initial-final mass), Hurley, Pols & Tout 2000.
 */
export function whiteDwarfCheck(options: WhiteDwarfCheckOptions): WhiteDwarfCheck {
  const caller = 'whiteDwarfCheck';
  checkOptions(caller, options, OPTIONS);
  const { metallicity = 0, core, law, coolingError = 0.2, relationScatter = 0.06, samples = 1000, seed = 1 } = options;
  checkRange(caller, 'coolingError', coolingError, 0, 2);
  checkRange(caller, 'relationScatter', relationScatter, 0, 0.5, 'solar masses');
  checkRange(caller, 'samples', samples, 100, 100000);
  const { mass, luminosity, temperature, bolometricMagnitude } = options;
  const lights = [luminosity, bolometricMagnitude].filter((v) => v !== undefined).length;
  const enough =
    mass === undefined ? temperature !== undefined && lights === 1 : lights + Number(temperature !== undefined) === 1;
  if (!enough) {
    throw new TypeError(
      `${caller}: give mass and one of luminosity, temperature, bolometricMagnitude; or, without a mass, temperature and one of the other two.`,
    );
  }
  const draw = (name: string, of: number | Measured) => drawer(caller, name, of);
  const drawMass = mass === undefined ? null : draw('mass', mass);
  const drawTemperature = temperature === undefined ? null : draw('temperature', temperature);
  const drawLight =
    luminosity !== undefined
      ? draw('luminosity', luminosity)
      : bolometricMagnitude !== undefined
        ? draw('bolometricMagnitude', bolometricMagnitude)
        : null;
  const drawAge = draw('turnoffAge', options.turnoffAge);
  const lifetimes = lifetimeTable(metallicity);
  const random = randomStream(seed);
  const n = Math.round(samples);
  const column = () => new Float64Array(n).fill(Number.NaN);
  const kept = {
    mass: column(),
    radius: column(),
    luminosity: column(),
    cooling: column(),
    progenitor: column(),
    life: column(),
    total: column(),
    turnoff: column(),
    difference: column(),
  };
  let outside = 0;
  for (let t = 0; t < n; t++) {
    const T = drawTemperature?.(random) ?? Number.NaN;
    let L = drawLight?.(random) ?? Number.NaN;
    if (bolometricMagnitude !== undefined) L = 10 ** (0.4 * (SOLAR_BOLOMETRIC_MAGNITUDE - L));
    let M = drawMass?.(random) ?? massOfRadius(Math.sqrt(L) * (SOLAR_TEMPERATURE / T) ** 2);
    const chance = random.normal();
    const scatter = random.normal();
    kept.turnoff[t] = drawAge(random);
    if (!(M >= 0.1 && M <= 1.4)) M = Number.NaN;
    const R = whiteDwarfRadius(M);
    if (Number.isNaN(L)) L = R ** 2 * (T / SOLAR_TEMPERATURE) ** 4;
    if (!(L >= 1e-7 && L <= 1e4) || Number.isNaN(M)) {
      outside++;
      continue;
    }
    kept.mass[t] = M;
    kept.radius[t] = R;
    kept.luminosity[t] = L;
    kept.cooling[t] = coolingOf(M, L, metallicity, core, law) * Math.exp(coolingError * chance);
    kept.progenitor[t] = progenitorMass(M + relationScatter * scatter);
    kept.life[t] = 10 ** interpolate(lifetimes.logMass, lifetimes.logLife, Math.log10(kept.progenitor[t]));
    kept.total[t] = kept.cooling[t] + kept.life[t];
    kept.difference[t] = kept.total[t] - kept.turnoff[t];
  }
  const notes: string[] = [];
  if (outside > 0)
    notes.push(`${outside} of ${n} draws have no such white dwarf (mass 0.1 to 1.4 solar) and were left out.`);
  const unknown = kept.total.filter(Number.isNaN).length - outside;
  if (unknown > 0) {
    notes.push(
      `${unknown} of ${n} draws have a mass outside the initial-final mass relation (initial masses 0.83 to 7.2): the total age is of the rest.`,
    );
  }
  const difference = measuredFromSamples(kept.difference, 'Gyr');
  const finite = kept.difference.filter(Number.isFinite);
  if (finite.length < n / 10) notes.push('Fewer than a tenth of the draws give a total age: no check is possible.');
  // The side of the interval that faces agreement.
  const side = difference.value > 0 ? difference.value - difference.lower : difference.upper - difference.value;
  const sigmas =
    finite.length < n / 10
      ? Number.NaN
      : side > 0
        ? difference.value / side
        : difference.value === 0
          ? 0
          : Number.POSITIVE_INFINITY * Math.sign(difference.value);
  notes.push(
    `Cooling ages taken as good to ${Math.round(100 * coolingError)} %, the initial-final mass relation to ${relationScatter} solar masses.`,
    whiteDwarfAge({ mass: 0.6, luminosity: 1e-3, law, core }).trust,
  );
  const result: WhiteDwarfCheck = {
    mass: measuredFromSamples(kept.mass, 'solar masses'),
    radius: measuredFromSamples(kept.radius, 'solar radii'),
    luminosity: measuredFromSamples(kept.luminosity, 'solar'),
    coolingAge: measuredFromSamples(kept.cooling, 'Gyr'),
    progenitorMass: measuredFromSamples(kept.progenitor, 'solar masses'),
    progenitorLifetime: measuredFromSamples(kept.life, 'Gyr'),
    totalAge: measuredFromSamples(kept.total, 'Gyr'),
    turnoffAge: measuredFromSamples(kept.turnoff, 'Gyr'),
    difference,
    sigmas,
    agrees: Math.abs(sigmas) <= AGREES,
    notes: Object.freeze(notes),
  };
  const verdict = Number.isNaN(sigmas)
    ? 'no verdict'
    : `${result.agrees ? 'agrees with' : 'differs from'} the turnoff age: ${sigmas < 0 ? '-' : '+'}${Math.abs(sigmas).toFixed(1)} sigma`;
  const rows = () => [
    ['mass', String(result.mass)],
    ['radius', String(result.radius)],
    ['luminosity', String(result.luminosity)],
    ['cooling age', String(result.coolingAge)],
    ['progenitor mass', String(result.progenitorMass)],
    ['progenitor lifetime', String(result.progenitorLifetime)],
    ['total age', String(result.totalAge)],
    ['turnoff age', String(result.turnoffAge)],
    ['difference', String(result.difference)],
  ];
  const title = `White dwarf: ${verdict}`;
  return presentable(result, {
    text: () => `${title}\n${textTable(['quantity', 'value'], rows())}\n${notes.join('\n')}`,
    html: () =>
      `<div>${htmlTable(['quantity', 'value'], rows(), { caption: title })}<ul>${notes.map((t) => `<li>${escapeHtml(t)}</li>`).join('')}</ul></div>`,
  });
}

type Draw = (random: { normal(): number }) => number;

function drawer(caller: string, name: string, of: number | Measured): Draw {
  if (typeof of === 'number') {
    if (!Number.isFinite(of)) throw new RangeError(`${caller}: ${name} is ${of}; it must be finite.`);
    return () => of;
  }
  const { value, lower, upper } = (of ?? {}) as Partial<Measured>;
  if (typeof value !== 'number' || typeof lower !== 'number' || typeof upper !== 'number' || !Number.isFinite(value)) {
    throw new TypeError(`${caller}: ${name} must be a number or a measured value, got ${describe(of)}.`);
  }
  const below = Number.isFinite(lower) ? value - lower : 0;
  const above = Number.isFinite(upper) ? upper - value : 0;
  return (random) => {
    const z = random.normal();
    return value + z * (z < 0 ? below : above);
  };
}

/** Cooling age alone; a helium core for masses that single stars do not leave changes nothing here, the core is the caller's choice. */
function coolingOf(
  mass: number,
  luminosity: number,
  metallicity: number,
  core: WhiteDwarfCore | undefined,
  law: CoolingLaw | undefined,
): number {
  return whiteDwarfAge({ mass, luminosity, metallicity, core, law }).coolingAge;
}

/** Mass of a cold white dwarf of a radius, solar; NaN outside 0.1 to 1.4 solar masses. The radius falls as the mass grows. */
function massOfRadius(radius: number): number {
  let low = 0.1;
  let high = 1.4;
  if (!(radius <= whiteDwarfRadius(low) && radius >= whiteDwarfRadius(high))) return Number.NaN;
  for (let k = 0; k < 50; k++) {
    const middle = (low + high) / 2;
    if (whiteDwarfRadius(middle) > radius) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Life up to the remnant against initial mass. */
function lifetimeTable(metallicity: number) {
  const logMass = Float64Array.from({ length: 40 }, (_, k) => Math.log10(0.8) + (k / 39) * Math.log10(8 / 0.8));
  const logLife = logMass.map((m) => {
    const life = track({ mass: 10 ** m, metallicity, points: 60 });
    return Math.log10(life.age[life.count - 1]);
  });
  return { logMass, logLife };
}
