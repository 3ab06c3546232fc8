import { Catalogue } from '../catalogue/catalogue';
import { checkOptions, describe } from '../quantity/options';

/** Stars of known mass as plain lists, shape (n). Give each quantity either plain or as log10, its error in the same way. */
export interface StarsOfKnownMass {
  /** Solar masses. */
  readonly mass?: ArrayLike<number>;
  readonly massError?: ArrayLike<number>;
  /** log10 of solar masses; its error in dex. */
  readonly logMass?: ArrayLike<number>;
  readonly logMassError?: ArrayLike<number>;
  /** Solar luminosities. */
  readonly luminosity?: ArrayLike<number>;
  readonly luminosityError?: ArrayLike<number>;
  readonly logLuminosity?: ArrayLike<number>;
  readonly logLuminosityError?: ArrayLike<number>;
  /** Solar radii. */
  readonly radius?: ArrayLike<number>;
  readonly radiusError?: ArrayLike<number>;
  readonly logRadius?: ArrayLike<number>;
  readonly logRadiusError?: ArrayLike<number>;
  /** Correlation of the error of the mass with that of the fitted quantity, -1 < r < 1. Default: none. */
  readonly correlation?: ArrayLike<number>;
  readonly name?: readonly (string | null)[];
}

/** Names of the columns of a catalogue, where they are not the usual ones. */
export type RelationColumns = Partial<Record<keyof StarsOfKnownMass, string>>;

/** Logarithms of what was measured, one an entry; NaN where it is not known. */
export interface RelationStars {
  readonly count: number;
  readonly name: readonly string[];
  readonly logMass: Float64Array;
  readonly logMassError: Float64Array;
  /** The fitted quantity: luminosity or radius. */
  readonly logValue: Float64Array;
  readonly logValueError: Float64Array;
  /** NaN where no radius is given. */
  readonly logRadius: Float64Array;
  readonly logRadiusError: Float64Array;
  readonly correlation: Float64Array;
  /** Rows of the input. */
  readonly row: Uint32Array;
  /** Rows without mass or the fitted quantity. */
  readonly dropped: number;
  readonly hasRadius: boolean;
}

/** What a relation gives as a function of mass. */
export type RelationQuantity = 'luminosity' | 'radius';

const KEYS: readonly (keyof StarsOfKnownMass)[] = [
  'mass',
  'massError',
  'logMass',
  'logMassError',
  'luminosity',
  'luminosityError',
  'logLuminosity',
  'logLuminosityError',
  'radius',
  'radiusError',
  'logRadius',
  'logRadiusError',
  'correlation',
  'name',
];

/** Column names that are understood without being told. */
const USUAL: Readonly<Record<keyof StarsOfKnownMass, readonly string[]>> = {
  mass: ['mass'],
  massError: ['mass_error', 'mass_err'],
  logMass: ['log_mass', 'log_m'],
  logMassError: ['log_mass_error', 'log_mass_err', 'log_m_error'],
  luminosity: ['luminosity'],
  luminosityError: ['luminosity_error', 'luminosity_err'],
  logLuminosity: ['log_luminosity', 'log_l', 'log_lum'],
  logLuminosityError: ['log_luminosity_error', 'log_luminosity_err', 'log_l_error', 'log_lum_err'],
  radius: ['radius'],
  radiusError: ['radius_error', 'radius_err'],
  logRadius: ['log_radius', 'log_r'],
  logRadiusError: ['log_radius_error', 'log_radius_err', 'log_r_error'],
  correlation: ['correlation'],
  name: ['name', 'identifier', 'star', 'system'],
};

/**
 * Reads masses, the fitted quantity and radii from a catalogue or plain lists, as logarithms.
 * @param caller name of the public function, for messages
 * @throws TypeError, RangeError or Error naming the column or star at fault
 */
export function readRelationStars(
  caller: string,
  given: Catalogue | StarsOfKnownMass,
  quantity: RelationQuantity,
  columns: RelationColumns | undefined,
): RelationStars {
  checkOptions(`${caller}, columns`, columns, KEYS);
  const stars = given instanceof Catalogue ? fromCatalogue(given, columns) : plain(caller, given, columns);
  const mass = quantityOf(caller, stars, 'mass');
  if (mass === null) throw new Error(missing(caller, given, 'mass'));
  const value = quantityOf(caller, stars, quantity);
  if (value === null) throw new Error(missing(caller, given, quantity));
  const radius = quantityOf(caller, stars, 'radius');
  const n = mass.log.length;
  for (const key of KEYS) {
    const list = stars[key];
    if (list !== undefined && list.length !== n) {
      throw new RangeError(`${caller}: ${key} has ${list.length} values for ${n} masses; give one a star.`);
    }
  }
  const rows: number[] = [];
  for (let i = 0; i < n; i++) if (Number.isFinite(mass.log[i]) && Number.isFinite(value.log[i])) rows.push(i);
  const take = (values: ArrayLike<number> | null) =>
    Float64Array.from(rows, (i) => (values === null ? Number.NaN : values[i]));
  const correlation = Float64Array.from(rows, (i) => stars.correlation?.[i] ?? 0);
  const bad = correlation.findIndex((r) => !(r > -1 && r < 1));
  if (bad >= 0)
    throw new RangeError(`${caller}: correlation[${rows[bad]}] is ${correlation[bad]}; it must lie in -1 to 1.`);
  return {
    count: rows.length,
    name: rows.map((i) => stars.name?.[i] ?? `star ${i + 1}`),
    logMass: take(mass.log),
    logMassError: take(mass.error),
    logValue: take(value.log),
    logValueError: take(value.error),
    logRadius: take(radius?.log ?? null),
    logRadiusError: take(radius?.error ?? null),
    correlation,
    row: Uint32Array.from(rows),
    dropped: n - rows.length,
    hasRadius: radius !== null,
  };
}

/** The stars at the given places. */
export function takeStars(stars: RelationStars, at: ArrayLike<number>): RelationStars {
  const take = (values: Float64Array) => Float64Array.from(at, (i) => values[i]);
  return {
    ...stars,
    count: at.length,
    name: Array.from(at, (i) => stars.name[i]),
    logMass: take(stars.logMass),
    logMassError: take(stars.logMassError),
    logValue: take(stars.logValue),
    logValueError: take(stars.logValueError),
    logRadius: take(stars.logRadius),
    logRadiusError: take(stars.logRadiusError),
    correlation: take(stars.correlation),
    row: Uint32Array.from(at, (i) => stars.row[i]),
  };
}

function fromCatalogue(catalogue: Catalogue, columns: RelationColumns = {}): StarsOfKnownMass {
  const out: Record<string, unknown> = {};
  for (const key of KEYS) {
    const named = columns[key];
    const column = named ?? USUAL[key].find((name) => catalogue.has(name));
    if (column === undefined) continue;
    out[key] =
      key === 'name'
        ? Array.from(catalogue.values(column) as ArrayLike<unknown>, (v) => (v === null ? null : String(v)))
        : catalogue.numbers(column);
  }
  // A column that was named counts, whatever the usual ones say.
  for (const base of ['mass', 'luminosity', 'radius'] as const) {
    const log = logKey(base);
    if (columns[base] !== undefined && columns[log] === undefined) delete out[log];
    else if (columns[log] !== undefined) delete out[base];
  }
  return out as StarsOfKnownMass;
}

function plain(caller: string, given: StarsOfKnownMass, columns: RelationColumns | undefined): StarsOfKnownMass {
  if (given === null || typeof given !== 'object' || Array.isArray(given)) {
    throw new TypeError(
      `${caller}: stars must be a Catalogue or lists such as { mass, massError, luminosity, luminosityError }, got ${describe(given)}.`,
    );
  }
  if (columns !== undefined)
    throw new TypeError(`${caller}: columns names columns of a Catalogue; plain lists need none.`);
  checkOptions(`${caller}, stars`, given, KEYS);
  return given;
}

function logKey(base: 'mass' | 'luminosity' | 'radius'): 'logMass' | 'logLuminosity' | 'logRadius' {
  return base === 'mass' ? 'logMass' : base === 'luminosity' ? 'logLuminosity' : 'logRadius';
}

interface Logs {
  readonly log: Float64Array;
  readonly error: Float64Array | null;
}

/** A quantity as log10, from whichever form it was given in; null where it was not. */
function quantityOf(caller: string, stars: StarsOfKnownMass, base: 'mass' | 'luminosity' | 'radius'): Logs | null {
  const value = stars[base];
  const error = stars[`${base}Error`];
  const key = logKey(base);
  const log = stars[key];
  const logError = stars[`${key}Error`];
  if (log !== undefined)
    return { log: Float64Array.from(log), error: logError ? checked(caller, `${key}Error`, logError) : null };
  if (value === undefined) return null;
  for (let i = 0; i < value.length; i++) {
    if (value[i] <= 0) {
      const who = stars.name?.[i] ?? `row ${i + 1}`;
      throw new RangeError(
        `${caller}: ${base} of ${who} is ${value[i]}; it must be positive (solar units). Mend it or make it NaN to leave the star out.`,
      );
    }
  }
  const errors = error === undefined ? null : checked(caller, `${base}Error`, error);
  return {
    log: Float64Array.from(value, Math.log10),
    error: errors === null ? null : errors.map((e, i) => e / value[i] / Math.LN10),
  };
}

function checked(caller: string, key: string, errors: ArrayLike<number>): Float64Array {
  for (let i = 0; i < errors.length; i++) {
    if (errors[i] < 0)
      throw new RangeError(`${caller}: ${key}[${i}] is ${errors[i]}; a standard error cannot be negative.`);
  }
  return Float64Array.from(errors);
}

function missing(caller: string, given: Catalogue | StarsOfKnownMass, base: 'mass' | 'luminosity' | 'radius'): string {
  if (!(given instanceof Catalogue))
    return `${caller}: no ${base} given; pass ${base} (solar units) or ${logKey(base)}.`;
  const names = [...USUAL[base], ...USUAL[logKey(base)]].join(', ');
  return `${caller}: ${given.source} has no column for ${base} (looked for ${names}); name it: columns: { ${base}: '...' } or { ${logKey(base)}: '...' }.`;
}
