import type { ColumnValues } from '../columns';

/** A column as a reader found it, before units and roles are settled. */
export interface RawColumn {
  readonly name: string;
  readonly values: ColumnValues;
  /** Unit as the file spells it, '' where it says nothing. */
  readonly unit: string;
  readonly description: string;
  /** IVOA UCD1+ word, '' where the file says nothing. */
  readonly ucd: string;
  /** Whether its values were degrees, minutes and seconds, and are degrees now. */
  readonly isSexagesimal?: boolean;
}

/** What every reader turns bytes into. */
export interface RawTable {
  /** Format and what was found out about it, for the history: `CSV, comma-separated`. */
  readonly form: string;
  readonly rowCount: number;
  readonly columns: readonly RawColumn[];
  /** What a reader of the data should be told, one sentence each. */
  readonly warnings: readonly string[];
  /** Table-wide keywords of the file. */
  readonly meta: Readonly<Record<string, unknown>>;
}

/** What to do with a cell of text in a column of numbers. */
export type BadCells = 'error' | 'missing';

/** What every reader is told. */
export interface ReadRequest {
  /** How messages begin: `readCatalogue: field.csv`. */
  readonly where: string;
  readonly badCells: BadCells;
  /** Columns to keep as text whatever they hold. */
  readonly text: readonly string[];
  /** Names in place of the file's own. */
  readonly columnNames?: readonly string[];
  /** Words that stand for a missing value in a column, besides the usual ones; already trimmed and in lower case. */
  missingWords(column: string): ReadonlySet<string>;
}
