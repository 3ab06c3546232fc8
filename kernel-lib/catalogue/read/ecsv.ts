import { parseDocument } from 'yaml';
import type { ColumnValues } from '../columns';
import { checkNames } from './column-names';
import { type DeclaredKind, quote, readDelimitedColumns } from './delimited-columns';
import type { RawColumn, RawTable, ReadRequest } from './raw-table';
import type { ScanLayout } from './scan-layout';
import { splitRecord } from './split-record';
import { withFinalLineEnd } from './text-bytes';
import { afterLine, lineOf } from './text-lines';

const HASH = 35;

/** Whether text begins as ECSV does. */
export function isEcsv(bytes: Uint8Array): boolean {
  return /^# %ECSV /.test(new TextDecoder('latin1').decode(bytes.subarray(0, 16)));
}

interface DeclaredColumn {
  readonly name: string;
  readonly datatype: string;
  readonly subtype: string;
  readonly unit: string;
  readonly description: string;
  readonly ucd: string;
}

/**
 * Enhanced character-separated values: a YAML header in comment lines, then CSV. Source: Astropy Proposal for
 * Enhancement 6, "Enhanced Character Separated Values table format", version 1.0. Multidimensional and variable-length cells
 * (subtype) stay as their JSON text; masks that were written as columns of their own are applied.
 * @param given text bytes without byte-order mark
 * @throws Error that says what is wrong with the header, or names line and column of a bad row
 */
export function readEcsv(given: Uint8Array, request: ReadRequest): RawTable {
  const bytes = withFinalLineEnd(given);
  const { where } = request;
  const { yaml, next } = headerLines(bytes);
  const header = parseHeader(yaml, where);
  const delimiter = header.delimiter.charCodeAt(0);
  const warnings: string[] = [];

  const line = lineOf(bytes, next);
  if (next >= bytes.length) throw new Error(`${where}: the line of column names after the header is missing.`);
  const top = splitRecord(bytes, next, delimiter, where);
  const written = top.cells.map((c) => c.text);
  const declaredNames = header.columns.map((c) => c.name);
  if (written.length !== declaredNames.length || written.some((name, j) => name !== declaredNames[j])) {
    throw new Error(
      `${where}, line ${line}: the column names (${quote(written.join(', '))}) differ from those of the header (${quote(declaredNames.join(', '))}).`,
    );
  }
  const names = checkNames(declaredNames, line, request, warnings);
  const layout: ScanLayout = {
    bytes,
    start: top.next,
    delimiter,
    comment: HASH,
    names,
    // Others write an empty text and a missing one alike, as ""; files of our own tell them apart.
    quotesSayNothing: header.meta.coeval === undefined,
    missingWords: names.map((name) => request.missingWords(name)),
    where,
    typed: true,
  };
  const kinds = header.columns.map((c) => kindOfDatatype(c, where));
  const read = readDelimitedColumns(layout, kinds, request);
  const columns = header.columns.map((c, j) => ({
    name: names[j],
    values: read.columns[j],
    unit: c.unit,
    description: c.description,
    ucd: c.ucd,
  }));
  const masked = applyMasks(columns, header.serialized);
  return {
    form: `ECSV, ${delimiter === 44 ? 'comma' : 'blank'}-separated`,
    rowCount: read.rowCount,
    columns: masked,
    warnings: [...warnings, ...read.warnings],
    meta: withoutSerialization(header.meta),
  };
}

/** The keywords without astropy's note on how columns were taken apart, which no longer holds. */
function withoutSerialization(meta: Readonly<Record<string, unknown>>): Readonly<Record<string, unknown>> {
  const { __serialized_columns__: _taken, ...rest } = meta;
  return rest;
}

function headerLines(bytes: Uint8Array): { yaml: string; next: number } {
  const decoder = new TextDecoder('utf-8');
  let i = afterLine(bytes, 0);
  let yaml = '';
  while (i < bytes.length && bytes[i] === HASH) {
    const end = afterLine(bytes, i);
    // The marker is "# "; what follows is YAML, where indentation counts.
    yaml += decoder
      .decode(bytes.subarray(i, end))
      .replace(/^# ?/, '')
      .replace(/\r?\n?$/, '\n');
    i = end;
  }
  return { yaml, next: i };
}

interface Header {
  readonly delimiter: string;
  readonly columns: readonly DeclaredColumn[];
  readonly meta: Readonly<Record<string, unknown>>;
  /** How astropy took columns apart, every scalar as text. */
  readonly serialized: unknown;
}

function parseHeader(yaml: string, where: string): Header {
  // Names and units are texts whatever they look like (a column y is no "yes"); keywords are values.
  const texts = parseYaml(yaml, 'failsafe', where);
  const datatype = texts?.datatype;
  if (texts === null || typeof texts !== 'object' || !Array.isArray(datatype)) {
    throw new Error(`${where}: the ECSV header has no list "datatype" of its columns.`);
  }
  const delimiter = texts.delimiter ?? ' ';
  if (delimiter !== ' ' && delimiter !== ',') {
    throw new Error(
      `${where}: the ECSV header declares the delimiter ${quote(String(delimiter))}; the format knows a blank and a comma.`,
    );
  }
  const columns = datatype.map((entry, j) => declaredColumn(entry, j, where));
  const meta = parseYaml(yaml, 'core', where)?.meta;
  const serialized = isRecord(texts.meta) ? texts.meta.__serialized_columns__ : undefined;
  return {
    delimiter,
    columns,
    serialized,
    meta: isRecord(meta) ? meta : meta === undefined || meta === null ? {} : { meta },
  };
}

function parseYaml(yaml: string, schema: 'core' | 'failsafe', where: string): Record<string, unknown> | null {
  const parsed = parseDocument(yaml, { logLevel: 'silent', schema, customTags: ['omap'] });
  if (parsed.errors.length > 0) {
    throw new Error(`${where}: the ECSV header is not valid YAML: ${parsed.errors[0].message.split('\n')[0]}`);
  }
  try {
    return plainYaml(parsed.toJS({ mapAsMap: true, maxAliasCount: 100 })) as Record<string, unknown> | null;
  } catch (error) {
    throw new Error(`${where}: the ECSV header cannot be read: ${(error as Error).message}.`);
  }
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return value !== null && typeof value === 'object' && !Array.isArray(value);
}

function declaredColumn(entry: unknown, j: number, where: string): DeclaredColumn {
  const column = entry as Record<string, unknown> | null;
  if (column === null || typeof column !== 'object' || typeof column.name !== 'string') {
    throw new Error(`${where}: column ${j + 1} of the ECSV header has no name.`);
  }
  const meta = isRecord(column.meta) ? column.meta : {};
  const ucdKey = Object.keys(meta).find((key) => key.toLowerCase() === 'ucd');
  const text = (value: unknown) => (value === undefined || value === null ? '' : String(value));
  return {
    name: column.name,
    datatype: text(column.datatype),
    subtype: text(column.subtype),
    unit: text(column.unit),
    description: text(column.description),
    ucd: ucdKey === undefined ? '' : text(meta[ucdKey]),
  };
}

const NUMBERS = /^(?:float(?:16|32|64|128))$/;
const INTEGERS = /^u?int(?:8|16|32|64)$/;

function kindOfDatatype(column: DeclaredColumn, where: string): DeclaredKind {
  const type = column.datatype;
  if (NUMBERS.test(type)) return 'number';
  if (INTEGERS.test(type)) return 'integer';
  if (type === 'bool') return 'boolean';
  if (type === 'string' || /^complex(?:64|128|256)$/.test(type)) return 'text';
  throw new Error(
    `${where}, column "${column.name}": unknown datatype ${quote(type)}. ECSV knows bool, int8 to int64, uint8 to uint64, float16 to float128, complex and string.`,
  );
}

/**
 * YAML maps as plain records and ordered maps (!!omap, a list of one-key maps in old headers) as records in their order.
 * Records have no prototype, so that a key __proto__ is a key like any other.
 */
function plainYaml(value: unknown): unknown {
  if (value instanceof Map) {
    const record: Record<string, unknown> = Object.create(null);
    for (const [key, inner] of value) record[String(key)] = plainYaml(inner);
    return record;
  }
  if (Array.isArray(value)) return value.map(plainYaml);
  if (value instanceof Set) return [...value].map(plainYaml);
  return value instanceof Date ? value.toISOString() : value;
}

/** Masks that astropy wrote as boolean columns: their rows become missing, the mask columns go. */
function applyMasks(columns: readonly RawColumn[], serialized: unknown): RawColumn[] {
  if (!isRecord(serialized)) return [...columns];
  const drop = new Set<string>();
  const replaced = new Map<string, ColumnValues>();
  for (const entry of Object.values(serialized) as (Record<string, unknown> | null)[]) {
    const data = nameOf(entry?.data);
    const mask = nameOf(entry?.mask);
    const values = columns.find((c) => c.name === data)?.values;
    const flags = columns.find((c) => c.name === mask)?.values;
    if (data === null || mask === null || !values || !flags || flags instanceof Float64Array) continue;
    drop.add(mask);
    replaced.set(
      data,
      values instanceof Float64Array
        ? values.map((v, i) => (flags[i] === true ? Number.NaN : v))
        : (values.map((v, i) => (flags[i] === true ? null : v)) as ColumnValues),
    );
  }
  return columns.filter((c) => !drop.has(c.name)).map((c) => ({ ...c, values: replaced.get(c.name) ?? c.values }));
}

function nameOf(entry: unknown): string | null {
  const name = (entry as { name?: unknown } | null | undefined)?.name;
  return typeof name === 'string' ? name : null;
}
