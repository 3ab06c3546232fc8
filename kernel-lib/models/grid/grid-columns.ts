import type { Catalogue } from '../../catalogue/catalogue';
import { BAND_NAMES, type Band } from '../../quantity/band';
import { describe, nearest } from '../../quantity/options';
import { NO_PHASE } from '../evolve';
import { SOLAR_Z } from '../metallicity';
import { PHASE_NAMES } from '../phases/phase';

/** Which column of the table holds what. Bands go under their own name. */
export interface GridColumns extends Readonly<Partial<Record<Band, string>>> {
  /** Initial mass, solar masses. Needed. */
  readonly initialMass?: string;
  /** log10 of the age in years; or `age` in Gyr. One of the two is needed. */
  readonly logAge?: string;
  readonly age?: string;
  /** [Fe/H], dex; or `z`, mass fraction. Without either the table is of one metallicity, given in the options. */
  readonly metallicity?: string;
  readonly z?: string;
  /** Current mass, solar masses; without it the initial mass. */
  readonly mass?: string;
  readonly logL?: string;
  readonly logTeff?: string;
  /** log10 of surface gravity, cm/s2; without it from mass, luminosity and temperature. */
  readonly logGravity?: string;
  /** Phase label, text or number. */
  readonly phase?: string;
}

/** The plain form in which exportIsochrones writes, and what isochroneGrid takes a table for when no columns are named. */
export const PLAIN_COLUMNS: GridColumns = Object.freeze({
  initialMass: 'initial_mass',
  logAge: 'log_age',
  metallicity: 'metallicity',
  mass: 'mass',
  logL: 'log_l',
  logTeff: 'log_teff',
  logGravity: 'log_g',
  phase: 'phase',
  ...Object.fromEntries(BAND_NAMES.map((b) => [b, `mag_${b}`])),
});

/** Words that may be given as keys of `columns`. */
export const COLUMN_KEYS: readonly string[] = [
  'initialMass',
  'logAge',
  'age',
  'metallicity',
  'z',
  'mass',
  'logL',
  'logTeff',
  'logGravity',
  'phase',
  ...BAND_NAMES,
];

/** The rows of a user's table in Coeval's units, one entry a row in every column. */
export interface GridRows {
  readonly count: number;
  readonly initialMass: Float64Array;
  readonly logAge: Float64Array;
  readonly metallicity: Float64Array;
  readonly mass: Float64Array;
  readonly logL: Float64Array | null;
  readonly logTeff: Float64Array | null;
  readonly logGravity: Float64Array | null;
  readonly phase: Uint8Array | null;
  readonly magnitudes: Partial<Record<Band, Float64Array>>;
  readonly bands: readonly Band[];
}

/** How labels of the table translate: label to one of the phase names. */
export type PhaseLabels = Readonly<Record<string, string>>;

/** Reads the named columns of one catalogue and refuses what can be no isochrone table. */
export function readRows(
  catalogue: Catalogue,
  columns: GridColumns,
  phases: PhaseLabels | undefined,
  metallicity: number | undefined,
): GridRows {
  const where = `isochroneGrid: ${catalogue.source}`;
  const numbers = (key: keyof GridColumns): Float64Array | null => {
    const name = columns[key];
    return name === undefined ? null : catalogue.numbers(name);
  };
  const initialMass = numbers('initialMass');
  if (initialMass === null)
    throw new TypeError(`${where}: name the column of initial mass: columns: { initialMass: "..." }.`);
  checkValues(where, columns.initialMass as string, initialMass, 0.01, 500, 'solar masses');
  const logL = numbers('logL');
  const logTeff = numbers('logTeff');
  if (logTeff !== null) {
    checkValues(where, columns.logTeff as string, logTeff, 3, 5.8, 'log10 of K', 'Give log10 of the temperature');
  }
  if (logL !== null) checkValues(where, columns.logL as string, logL, -8, 8, 'log10 of solar luminosities');
  const bands = BAND_NAMES.filter((b) => columns[b] !== undefined);
  const magnitudes: Partial<Record<Band, Float64Array>> = {};
  for (const band of bands) {
    const column = numbers(band) as Float64Array;
    checkValues(where, columns[band] as string, column, -20, 45, 'mag');
    magnitudes[band] = column;
  }
  if ((logL === null || logTeff === null) && bands.length < 2) {
    throw new TypeError(
      `${where}: a curve needs logL and logTeff, or two bands at least; columns names ${Object.keys(columns).join(', ')}.`,
    );
  }
  const phaseColumn = columns.phase === undefined ? null : catalogue.values(columns.phase);
  return {
    count: catalogue.rowCount,
    initialMass,
    logAge: readAges(where, columns, numbers),
    metallicity: readMetallicity(where, columns, numbers, metallicity, catalogue.rowCount),
    mass: numbers('mass') ?? initialMass,
    logL,
    logTeff,
    logGravity: numbers('logGravity'),
    phase: phaseColumn === null ? null : translatePhases(where, phaseColumn as ArrayLike<unknown>, phases),
    magnitudes,
    bands,
  };
}

type Reader = (key: keyof GridColumns) => Float64Array | null;

function readAges(where: string, columns: GridColumns, numbers: Reader): Float64Array {
  const logAge = numbers('logAge');
  const age = numbers('age');
  if ((logAge === null) === (age === null)) {
    throw new TypeError(
      `${where}: name the column of age once: columns: { logAge: "..." } (log10 of years) or { age: "..." } (Gyr).`,
    );
  }
  if (logAge !== null) {
    checkValues(where, columns.logAge as string, logAge, 4, 10.6, 'log10 of years', 'A column in Gyr goes under age');
    return logAge;
  }
  checkValues(
    where,
    columns.age as string,
    age as Float64Array,
    1e-5,
    40,
    'Gyr',
    'A column of log10 of years goes under logAge',
  );
  return (age as Float64Array).map((a) => 9 + Math.log10(a));
}

function readMetallicity(
  where: string,
  columns: GridColumns,
  numbers: Reader,
  given: number | undefined,
  rows: number,
): Float64Array {
  const fe = numbers('metallicity');
  const z = numbers('z');
  if (fe !== null && z !== null)
    throw new TypeError(`${where}: name metallicity ([Fe/H]) or z (mass fraction), not both.`);
  if (fe !== null) {
    checkValues(where, columns.metallicity as string, fe, -5, 1.5, 'dex', 'A mass fraction goes under z');
    return fe;
  }
  if (z !== null) {
    checkValues(where, columns.z as string, z, 1e-9, 0.2, 'mass fraction', '[Fe/H] goes under metallicity');
    return z.map((x) => Math.log10(x / SOLAR_Z));
  }
  if (given === undefined) {
    throw new TypeError(
      `${where}: no metallicity. Name its column (columns: { metallicity: "..." } or { z: "..." }) or give metallicity: [Fe/H] in the options.`,
    );
  }
  return new Float64Array(rows).fill(given);
}

/** Refuses values outside what the quantity can be; a missing value passes, its row is left out later. */
function checkValues(
  where: string,
  column: string,
  values: Float64Array,
  low: number,
  high: number,
  unit: string,
  cure = '',
): void {
  for (let i = 0; i < values.length; i++) {
    if (Number.isNaN(values[i]) || (values[i] >= low && values[i] <= high)) continue;
    throw new RangeError(
      `${where}, column "${column}", row ${i + 1}: ${values[i]} cannot be ${unit} (${low} to ${high}).${cure ? ` ${cure}.` : ''}`,
    );
  }
}

function translatePhases(where: string, values: ArrayLike<unknown>, labels: PhaseLabels | undefined): Uint8Array {
  for (const word of Object.values(labels ?? {})) {
    if (PHASE_NAMES.includes(word)) continue;
    const near = nearest(word, PHASE_NAMES);
    throw new TypeError(
      `${where}: phases translates to ${describe(word)}, which is no phase.${near ? ` Did you mean "${near}"?` : ''} Phases: ${PHASE_NAMES.join(', ')}.`,
    );
  }
  const unknown = new Set<string>();
  const out = Uint8Array.from(values, (value) => {
    const label = value == null ? '' : String(value);
    const word = labels?.[label] ?? (labels === undefined ? label : '');
    const at = PHASE_NAMES.indexOf(word);
    if (at < 0 && labels === undefined) unknown.add(label);
    return at < 0 ? NO_PHASE : at;
  });
  if (unknown.size > 0) {
    throw new TypeError(
      `${where}: phase labels ${[...unknown].slice(0, 8).map(describe).join(', ')} are not known. Translate them with ` +
        `phases: { "label": "main sequence", ... }; labels left out of it are left out of the grid. Phases: ${PHASE_NAMES.join(', ')}.`,
    );
  }
  return out;
}
