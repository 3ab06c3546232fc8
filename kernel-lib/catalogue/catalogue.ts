import { type ColumnTable, table as makeTable } from 'arquero';
import { nearest } from '../quantity/options';
import { attachPresentation } from '../quantity/present';
import { type ColumnData, type ColumnInfo, type ColumnValues, countMissing, kindOf, takeRows } from './columns';
import type { Cut } from './cuts/cut';
import type { HistoryStep } from './history';
import type { Role, Roles } from './roles';
import { presentCatalogue } from './show';

/** What a Catalogue is made of. */
export interface CatalogueParts {
  /** Where the rows came from, for messages: a file name, `simulateCluster`, ... */
  readonly source: string;
  readonly rowCount: number;
  readonly columns: readonly ColumnData[];
  readonly roles?: Roles;
  readonly history?: readonly HistoryStep[];
  /** Things a reader should be told about the data, one sentence each. */
  readonly warnings?: readonly string[];
  /** Keywords of the whole table, as the file gave them. */
  readonly meta?: Readonly<Record<string, unknown>>;
}

/**
 * A table of stars: columns with unit, description and role, and the history of what was done to them. Immutable: every
 * verb returns a new Catalogue that shares the columns it did not change.
 */
export class Catalogue {
  /** Where the rows came from. */
  readonly source: string;
  readonly rowCount: number;
  readonly columns: readonly ColumnInfo[];
  /** Role to column name, for the columns whose meaning is known. */
  readonly roles: Roles;
  readonly history: readonly HistoryStep[];
  /** What a reader should be told about the data. */
  readonly warnings: readonly string[];
  /** Keywords of the whole table, as the file gave them. */
  readonly meta: Readonly<Record<string, unknown>>;
  readonly #values: ReadonlyMap<string, ColumnValues>;
  readonly #cache: { table?: ColumnTable } = {};

  constructor(parts: CatalogueParts) {
    const values = new Map<string, ColumnValues>();
    for (const column of parts.columns) {
      if (values.has(column.name)) throw new Error(`Catalogue: two columns are named "${column.name}".`);
      if (column.values.length !== parts.rowCount) {
        throw new RangeError(
          `Catalogue: column "${column.name}" has ${column.values.length} rows, expected ${parts.rowCount}.`,
        );
      }
      values.set(column.name, column.values);
    }
    for (const [role, name] of Object.entries(parts.roles ?? {})) {
      if (!values.has(name)) throw new Error(`Catalogue: role ${role} names column "${name}", which does not exist.`);
    }
    this.source = parts.source;
    this.rowCount = parts.rowCount;
    this.columns = Object.freeze(
      parts.columns.map((c) =>
        Object.freeze({
          name: c.name,
          kind: kindOf(c.values),
          unit: c.unit ?? '',
          description: c.description ?? '',
          ucd: c.ucd ?? '',
          missing: countMissing(c.values),
        }),
      ),
    );
    this.roles = Object.freeze({ ...parts.roles });
    this.history = Object.freeze([...(parts.history ?? [])]);
    this.warnings = Object.freeze([...(parts.warnings ?? [])]);
    this.meta = Object.freeze({ ...parts.meta });
    this.#values = values;
    attachPresentation(this, presentCatalogue(this));
    Object.freeze(this);
  }

  /**
   * The rows as an arquero table, sharing the columns. Such a table keeps its columns in a plain object, which cannot hold
   * the name `__proto__`: a column of that name is called `__proto__column` there.
   */
  get table(): ColumnTable {
    this.#cache.table ??= makeTable(
      Array.from(
        this.#values,
        ([name, values]) => [name === '__proto__' ? '__proto__column' : name, values] as [string, never],
      ),
    );
    return this.#cache.table;
  }

  /** Whether a column or role of that name exists. */
  has(nameOrRole: string): boolean {
    return this.#find(nameOrRole) !== null;
  }

  /**
   * Values of a numeric column, by its name or its role; missing is NaN. The array is the column itself: don't write to it.
   * @throws Error when there is no such column or it holds text
   */
  numbers(nameOrRole: Role | (string & {})): Float64Array {
    const values = this.values(nameOrRole);
    if (values instanceof Float64Array) return values;
    if (values.every((v) => v === null)) return new Float64Array(values.length).fill(Number.NaN);
    throw new TypeError(
      `numbers: column "${this.#find(nameOrRole)}" of ${this.source} holds ${kindOf(values)}, not numbers.`,
    );
  }

  /** Values of any column, by its name or its role. @throws Error when there is no such column */
  values(nameOrRole: Role | (string & {})): ColumnValues {
    const name = this.#find(nameOrRole);
    if (name !== null) return this.#values.get(name) as ColumnValues;
    const names = this.columns.map((c) => c.name);
    const roles = Object.keys(this.roles);
    const near = nearest(nameOrRole, [...names, ...roles]);
    const shown =
      names.length > 30 ? `${names.slice(0, 30).join(', ')}, ... (${names.length} columns)` : names.join(', ');
    throw new Error(
      `${this.source} has no column or role "${nameOrRole}".${near ? ` Did you mean "${near}"?` : ''} ` +
        `Columns: ${shown}. Roles: ${roles.join(', ') || 'none'}. Name a role's column with roles: { "${nameOrRole}": "column" } when reading.`,
    );
  }

  /**
   * The rows that pass every cut, each cut recorded in the history.
   * @param cuts made by parallaxSignal, magnitudeRange, cone, ...
   */
  keep(...cuts: readonly Cut[]): Catalogue {
    let current: Catalogue = this;
    for (const cut of cuts) {
      const { mask, note } = cut.apply(current);
      current = current.select(mask, cut.description, note);
    }
    return current;
  }

  /**
   * The rows with a non-zero mask, recorded in the history.
   * @param mask shape (rowCount)
   */
  select(mask: ArrayLike<number>, action: string, note = ''): Catalogue {
    if (mask.length !== this.rowCount) {
      throw new RangeError(`select: mask has ${mask.length} entries for ${this.rowCount} rows.`);
    }
    let count = 0;
    for (let i = 0; i < mask.length; i++) if (mask[i]) count++;
    const rows = new Uint32Array(count);
    for (let i = 0, at = 0; i < mask.length; i++) if (mask[i]) rows[at++] = i;
    return this.#derive({
      rowCount: count,
      columns: this.columnData().map((c) => ({ ...c, values: takeRows(c.values, rows) })),
      history: [...this.history, { action, rowsBefore: this.rowCount, rowsAfter: count, note }],
    });
  }

  /**
   * Any change by an arquero function. Columns that keep their name keep unit, description and role.
   * @param change given the arquero table, returns another
   * @param note   what was done, for the history
   * @example catalogue.transform((t) => t.derive({ 'b_v': (d) => d.b_mag - d.v_mag }), 'colour B-V')
   */
  transform(change: (table: ColumnTable) => ColumnTable, note: string): Catalogue {
    if (typeof note !== 'string' || note === '') {
      throw new TypeError('transform: say in a second argument what was done, for the history.');
    }
    const changed = change(this.table).reify();
    const known = new Map(this.columns.map((c) => [c.name, c]));
    const columns = changed.columnNames().map((name) => {
      const info = known.get(name);
      return {
        name,
        values: toColumnValues(changed.array(name) as ArrayLike<unknown>),
        unit: info?.unit,
        description: info?.description,
        ucd: info?.ucd,
      };
    });
    const names = new Set(columns.map((c) => c.name));
    return this.#derive({
      rowCount: changed.numRows(),
      columns,
      roles: Object.fromEntries(Object.entries(this.roles).filter(([, name]) => names.has(name))),
      history: [
        ...this.history,
        { action: note, rowsBefore: this.rowCount, rowsAfter: changed.numRows(), note: 'arquero transform' },
      ],
    });
  }

  /** The same rows with columns added or replaced, recorded in the history. */
  withColumns(added: readonly ColumnData[], action: string, options: { roles?: Roles; note?: string } = {}): Catalogue {
    const names = new Set(added.map((c) => c.name));
    return this.#derive({
      columns: [...this.columnData().filter((c) => !names.has(c.name)), ...added],
      roles: { ...this.roles, ...options.roles },
      history: [
        ...this.history,
        { action, rowsBefore: this.rowCount, rowsAfter: this.rowCount, note: options.note ?? '' },
      ],
    });
  }

  /** Every column with its values, as needed to build another Catalogue. */
  columnData(): ColumnData[] {
    return this.columns.map((c) => ({
      name: c.name,
      unit: c.unit,
      description: c.description,
      ucd: c.ucd,
      values: this.#values.get(c.name) as ColumnValues,
    }));
  }

  #derive(parts: Partial<CatalogueParts>): Catalogue {
    return new Catalogue({
      source: this.source,
      rowCount: this.rowCount,
      columns: [],
      roles: this.roles,
      warnings: this.warnings,
      meta: this.meta,
      ...parts,
    });
  }

  #find(nameOrRole: string): string | null {
    if (this.#values.has(nameOrRole)) return nameOrRole;
    return Object.hasOwn(this.roles, nameOrRole) ? (this.roles[nameOrRole as Role] ?? null) : null;
  }
}

/** Columns of an arquero table as Coeval holds them: all numbers or missing become Float64Array, the rest text. */
export function toColumnValues(values: ArrayLike<unknown>): ColumnValues {
  if (values instanceof Float64Array) return values;
  const n = values.length;
  let numeric = true;
  let logical = true;
  for (let i = 0; i < n && (numeric || logical); i++) {
    const v = values[i];
    if (v == null) continue;
    if (typeof v !== 'number' && !(typeof v === 'bigint' && isSafe(v))) numeric = false;
    if (typeof v !== 'boolean') logical = false;
  }
  if (logical && !numeric) return Array.from(values, (v) => (v == null ? null : (v as boolean)));
  if (!numeric) return Array.from(values, (v) => (v == null ? null : v instanceof Date ? v.toISOString() : String(v)));
  const out = new Float64Array(n);
  for (let i = 0; i < n; i++) out[i] = values[i] == null ? Number.NaN : Number(values[i]);
  return out;
}

function isSafe(v: bigint): boolean {
  return v <= BigInt(Number.MAX_SAFE_INTEGER) && v >= BigInt(-Number.MAX_SAFE_INTEGER);
}
