import { Catalogue } from '../catalogue/catalogue';
import { bolometricCorrection } from '../photometry/bolometric-correction';
import { temperatureFromColour } from '../photometry/colour-temperature';
import type { Band, ColourName } from '../quantity/band';
import {
  PARSEC_M,
  SOLAR_BOLOMETRIC_MAGNITUDE,
  SOLAR_LOG_GRAVITY,
  SOLAR_LUMINOSITY_W,
  SOLAR_TEMPERATURE,
  WIEN_DISPLACEMENT,
} from '../quantity/constants';
import { type Measured, measuredFromSamples, sortedQuantile } from '../quantity/measured';
import { checkChoice, checkOptions, checkRange, describe } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import { hasColour, preferredColour, preferredMagnitude } from '../stars/observed-colour';
import {
  diameterBy,
  RADII_PER_MAS_PARSEC,
  SURFACE_BRIGHTNESS,
  SURFACE_BRIGHTNESS_NAMES,
  type SurfaceBrightnessName,
} from './angular-diameter';
import { LightDraws } from './light-draws';
import type { MassLuminosityFit } from './mass-luminosity';
import { interpolate, modelSequence, risingPart } from './mass-source';

/** Options of `inferRadii`. */
export interface InferRadiiOptions {
  /** Distance that all stars share, pc, with or without its error. */
  readonly distance: number | Measured;
  /** Reddening E(B-V) that all stars share, mag, with or without its error. */
  readonly ebv: number | Measured;
  /** [Fe/H], dex. Default: 0. */
  readonly metallicity?: number;
  /** Colour that gives the temperature. Default: the best the catalogue has. */
  readonly colour?: ColourName;
  /** Band that gives the luminosity. Default: G with Gaia colours, else V. */
  readonly magnitude?: Band;
  /** Surface-brightness-colour relation. Default: the least scattered one that the catalogue has the colours for. */
  readonly surfaceBrightness?: SurfaceBrightnessName;
  /** Masses for the model radius: a column or list of solar masses, or a fitted mass-luminosity relation. Default: the models' own. */
  readonly mass?: string | ArrayLike<number> | MassLuminosityFit;
  /** Standard errors of masses given as a column or list, solar. Default: none. */
  readonly massError?: string | ArrayLike<number>;
  /** Age of the models, Gyr. Default: zero age, whose radii are lower limits. */
  readonly age?: number;
  /** A(V) / E(B-V). Default 3.1. */
  readonly rV?: number;
  /** Extinction law. Default `CCM89`. */
  readonly law?: string;
  /** Monte Carlo draws, 50 to 100,000. Default: 400. */
  readonly samples?: number;
  /** Default: 1. */
  readonly seed?: number;
}

/** A quantity of every star: median and 68 % interval, shape (n). NaN where it cannot be had. */
export interface MeasuredColumn {
  readonly value: Float64Array;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
  readonly unit: string;
}

/** A way to a radius. */
export type RadiusWay = 'Stefan-Boltzmann' | 'angular diameter' | 'model';

/** How two ways agree. */
export interface RadiusAgreement {
  readonly first: RadiusWay;
  readonly second: RadiusWay;
  /** Stars that have both. */
  readonly count: number;
  /** Median over the stars of second over first, with its interval: shared errors of distance and reddening taken into account. */
  readonly ratio: Measured;
  /** Stars whose two radii differ by more than 3 of their own standard errors. */
  readonly beyondThreeSigma: number;
}

/** Radii of stars by three ways, and what follows from them. */
export interface RadiusInference {
  readonly count: number;
  /** Solar radii. */
  readonly stefanBoltzmann: MeasuredColumn;
  readonly angularDiameter: MeasuredColumn;
  readonly model: MeasuredColumn;
  /** Limb-darkened angular diameter, mas. */
  readonly diameter: MeasuredColumn;
  /** K. */
  readonly temperature: MeasuredColumn;
  /** Solar luminosities. */
  readonly luminosity: MeasuredColumn;
  /** Solar masses: as given, by the relation, or by the models at the star's luminosity. */
  readonly mass: MeasuredColumn;
  /** log10 of g in cm s^-2, from that mass and the Stefan-Boltzmann radius. */
  readonly logGravity: MeasuredColumn;
  /** g cm^-3, from the same. */
  readonly density: MeasuredColumn;
  /** Wavelength of the peak of a black body, micrometres. */
  readonly wienPeak: MeasuredColumn;
  /** Bolometric flux at the Earth without extinction, W m^-2. */
  readonly flux: MeasuredColumn;
  readonly agreement: readonly RadiusAgreement[];
  readonly notes: readonly string[];
  /** The stars with radii by the three ways, their errors, and the rest as columns. */
  readonly catalogue: Catalogue;
}

const OPTIONS = [
  'distance',
  'ebv',
  'metallicity',
  'colour',
  'magnitude',
  'surfaceBrightness',
  'mass',
  'massError',
  'age',
  'rV',
  'law',
  'samples',
  'seed',
];
/** Mean density of the Sun, g cm^-3: 3 GM / (4 pi G R^3) with IAU 2015 nominal values and G of CODATA 2018. */
const SOLAR_DENSITY = 1.40978;
const QUANTITIES = [
  'stefanBoltzmann',
  'angularDiameter',
  'model',
  'diameter',
  'temperature',
  'luminosity',
  'mass',
  'logGravity',
  'density',
  'wienPeak',
  'flux',
] as const;
type Quantity = (typeof QUANTITIES)[number];
const UNITS: Readonly<Record<Quantity, string>> = {
  stefanBoltzmann: 'Rsun',
  angularDiameter: 'Rsun',
  model: 'Rsun',
  diameter: 'mas',
  temperature: 'K',
  luminosity: 'Lsun',
  mass: 'Msun',
  logGravity: 'log cm/s2',
  density: 'g/cm3',
  wienPeak: 'um',
  flux: 'W/m2',
};
const COLUMN_NAMES: Readonly<Record<Quantity, string>> = {
  stefanBoltzmann: 'radius_stefan_boltzmann',
  angularDiameter: 'radius_angular',
  model: 'radius_model',
  diameter: 'angular_diameter',
  temperature: 'temperature',
  luminosity: 'luminosity',
  mass: 'mass_inferred',
  logGravity: 'log_gravity',
  density: 'density',
  wienPeak: 'wien_peak',
  flux: 'flux_at_earth',
};
const WAYS: readonly (readonly [RadiusWay, Quantity])[] = [
  ['Stefan-Boltzmann', 'stefanBoltzmann'],
  ['angular diameter', 'angularDiameter'],
  ['model', 'model'],
];
/** Draws of all stars are kept up to this many numbers a quantity. */
const MOST_KEPT = 4e6;

/**
 * Radii of the stars of a cluster by three ways: luminosity and temperature (Stefan-Boltzmann); angular diameter from a
 * surface-brightness-colour relation, and distance; the stellar models at the star's mass. Errors by Monte Carlo: in every draw one
 * distance and one reddening for all stars, and for each star its own photometry and the scatter of the relations.
 * @param catalogue stars with magnitudes or colours by role
 * @param options distance (pc), ebv (mag), metallicity, colour, magnitude, surfaceBrightness, mass and massError, age (Gyr), rV, law,
 *   samples, seed
 * @returns frozen result: the three radii of every star with 68 % intervals, how they agree, gravity, density, Wien peak, flux
 * @throws TypeError on an unknown option or relation; RangeError on values out of range; Error without a colour or magnitude
 * @example inferRadii(members, { distance: d.distance, ebv: 0.03, age: 0.7 }).agreement
 * Source: nominal solar values of IAU 2015 Resolution B3; Kervella et al. 2004; Boyajian et al. 2014; Hurley, Pols & Tout 2000.
 */
export function inferRadii(catalogue: Catalogue, options: InferRadiiOptions): RadiusInference {
  const caller = 'inferRadii';
  checkOptions(caller, options, OPTIONS);
  if (!(catalogue instanceof Catalogue)) {
    throw new TypeError(`${caller}: the first argument must be a Catalogue, got ${describe(catalogue)}.`);
  }
  const { metallicity = 0, rV = 3.1, law = 'CCM89', samples = 400, seed = 1, age } = options;
  checkRange(caller, 'samples', samples, 50, 100000);
  const distance = withError(caller, 'distance', options.distance);
  checkRange(caller, 'distance', distance.value, 1e-6, 1e8, 'pc');
  const ebv = withError(caller, 'ebv', options.ebv);
  checkRange(caller, 'ebv', ebv.value, -0.2, 10, 'mag');
  if (age !== undefined) checkRange(caller, 'age', age, 0.001, 20, 'Gyr');
  const n = catalogue.rowCount;
  const draws = Math.max(50, Math.min(Math.round(samples), Math.floor(MOST_KEPT / Math.max(1, n))));
  const notes: string[] = [];
  if (draws < samples) notes.push(`${draws} draws in place of ${samples}, for ${n} stars.`);

  const colour = options.colour ?? preferredColour(catalogue);
  if (colour === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no colour and no two magnitudes with known roles. Give roles when reading.`,
    );
  }
  const band = options.magnitude ?? preferredMagnitude(catalogue, colour);
  if (band === null) throw new Error(`${caller}: ${catalogue.source} has no magnitude to go with ${colour}.`);
  const surface = chooseSurface(caller, catalogue, options.surfaceBrightness);
  if (surface === null) {
    notes.push('No radius by angular diameter: the catalogue has neither V-Ks with Ks or V, nor B-V with V.');
  } else notes.push(`Angular diameters: ${SURFACE_BRIGHTNESS[surface].source}.`);
  const light = new LightDraws(caller, catalogue, { rV, law });
  const masses = massSource(caller, catalogue, options, metallicity);
  notes.push(...masses.notes);
  notes.push('Not included: the accuracy of the colour-temperature scale and of the models.');

  const random = randomStream(seed);
  const own = random.fork(1);
  const shared = random.fork(2);
  const kept = Object.fromEntries(QUANTITIES.map((q) => [q, new Float64Array(n * draws)])) as Record<
    Quantity,
    Float64Array
  >;
  for (let t = 0; t < draws; t++) {
    let pc = distance.value;
    if (distance.error > 0)
      do pc = distance.value + distance.error * shared.normal();
      while (!(pc > 0));
    const reddening = ebv.value + ebv.error * shared.normal();
    light.draw(own);
    const intrinsic = light.colour(colour, reddening);
    const apparent = light.magnitude(band, reddening);
    const temperature = temperatureFromColour(intrinsic, { colour, metallicity }) as Float64Array;
    const correction = bolometricCorrection(temperature, { band, metallicity }) as Float64Array;
    const relation = surface === null ? null : SURFACE_BRIGHTNESS[surface];
    const surfaceColour = relation === null ? null : light.colour(relation.colour, reddening);
    const surfaceMagnitude = relation === null ? null : light.magnitude(relation.band, reddening);
    const modulus = 5 * Math.log10(pc) - 5;
    for (let i = 0; i < n; i++) {
      const at = i * draws + t;
      const T = temperature[i];
      const logL = -0.4 * (apparent[i] - modulus + correction[i] - SOLAR_BOLOMETRIC_MAGNITUDE);
      const L = 10 ** logL;
      const R = Math.sqrt(L) * (SOLAR_TEMPERATURE / T) ** 2;
      const scatter = own.normal();
      let theta = Number.NaN;
      if (relation !== null && surfaceColour !== null && surfaceMagnitude !== null) {
        theta = diameterBy(relation, surfaceColour[i], surfaceMagnitude[i]) * (1 + relation.scatter * scatter);
      }
      const logM = masses.logMass(i, logL, own.normal());
      const M = 10 ** logM;
      kept.temperature[at] = T;
      kept.luminosity[at] = L;
      kept.stefanBoltzmann[at] = R;
      kept.diameter[at] = theta;
      kept.angularDiameter[at] = theta * pc * RADII_PER_MAS_PARSEC;
      kept.mass[at] = M;
      kept.model[at] = 10 ** masses.logRadius(logM);
      kept.logGravity[at] = SOLAR_LOG_GRAVITY + logM - 2 * Math.log10(R);
      kept.density[at] = (SOLAR_DENSITY * M) / R ** 3;
      kept.wienPeak[at] = (WIEN_DISPLACEMENT / T) * 1e6;
      kept.flux[at] = (L * SOLAR_LUMINOSITY_W) / (4 * Math.PI * (pc * PARSEC_M) ** 2);
    }
  }
  notes.unshift(...light.notes);
  const columns = Object.fromEntries(QUANTITIES.map((q) => [q, summarise(kept[q], n, draws, UNITS[q])])) as Record<
    Quantity,
    MeasuredColumn
  >;
  const agreement: RadiusAgreement[] = [];
  for (let a = 0; a < WAYS.length; a++) {
    for (let b = a + 1; b < WAYS.length; b++) {
      const found = agree(WAYS[a], WAYS[b], kept, n, draws);
      if (found !== null) agreement.push(found);
    }
  }
  const result: RadiusInference = {
    count: n,
    ...columns,
    agreement: Object.freeze(agreement),
    notes: Object.freeze(notes),
    catalogue: withColumns(catalogue, columns),
  };
  return show(result);
}

function withError(caller: string, name: string, given: number | Measured): { value: number; error: number } {
  if (typeof given === 'number') return { value: given, error: 0 };
  const { value, lower, upper } = (given ?? {}) as Partial<Measured>;
  if (typeof value !== 'number' || typeof lower !== 'number' || typeof upper !== 'number') {
    throw new TypeError(`${caller}: ${name} must be a number or a measured value, got ${describe(given)}.`);
  }
  return { value, error: Number.isFinite(upper - lower) ? (upper - lower) / 2 : 0 };
}

function chooseSurface(
  caller: string,
  catalogue: Catalogue,
  given: SurfaceBrightnessName | undefined,
): SurfaceBrightnessName | null {
  const usable = (name: SurfaceBrightnessName) => {
    const { colour, band } = SURFACE_BRIGHTNESS[name];
    return hasColour(catalogue, colour) && catalogue.has(`magnitude.${band}`);
  };
  if (given === undefined) return SURFACE_BRIGHTNESS_NAMES.find(usable) ?? null;
  checkChoice(caller, 'surfaceBrightness', given, SURFACE_BRIGHTNESS_NAMES);
  if (!usable(given)) {
    const { colour, band } = SURFACE_BRIGHTNESS[given];
    throw new Error(
      `${caller}: "${given}" needs ${colour} and ${band}, which ${catalogue.source} does not have; leave surfaceBrightness out.`,
    );
  }
  return given;
}

interface MassSource {
  /** log mass of a star of a luminosity; `chance` is a standard normal number. */
  logMass(i: number, logL: number, chance: number): number;
  logRadius(logMass: number): number;
  readonly notes: readonly string[];
}

function massSource(caller: string, catalogue: Catalogue, options: InferRadiiOptions, metallicity: number): MassSource {
  const sequence = modelSequence(options.age, metallicity);
  const logRadius = (logMass: number) => interpolate(sequence.logMass, sequence.logR, logMass);
  const models = `Model radii: Hurley, Pols & Tout 2000, main sequence of ${sequence.words}`;
  const note = options.age === undefined ? `${models}; real stars are larger, so give age.` : `${models}.`;
  const { mass, massError } = options;
  if (mass === undefined) {
    const { x, y } = risingPart(sequence.logMass, sequence.logL);
    const byModel = "Masses: the models' own at each star's luminosity.";
    return { logMass: (_, logL) => interpolate(y, x, logL), logRadius, notes: [byModel, note] };
  }
  if (typeof mass === 'object' && 'lifetimeExponents' in mass) {
    const fit = mass;
    const curve = fit.curve(400);
    const { x, y } = risingPart(curve.mass.map(Math.log10), curve.luminosity.map(Math.log10));
    const scatter = fit.scatter.value;
    const byFit = `Masses: the fitted relation (${fit.starCount} stars) at each star's luminosity, its scatter ${fit.scatter} included.`;
    return {
      logMass: (_, logL, chance) => interpolate(y, x, logL + scatter * chance),
      logRadius,
      notes: [byFit, note],
    };
  }
  const list = (given: unknown, name: string): ArrayLike<number> => {
    const values = typeof given === 'string' ? catalogue.numbers(given) : (given as ArrayLike<number>);
    if (values === null || typeof values !== 'object' || typeof values.length !== 'number') {
      throw new TypeError(
        `${caller}: ${name} must be a column's name, a list of solar masses, or a fit of fitMassLuminosity, got ${describe(given)}.`,
      );
    }
    if (values.length !== catalogue.rowCount) {
      throw new RangeError(`${caller}: ${name} has ${values.length} values for ${catalogue.rowCount} stars.`);
    }
    return values;
  };
  const values = list(mass, 'mass');
  const errors = massError === undefined ? null : list(massError, 'massError');
  return {
    logMass: (i, _, chance) => Math.log10(values[i] + (errors === null ? 0 : errors[i] || 0) * chance),
    logRadius,
    notes: ['Masses: as given.', note],
  };
}

function summarise(kept: Float64Array, n: number, draws: number, unit: string): MeasuredColumn {
  const value = new Float64Array(n);
  const lower = new Float64Array(n);
  const upper = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const sorted = kept.slice(i * draws, (i + 1) * draws).sort();
    // NaN sorts last; a star most of whose draws lie outside a relation has no value.
    let known = draws;
    while (known > 0 && Number.isNaN(sorted[known - 1])) known--;
    const part = known * 2 > draws ? sorted.subarray(0, known) : sorted.subarray(0, 0);
    value[i] = sortedQuantile(part, 0.5);
    lower[i] = sortedQuantile(part, 0.158655254);
    upper[i] = sortedQuantile(part, 0.841344746);
  }
  return Object.freeze({ value, lower, upper, unit });
}

function agree(
  [first, a]: readonly [RadiusWay, Quantity],
  [second, b]: readonly [RadiusWay, Quantity],
  kept: Record<Quantity, Float64Array>,
  n: number,
  draws: number,
): RadiusAgreement | null {
  const stars: number[] = [];
  let beyondThreeSigma = 0;
  for (let i = 0; i < n; i++) {
    let count = 0;
    let mean = 0;
    let square = 0;
    for (let t = i * draws; t < (i + 1) * draws; t++) {
      const d = Math.log(kept[b][t] / kept[a][t]);
      if (!Number.isFinite(d)) continue;
      count++;
      mean += d;
      square += d * d;
    }
    if (count * 2 <= draws) continue;
    stars.push(i);
    mean /= count;
    const sigma = Math.sqrt(Math.max(0, square / count - mean * mean));
    if (Math.abs(mean) > 3 * sigma) beyondThreeSigma++;
  }
  if (stars.length === 0) return null;
  const ratios = new Float64Array(draws);
  for (let t = 0; t < draws; t++) {
    const each = Float64Array.from(stars, (i) => kept[b][i * draws + t] / kept[a][i * draws + t])
      .filter(Number.isFinite)
      .sort();
    ratios[t] = sortedQuantile(each, 0.5);
  }
  return Object.freeze({ first, second, count: stars.length, ratio: measuredFromSamples(ratios), beyondThreeSigma });
}

function withColumns(catalogue: Catalogue, columns: Record<Quantity, MeasuredColumn>): Catalogue {
  const added = QUANTITIES.flatMap((q) => {
    const { value, lower, upper, unit } = columns[q];
    const error = upper.map((u, i) => (u - lower[i]) / 2);
    return [
      { name: COLUMN_NAMES[q], values: value, unit, description: `${q}, inferred` },
      { name: `${COLUMN_NAMES[q]}_error`, values: error, unit, description: `${q}: half the 68 % interval` },
    ].filter((c) => !catalogue.has(c.name));
  });
  return catalogue.withColumns(added, 'radii by three ways', {});
}

const SHOWN = 10;

function show(result: RadiusInference): RadiusInference {
  const number = (column: MeasuredColumn, i: number) => {
    if (Number.isNaN(column.value[i])) return '';
    const half = (column.upper[i] - column.lower[i]) / 2;
    return `${Number(column.value[i].toPrecision(4))} ± ${Number(half.toPrecision(2))}`;
  };
  const head = ['row', 'R, Stefan-Boltzmann', 'R, angular diameter', 'R, model', 'T (K)', 'L', 'M', 'log g'];
  const rows = () =>
    Array.from({ length: Math.min(SHOWN, result.count) }, (_, i) => [
      String(i + 1),
      ...[
        result.stefanBoltzmann,
        result.angularDiameter,
        result.model,
        result.temperature,
        result.luminosity,
        result.mass,
        result.logGravity,
      ].map((c) => number(c, i)),
    ]);
  const pairs = ['radii compared', 'stars', 'ratio', 'beyond 3 sigma'];
  const compared = () =>
    result.agreement.map((a) => [
      `${a.second} / ${a.first}`,
      String(a.count),
      String(a.ratio),
      String(a.beyondThreeSigma),
    ]);
  const title = `Radii of ${result.count} stars, solar units`;
  return presentable(result, {
    text: () => `${title}\n${textTable(head, rows())}\n\n${textTable(pairs, compared())}\n${result.notes.join('\n')}`,
    html: () =>
      `<div>${htmlTable(head, rows(), { caption: title, numeric: [1, 2, 3, 4, 5, 6, 7] })}${htmlTable(pairs, compared(), { numeric: [1, 2, 3] })}` +
      `<ul>${result.notes.map((t) => `<li>${escapeHtml(t)}</li>`).join('')}</ul></div>`,
  });
}
