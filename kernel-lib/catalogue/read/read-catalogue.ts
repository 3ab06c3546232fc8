import { checkChoice, checkOptions, describe, nearest } from '../../quantity/options';
import type { Catalogue } from '../catalogue';
import { fileTitle, readFileBytes } from '../files';
import type { Role } from '../roles';
import { assembleCatalogue } from './assemble-catalogue';
import { readCsv } from './csv';
import { type MissingValues, missingWordsOf } from './declared-missing';
import { isEcsv, readEcsv } from './ecsv';
import { gunzip, isGzip } from './gunzip';
import type { BadCells, RawTable, ReadRequest } from './raw-table';
import { checkTextBytes } from './text-bytes';

/** Formats that `readCatalogue` reads. */
export type CatalogueFormat = 'csv' | 'tsv' | 'ecsv';

/** A reader: text bytes to columns. */
type Reader = (bytes: Uint8Array, request: ReadRequest) => RawTable;

const READERS: Readonly<Record<CatalogueFormat, Reader>> = {
  csv: (bytes, request) => readCsv(bytes, request, null),
  tsv: (bytes, request) => readCsv(bytes, request, 9),
  ecsv: readEcsv,
};

export interface ReadCatalogueOptions {
  /** Format; found from the content by default. */
  readonly format?: CatalogueFormat;
  /** Column of a role, where the file's UCDs and names do not say it: `{ parallax: 'plx', 'magnitude.V': 'V' }`. */
  readonly roles?: Readonly<Partial<Record<Role, string>>>;
  /** Unit of a column, in place of what the file says: `{ plx: 'mas' }`. */
  readonly units?: Readonly<Record<string, string>>;
  /** Values that mean "no value", besides empty cells, nan, null, NA, -- and the like: `{ v_mag: [99.999] }`. */
  readonly missing?: MissingValues;
  /** What a cell of text in a column of numbers is: an 'error' (default) or 'missing'. */
  readonly badCells?: BadCells;
  /** Columns to keep as text, such as identifiers made of digits. */
  readonly text?: readonly string[];
  /** Names of all columns, for a file without a line of names or with names that cannot be used. */
  readonly columnNames?: readonly string[];
}

const OPTIONS = ['format', 'roles', 'units', 'missing', 'badCells', 'text', 'columnNames'];

/**
 * Reads a catalogue: CSV, TSV or ECSV (Astropy Proposal for Enhancement 6), plain or gzipped, UTF-8. Numbers are read to
 * the last bit; whole numbers beyond 2^53 (star identifiers) stay text. Columns whose role is recognised, from IVOA UCDs
 * or common names, are converted to deg, mas, mas/yr, km/s and mag; the others keep the file's unit. Values that look as if
 * they stood for "missing" (99.999, -1) are kept and reported in `.warnings`.
 * @param source path, or the bytes of a file
 * @returns the catalogue; what was assumed stands in its history and warnings
 * @throws Error naming file, line, column and value of what cannot be read, with the way to mend it
 * @example const field = await readCatalogue('field.csv', { roles: { parallax: 'plx' }, units: { plx: 'mas' } })
 */
export async function readCatalogue(
  source: string | Uint8Array | ArrayBuffer,
  options: ReadCatalogueOptions = {},
): Promise<Catalogue> {
  const caller = 'readCatalogue';
  checkOptions(caller, options, OPTIONS);
  if (options.format !== undefined)
    checkChoice(caller, 'format', options.format, Object.keys(READERS) as CatalogueFormat[]);
  if (options.badCells !== undefined) checkChoice(caller, 'badCells', options.badCells, ['error', 'missing']);
  checkShapes(caller, options);
  checkMissing(caller, options.missing);
  const { bytes, title } = await bytesOf(caller, source);
  const where = `${caller}: ${title}`;
  if (bytes.length === 0) throw new Error(`${where}: the file is empty.`);
  const packed = isGzip(bytes);
  const content = checkTextBytes(packed ? await gunzip(bytes, where) : bytes, where);
  if (content.length === 0) throw new Error(`${where}: the file is empty.`);
  const format = options.format ?? (isEcsv(content) ? 'ecsv' : /\.(?:tsv|tab)(?:\.gz)?$/i.test(title) ? 'tsv' : 'csv');
  const request: ReadRequest = {
    where,
    badCells: options.badCells ?? 'error',
    text: options.text ?? [],
    columnNames: options.columnNames,
    missingWords: missingWordsOf(options.missing),
  };
  const raw = READERS[format](content, request);
  checkColumnOptions(where, raw, options);
  return assembleCatalogue(raw, { title, where, packed, ...options });
}

async function bytesOf(
  caller: string,
  source: string | Uint8Array | ArrayBuffer,
): Promise<{ bytes: Uint8Array; title: string }> {
  if (typeof source === 'string') {
    if (source === '') throw new TypeError(`${caller}: the path is empty.`);
    return { bytes: await readFileBytes(caller, source), title: fileTitle(source) };
  }
  // By tag, not by class: bytes may come from another realm, such as a page's frame.
  const tag = Object.prototype.toString.call(source);
  if (tag === '[object Uint8Array]') return { bytes: source as Uint8Array, title: 'the bytes given' };
  if (tag === '[object ArrayBuffer]') return { bytes: new Uint8Array(source as ArrayBuffer), title: 'the bytes given' };
  throw new TypeError(`${caller}: expected a path, a Uint8Array or an ArrayBuffer, got ${describe(source)}.`);
}

/** Refuses options that speak of columns the file does not have. */
function checkColumnOptions(where: string, raw: RawTable, options: ReadCatalogueOptions): void {
  const names = raw.columns.map((c) => c.name);
  const check = (option: string, name: string) => {
    if (names.includes(name)) return;
    const near = nearest(name, names);
    const shown = names.length > 30 ? `${names.slice(0, 30).join(', ')}, ...` : names.join(', ');
    throw new Error(
      `${where}: ${option} names column "${name}", which the file does not have.${near ? ` Did you mean "${near}"?` : ''} Columns: ${shown}.`,
    );
  };
  for (const name of Object.keys(options.units ?? {})) check('units', name);
  for (const name of options.text ?? []) check('text', name);
  for (const name of Object.values(options.roles ?? {})) check('roles', name);
  if (options.missing && !Array.isArray(options.missing)) {
    for (const name of Object.keys(options.missing)) if (name !== '*') check('missing', name);
  }
}

/** Refuses options of another shape than they have. */
function checkShapes(caller: string, options: ReadCatalogueOptions): void {
  for (const option of ['roles', 'units'] as const) {
    const given = options[option];
    if (given === undefined) continue;
    const isRecord = given !== null && typeof given === 'object' && !Array.isArray(given);
    const wrong = isRecord ? Object.entries(given).find(([, v]) => typeof v !== 'string') : ['', given];
    if (wrong === undefined) continue;
    const example = option === 'units' ? "{ plx: 'mas' }" : "{ parallax: 'plx' }";
    throw new TypeError(
      `${caller}: ${option} must be like ${example}, got ${wrong[0] === '' ? '' : `${wrong[0]}: `}${describe(wrong[1])}.`,
    );
  }
  for (const option of ['text', 'columnNames'] as const) {
    const given = options[option];
    if (given === undefined || (Array.isArray(given) && given.every((name) => typeof name === 'string'))) continue;
    throw new TypeError(`${caller}: ${option} must be a list of column names, got ${describe(given)}.`);
  }
}

function checkMissing(caller: string, missing: MissingValues | undefined): void {
  if (missing === undefined || Array.isArray(missing)) return;
  if (missing === null || typeof missing !== 'object') {
    throw new TypeError(
      `${caller}: missing must be a list, or a list a column as in { v_mag: [99.999] }, got ${describe(missing)}.`,
    );
  }
  for (const [name, values] of Object.entries(missing)) {
    if (Array.isArray(values)) continue;
    throw new TypeError(`${caller}: missing.${name} must be a list such as [99.999], got ${describe(values)}.`);
  }
}
