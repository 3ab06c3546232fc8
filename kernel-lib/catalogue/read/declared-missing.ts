/** Words or numbers that mean "no value": for every column, or a list a column (`'*'` for every other one). */
export type MissingValues = readonly (string | number)[] | Readonly<Record<string, readonly (string | number)[]>>;

/** The declared words of each column, trimmed and in lower case. */
export function missingWordsOf(missing: MissingValues | undefined): (column: string) => ReadonlySet<string> {
  const none: ReadonlySet<string> = new Set();
  return (column) => {
    const values = missingOf(missing, column);
    return values.length === 0 ? none : new Set(values.map((v) => String(v).trim().toLowerCase()));
  };
}

/** The values declared missing for a column. */
export function missingOf(missing: MissingValues | undefined, column: string): readonly (string | number)[] {
  if (missing === undefined) return [];
  if (Array.isArray(missing)) return missing;
  const record = missing as Readonly<Record<string, readonly (string | number)[]>>;
  return [...(Object.hasOwn(record, column) ? record[column] : Object.hasOwn(record, '*') ? record['*'] : [])];
}
