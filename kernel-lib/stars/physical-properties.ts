import type { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import { spectralClass } from '../photometry/spectral-class';
import { type Band, bandsOfColour } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { STAR_COLUMNS } from './columns';
import { type PhotometricErrors, propagated, slope } from './error-propagation';
import { type HrPlaces, type HrQuantity, locate, PER_MAGNITUDE, placeStars } from './hr-place';
import { observedColour } from './observed-colour';
import { type PhysicalPropertiesOptions, type PropertySettings, settle } from './property-settings';

export type { PhysicalPropertiesOptions } from './property-settings';

const OPTIONS = [
  'distance',
  'distanceError',
  'ebv',
  'metallicity',
  'colour',
  'magnitude',
  'scale',
  'logGravity',
  'rV',
  'law',
];
/** Step in colour for slopes, mag: small against the bends of the scales, large against rounding. */
const COLOUR_STEP = 0.01;

/**
 * A star's place on the HR diagram: magnitudes and colours are dereddened, colour gives temperature, temperature the
 * bolometric correction, magnitude and distance the luminosity, and Stefan-Boltzmann's law the radius.
 *
 * Adds `log_teff` (log10 K), `log_l` (log10 solar), `radius` (solar), each with three errors kept apart:
 * - `..._error`: the star's own, from its photometry (and its own distance, if distances are given one a star), to first order,
 *   with colour and magnitude correlated where they share a band;
 * - `..._shared_error`: from the error of the one distance and of the one reddening: it moves all stars together;
 * - the accuracy of the scales, as their authors state it, in the history: it moves neighbouring stars together.
 *
 * Giants have other temperatures and bolometric corrections than dwarfs of their colour: gravity is estimated from the place itself,
 * with a mass of L^(1/4) solar, and the relations are read again with it, unless logGravity says what it is.
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
  const stars = placeStars(catalogue, settings, ebv.value);
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
    note: [...scaleNotes(settings, stars), ...errors.notes, ...reasons(catalogue, settings, stars)].join('; '),
  });
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
  settings: PropertySettings,
  stars: HrPlaces,
): Errors & { notes: string[] } {
  const { errors, notes } = photometricErrors(caller, catalogue, settings);
  const cooler = locate(
    stars.colour.map((c) => c + COLOUR_STEP),
    stars.absolute,
    stars.logGravity,
    settings,
  );
  const hotter = locate(
    stars.colour.map((c) => c - COLOUR_STEP),
    stars.absolute,
    stars.logGravity,
    settings,
  );
  const by = (key: HrQuantity) => slope(hotter[key], stars[key], cooler[key], COLOUR_STEP);
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
  settings: PropertySettings,
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
function sharedErrors(catalogue: Catalogue, settings: PropertySettings, stars: HrPlaces): Errors {
  const { distance, ebv } = settings;
  const modulus = distance.each ? 0 : (5 / Math.LN10) * ((distance.error as number) / (distance.value as number));
  const [less, more] =
    ebv.error > 0
      ? [-1, 1].map((side) => placeStars(catalogue, settings, ebv.value + side * ebv.error, stars.logGravity))
      : [stars, stars];
  const join = (key: HrQuantity, perMagnitude: number) => {
    const byReddening = slope(less[key], stars[key], more[key], 1);
    return byReddening.map((e) => Math.hypot(e, perMagnitude * modulus));
  };
  return { logT: join('logT', 0), logL: join('logL', PER_MAGNITUDE), logR: join('logR', PER_MAGNITUDE / 2) };
}

function column(name: string, values: Float64Array, unit: string, description: string): ColumnData {
  return { name, values, unit, description };
}

/** Which scales, how good their authors say they are, and how many stars were read as more than dwarfs. */
function scaleNotes(settings: PropertySettings, stars: HrPlaces): string[] {
  const { scale, correctionScale, accuracy } = settings;
  const notes = [
    `temperatures by ${scale}, accuracy ${accuracy.temperature}`,
    `bolometric corrections by ${correctionScale}, accuracy ${accuracy.correction}: not in the errors`,
  ];
  const evolved = stars.logGravity.filter((g, i) => g < 4 && !Number.isNaN(stars.logT[i])).length;
  if (settings.logGravity === undefined && evolved > 0) {
    notes.push(`${evolved} of low gravity by their place, read with giants' relations as far as they are`);
  }
  return notes;
}

function describeSettings(settings: PropertySettings): string {
  const { distance, ebv, metallicity, rV, law } = settings;
  const number = (v: number, e: number) =>
    `${Number(v.toPrecision(6))}${e > 0 ? ` ± ${Number(e.toPrecision(2))}` : ''}`;
  const pc = distance.each
    ? 'own distances'
    : `distance ${number(distance.value as number, distance.error as number)} pc`;
  return `${pc}, E(B-V) ${number(ebv.value, ebv.error)} mag (${law}, R_V ${rV}), [Fe/H] ${metallicity}`;
}

/** Why stars have no place, with numbers. */
function reasons(catalogue: Catalogue, settings: PropertySettings, stars: HrPlaces): string[] {
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
