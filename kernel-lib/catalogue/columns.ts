/** Values of a column. Missing is NaN in numbers and null elsewhere. Whole numbers beyond 2^53 are kept as text. */
export type ColumnValues = Float64Array | readonly (string | null)[] | readonly (boolean | null)[];

export type ColumnKind = 'number' | 'text' | 'boolean';

/** What is known about a column, without its values. */
export interface ColumnInfo {
  readonly name: string;
  readonly kind: ColumnKind;
  /** Unit as Coeval holds the values, '' for none. */
  readonly unit: string;
  readonly description: string;
  /** IVOA UCD1+ word, '' where unknown. */
  readonly ucd: string;
  /** Number of missing values. */
  readonly missing: number;
}

/** A column to build a Catalogue from. */
export interface ColumnData {
  readonly name: string;
  readonly values: ColumnValues;
  readonly unit?: string;
  readonly description?: string;
  readonly ucd?: string;
}

export function kindOf(values: ColumnValues): ColumnKind {
  if (values instanceof Float64Array) return 'number';
  for (const value of values) {
    if (value !== null) return typeof value === 'boolean' ? 'boolean' : 'text';
  }
  return 'text';
}

export function countMissing(values: ColumnValues): number {
  let missing = 0;
  if (values instanceof Float64Array) {
    for (let i = 0; i < values.length; i++) if (Number.isNaN(values[i])) missing++;
  } else {
    for (const value of values) if (value == null) missing++;
  }
  return missing;
}

/** The rows of a column whose indices are given, in that order. */
export function takeRows(values: ColumnValues, rows: Uint32Array): ColumnValues {
  if (values instanceof Float64Array) {
    const out = new Float64Array(rows.length);
    for (let i = 0; i < rows.length; i++) out[i] = values[rows[i]];
    return out;
  }
  return Array.from(rows, (r) => values[r]) as ColumnValues;
}

/** A number as tables show it: five digits, the exponent only where it is shorter. */
export function shortNumber(value: number): string {
  if (Number.isInteger(value) && Math.abs(value) < 1e12) return String(value);
  return String(Number(value.toPrecision(5)));
}

/** A value as tables show it; missing is empty. */
export function columnValueText(value: number | string | boolean | null): string {
  if (value === null || Number.isNaN(value)) return '';
  return String(value);
}
