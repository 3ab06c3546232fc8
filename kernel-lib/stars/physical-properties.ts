import type { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import { deredden } from '../extinction/deredden';
import { bolometricCorrection } from '../photometry/bolometric-correction';
import { temperatureFromColour } from '../photometry/colour-temperature';
import { spectralClass } from '../photometry/spectral-class';
import { type Band, bandsOfColour, type ColourName } from '../quantity/band';
import { SOLAR_BOLOMETRIC_MAGNITUDE, SOLAR_TEMPERATURE } from '../quantity/constants';
import type { Measured } from '../quantity/measured';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { STAR_COLUMNS } from './columns';
import { type PhotometricErrors, propagated, slope } from './error-propagation';
import { observedColour, preferredColour, preferredMagnitude } from './observed-colour';

/** Options of `physicalProperties`. */
export interface PhysicalPropertiesOptions {
  /**
   * Distance, pc: one for all stars, with or without its error, or one a star, as a list of shape (n) or the name of a column.
   */
  readonly distance: number | Measured | ArrayLike<number> | string;
  /** Standard errors of distances given one a star, pc, shape (n) or the name of a column. Default: none. */
  readonly distanceError?: ArrayLike<number> | string;
  /** Reddening E(B-V), mag, -0.2 to 10, with or without its error. */
  readonly ebv: number | Measured;
  /** [Fe/H], dex, -4 to 1. Default 0. */
  readonly metallicity?: number;
  /** Colour that gives the temperature. Default: the best the catalogue has, BP-RP before B-V. */
  readonly colour?: ColourName;
  /** Band that gives the luminosity. Default: G with Gaia colours, else V. */
  readonly magnitude?: Band;
  /** Colour-temperature scale by name, as temperatureFromColour takes it. Default: its default for the colour. */
  readonly scale?: string;
  /** A(V) / E(B-V). Default 3.1. */
  readonly rV?: number;
  /** Extinction law by name. Default `CCM89`. */
  readonly law?: string;
}

const OPTIONS = ['distance', 'distanceError', 'ebv', 'metallicity', 'colour', 'magnitude', 'scale', 'rV', 'law'];
const LOG_SOLAR_TEMPERATURE = Math.log10(SOLAR_TEMPERATURE);
/** Step in colour for slopes, mag: small against the bends of the scales, large against rounding. */
const COLOUR_STEP = 0.01;
/** Change of log L by 1 mag. */
const PER_MAGNITUDE = -0.4;

/**
 * A star's place on the HR diagram: magnitudes and colours are dereddened, colour gives temperature, temperature the
 * bolometric correction, magnitude and distance the luminosity, and Stefan-Boltzmann's law the radius.
 *
 * Adds `log_teff` (log10 K), `log_l` (log10 solar), `radius` (solar), each with three errors kept apart:
 * - `..._error`: the star's own, from its photometry (and its own distance, if distances are given one a star), to first order,
 *   with colour and magnitude correlated where they share a band;
 * - `..._shared_error`: from the error of the one distance and of the one reddening: it moves all stars together;
 * - the accuracy of the colour-temperature scale, stated in the history: it moves neighbouring stars together.
 * Also `intrinsic_colour`, `absolute_magnitude` (mag) and `spectral_class` (of a dwarf of that temperature).
 * @param catalogue with a colour (its own column or both magnitudes) and a magnitude by role
 * @returns the catalogue with the columns added; NaN where a value is missing or outside the range of the relations, counted by
 *   reason in the history
 * @throws TypeError for an unknown option or a distance that is no distance, RangeError for values out of range or distances not
 *   one a star, Error when the catalogue has no such colour or magnitude
 * @example physicalProperties(members, { distance: distance.distance, ebv: 0.03 }).numbers('log_l')
 * Source: solar luminosity, radius and temperature of IAU 2015 Resolution B3, M_bol of the Sun 4.74 by Resolution B2.
 */
export function physicalProperties(catalogue: Catalogue, options: PhysicalPropertiesOptions): Catalogue {
  const caller = 'physicalProperties';
  checkOptions(caller, options, OPTIONS);
  const settings = settle(caller, catalogue, options);
  const { ebv } = settings;
  const stars = place(catalogue, settings, ebv.value);
  const errors = ownErrors(caller, catalogue, settings, stars);
  const shared = sharedErrors(catalogue, settings, stars);
  const radius = stars.logR.map((v) => 10 ** v);
  const asRadius = (dex: Float64Array) => dex.map((e, i) => Math.LN10 * radius[i] * e);
  const base = `from ${settings.colour} and ${settings.band}`;
  const own = "standard error from the star's own photometry" + (settings.distance.each ? ' and distance' : '');
  const together = 'error shared by all stars: distance and reddening';
  const columns: ColumnData[] = [
    column('intrinsic_colour', stars.colour, 'mag', `${settings.colour} without reddening`),
    column('absolute_magnitude', stars.absolute, 'mag', `absolute ${settings.band} magnitude without extinction`),
    column(STAR_COLUMNS.logTeff, stars.logT, 'log10 K', `log10 of effective temperature, ${base}`),
    column(STAR_COLUMNS.logTeffError, errors.logT, 'dex', `log_teff: ${own}`),
    column(STAR_COLUMNS.logTeffShared, shared.logT, 'dex', `log_teff: ${together}`),
    column(STAR_COLUMNS.logL, stars.logL, 'log10 Lsun', `log10 of luminosity, ${base}`),
    column(STAR_COLUMNS.logLError, errors.logL, 'dex', `log_l: ${own}`),
    column(STAR_COLUMNS.logLShared, shared.logL, 'dex', `log_l: ${together}`),
    column(STAR_COLUMNS.radius, radius, 'Rsun', 'radius by the Stefan-Boltzmann law'),
    column(STAR_COLUMNS.radiusError, asRadius(errors.logR), 'Rsun', `radius: ${own}`),
    column(STAR_COLUMNS.radiusShared, asRadius(shared.logR), 'Rsun', `radius: ${together}`),
    {
      name: STAR_COLUMNS.spectralClass,
      values: Array.from(stars.logT, (v) => (Number.isNaN(v) ? null : spectralClass(10 ** v) || null)),
      description: 'spectral class of a dwarf of that temperature',
    },
  ];
  const action = `physical properties ${base}: ${describeSettings(settings)}`;
  return catalogue.withColumns(columns, action, {
    note: [...errors.notes, ...reasons(catalogue, settings, stars)].join('; '),
  });
}

interface Settings {
  readonly colour: ColourName;
  readonly band: Band;
  readonly metallicity: number;
  readonly scale: string | undefined;
  readonly rV: number;
  readonly law: string;
  readonly ebv: { readonly value: number; readonly error: number };
  readonly distance: {
    /** One for all stars or one a star, pc. */
    readonly value: number | ArrayLike<number>;
    /** The same for its error, pc. */
    readonly error: number | ArrayLike<number>;
    readonly each: boolean;
  };
}

function settle(caller: string, catalogue: Catalogue, options: PhysicalPropertiesOptions): Settings {
  const { metallicity = 0, rV = 3.1, law = 'CCM89', scale } = options;
  checkRange(caller, 'metallicity', metallicity, -4, 1, 'dex');
  const colour = options.colour ?? preferredColour(catalogue);
  if (colour === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no colour and no two magnitudes with known roles. Give roles when reading.`,
    );
  }
  bandsOfColour(colour);
  const band = options.magnitude ?? preferredMagnitude(catalogue, colour);
  if (band === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no magnitude to go with ${colour}. Give a role such as magnitude.V when reading.`,
    );
  }
  const ebv = withError(options.ebv);
  if (ebv === null) {
    throw new TypeError(
      `${caller}: ebv must be E(B-V) in mag, a number or a measured value, got ${describe(options.ebv)}; pass ebv: 0 for none.`,
    );
  }
  checkRange(caller, 'ebv', ebv.value, -0.2, 10, 'mag');
  const distance = settleDistance(caller, catalogue, options);
  return { colour, band, metallicity, scale, rV, law, ebv, distance };
}

function settleDistance(
  caller: string,
  catalogue: Catalogue,
  options: PhysicalPropertiesOptions,
): Settings['distance'] {
  const { distance, distanceError } = options;
  const one = withError(distance);
  if (one !== null) {
    if (distanceError !== undefined) {
      throw new TypeError(
        `${caller}: distanceError goes with distances given one a star; give one distance as a measured value.`,
      );
    }
    if (!(one.value > 0)) throw new RangeError(`${caller}: distance must be positive, in pc, got ${one.value}.`);
    return { value: one.value, error: one.error, each: false };
  }
  const list = (value: unknown, name: string): ArrayLike<number> => {
    const values = typeof value === 'string' ? catalogue.numbers(value) : (value as ArrayLike<number>);
    if (values === null || typeof values !== 'object' || typeof values.length !== 'number') {
      throw new TypeError(
        `${caller}: ${name} must be pc: a number, a measured value, a list or a column's name, got ${describe(value)}.`,
      );
    }
    if (values.length !== catalogue.rowCount) {
      throw new RangeError(`${caller}: ${name} has ${values.length} values for ${catalogue.rowCount} stars.`);
    }
    return values;
  };
  return {
    value: list(distance, 'distance'),
    error: distanceError === undefined ? 0 : list(distanceError, 'distanceError'),
    each: true,
  };
}

/** Value and half of the 68 % interval; null for what is neither a number nor a measured value. */
function withError(quantity: unknown): { value: number; error: number } | null {
  if (typeof quantity === 'number') return { value: quantity, error: 0 };
  if (quantity === null || typeof quantity !== 'object') return null;
  const { value, lower, upper } = quantity as Partial<Measured>;
  if (typeof value !== 'number' || typeof lower !== 'number' || typeof upper !== 'number') return null;
  return { value, error: (upper - lower) / 2 };
}

/** Places of all stars, shape (n). */
interface Places {
  readonly colour: Float64Array;
  readonly absolute: Float64Array;
  readonly logT: Float64Array;
  readonly logL: Float64Array;
  readonly logR: Float64Array;
}

function place(catalogue: Catalogue, settings: Settings, ebv: number): Places {
  const { colour, band, rV, law, distance } = settings;
  const corrected = deredden(catalogue, { ebv, rV, law });
  const intrinsic = observedColour('physicalProperties', corrected, colour).values;
  const magnitude = corrected.numbers(`magnitude.${band}`);
  const absolute = magnitude.map((m, i) => {
    const pc = typeof distance.value === 'number' ? distance.value : distance.value[i];
    return pc > 0 ? m - 5 * Math.log10(pc) + 5 : Number.NaN;
  });
  return { colour: intrinsic, absolute, ...locate(intrinsic, absolute, settings) };
}

/** Temperature, luminosity and radius from intrinsic colour and absolute magnitude. */
function locate(
  colour: Float64Array,
  absolute: Float64Array,
  settings: Settings,
): Pick<Places, 'logT' | 'logL' | 'logR'> {
  const { band, metallicity, scale } = settings;
  const temperature = temperatureFromColour(colour, { colour: settings.colour, metallicity, scale });
  const correction = bolometricCorrection(temperature, { band, metallicity });
  const logT = temperature.map(Math.log10);
  const logL = absolute.map((m, i) => PER_MAGNITUDE * (m + correction[i] - SOLAR_BOLOMETRIC_MAGNITUDE));
  const logR = logL.map((l, i) => 0.5 * l - 2 * (logT[i] - LOG_SOLAR_TEMPERATURE));
  return { logT, logL, logR };
}

/** Errors in dex, shape (n). */
interface Errors {
  readonly logT: Float64Array;
  readonly logL: Float64Array;
  readonly logR: Float64Array;
}

function ownErrors(
  caller: string,
  catalogue: Catalogue,
  settings: Settings,
  stars: Places,
): Errors & { notes: string[] } {
  const { errors, notes } = photometricErrors(caller, catalogue, settings);
  const cooler = locate(
    stars.colour.map((c) => c + COLOUR_STEP),
    stars.absolute,
    settings,
  );
  const hotter = locate(
    stars.colour.map((c) => c - COLOUR_STEP),
    stars.absolute,
    settings,
  );
  const by = (key: 'logT' | 'logL' | 'logR') => slope(hotter[key], stars[key], cooler[key], COLOUR_STEP);
  const own = {
    logT: propagated(errors, by('logT'), 0),
    logL: propagated(errors, by('logL'), PER_MAGNITUDE),
    logR: propagated(errors, by('logR'), PER_MAGNITUDE / 2),
  };
  const { distance } = settings;
  if (!distance.each) return { ...own, notes };
  const moduli = Float64Array.from(distance.value as ArrayLike<number>, (pc, i) => {
    const error = typeof distance.error === 'number' ? distance.error : distance.error[i];
    return (5 / Math.LN10) * (error / pc);
  });
  const joined = (dex: Float64Array, perMagnitude: number) =>
    dex.map((e, i) => Math.hypot(e, perMagnitude * moduli[i]));
  return { logT: own.logT, logL: joined(own.logL, PER_MAGNITUDE), logR: joined(own.logR, PER_MAGNITUDE / 2), notes };
}

/** Variances of colour and magnitude. Where the catalogue has errors of only one of the two, the other counts as exact, and a note says so. */
function photometricErrors(
  caller: string,
  catalogue: Catalogue,
  settings: Settings,
): { errors: PhotometricErrors; notes: string[] } {
  const { colour, band } = settings;
  const n = catalogue.rowCount;
  const bands = bandsOfColour(colour);
  const observed = observedColour(caller, catalogue, colour);
  const errorOf = (name: Band) =>
    catalogue.has(`magnitude.${name}.error`) ? catalogue.numbers(`magnitude.${name}.error`) : null;
  const magnitudeError = errorOf(band);
  const knowsColour = observed.errors.some(Number.isFinite);
  const notes: string[] = [];
  if (!knowsColour && magnitudeError === null) notes.push('no photometric errors given: errors unknown');
  else if (!knowsColour) notes.push(`errors of ${colour} not given: counted as exact`);
  else if (magnitudeError === null) notes.push(`errors of ${band} not given: counted as exact`);
  const exact = notes.length > 0 && (knowsColour || magnitudeError !== null) ? 0 : Number.NaN;
  const square = (values: Float64Array | null) =>
    values === null ? new Float64Array(n).fill(exact) : values.map((e) => e * e);
  const sharedBand = observed.fromMagnitudes && (band === bands.blue || band === bands.red) ? magnitudeError : null;
  const sign = band === bands.blue ? 1 : -1;
  return {
    errors: {
      colourVariance: square(knowsColour ? observed.errors : null),
      magnitudeVariance: square(magnitudeError),
      covariance: sharedBand === null ? new Float64Array(n) : sharedBand.map((e) => sign * e * e),
    },
    notes,
  };
}

/** What one distance and one reddening, each off by its error, would do to each star. */
function sharedErrors(catalogue: Catalogue, settings: Settings, stars: Places): Errors {
  const { distance, ebv } = settings;
  const modulus = distance.each ? 0 : (5 / Math.LN10) * ((distance.error as number) / (distance.value as number));
  const [less, more] =
    ebv.error > 0
      ? [place(catalogue, settings, ebv.value - ebv.error), place(catalogue, settings, ebv.value + ebv.error)]
      : [stars, stars];
  const join = (key: 'logT' | 'logL' | 'logR', perMagnitude: number) => {
    const byReddening = slope(less[key], stars[key], more[key], 1);
    return byReddening.map((e) => Math.hypot(e, perMagnitude * modulus));
  };
  return { logT: join('logT', 0), logL: join('logL', PER_MAGNITUDE), logR: join('logR', PER_MAGNITUDE / 2) };
}

function column(name: string, values: Float64Array, unit: string, description: string): ColumnData {
  return { name, values, unit, description };
}

function describeSettings(settings: Settings): string {
  const { distance, ebv, metallicity, rV, law } = settings;
  const number = (v: number, e: number) =>
    `${Number(v.toPrecision(6))}${e > 0 ? ` ± ${Number(e.toPrecision(2))}` : ''}`;
  const pc = distance.each
    ? 'own distances'
    : `distance ${number(distance.value as number, distance.error as number)} pc`;
  return `${pc}, E(B-V) ${number(ebv.value, ebv.error)} mag (${law}, R_V ${rV}), [Fe/H] ${metallicity}`;
}

/** Why stars have no place, with numbers. */
function reasons(catalogue: Catalogue, settings: Settings, stars: Places): string[] {
  const { colour, band, distance } = settings;
  const magnitude = catalogue.numbers(`magnitude.${band}`);
  const counts = { colour: 0, magnitude: 0, distance: 0, range: 0, correction: 0 };
  for (let i = 0; i < catalogue.rowCount; i++) {
    if (Number.isNaN(stars.colour[i])) counts.colour++;
    else if (Number.isNaN(magnitude[i])) counts.magnitude++;
    else if (distance.each && !((distance.value as ArrayLike<number>)[i] > 0)) counts.distance++;
    else if (Number.isNaN(stars.logT[i])) counts.range++;
    else if (Number.isNaN(stars.logL[i])) counts.correction++;
  }
  const said: [number, string][] = [
    [counts.colour, `without ${colour}`],
    [counts.magnitude, `without ${band}`],
    [counts.distance, 'without a positive distance'],
    [counts.range, `with ${colour} outside the range of the temperature scale`],
    [counts.correction, 'with a temperature outside the range of the bolometric correction'],
  ];
  return said.filter(([n]) => n > 0).map(([n, what]) => `${n} ${what}`);
}
