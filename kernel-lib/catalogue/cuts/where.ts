import { describe } from '../../quantity/options';
import type { Cut } from './cut';
import { withoutValueNote } from './without-value';

/** One row as a test of `where` sees it. */
export interface CatalogueRow {
  /** Number of the row, from 0. */
  readonly index: number;
  /** Number in a column or role; NaN when missing. */
  number(nameOrRole: string): number;
  /** Value of any column or role; null (NaN in numbers) when missing. */
  value(nameOrRole: string): number | string | boolean | null;
}

/**
 * Any cut by a function: on one column, or on a whole row. Rows on which the test reads a missing value fail, whatever it
 * answers.
 * @param what a description for the history, or (with a column) the name or role of the column
 * @param test what a row must fulfil
 * @throws TypeError when the test is not a function
 * @example field.keep(where('bluer than 1', (row) => row.number('colour.B-V') < 1))
 * @example field.keep(where('v_mag', (v) => v < 12, 'V brighter than 12'))
 */
export function where(description: string, test: (row: CatalogueRow) => boolean): Cut;
export function where(column: string, test: (value: never) => boolean, description: string): Cut;
export function where(
  what: string,
  test: ((row: CatalogueRow) => boolean) | ((value: never) => boolean),
  description?: string,
): Cut {
  if (typeof what !== 'string' || what === '')
    throw new TypeError(`where: say first what is cut, got ${describe(what)}.`);
  if (typeof test !== 'function') throw new TypeError(`where: the test must be a function, got ${describe(test)}.`);
  if (description !== undefined) return whereColumn(what, test as (value: unknown) => boolean, description);
  return Object.freeze({
    description: what,
    apply(catalogue) {
      const columns = new Map<string, ReturnType<typeof catalogue.values>>();
      const column = (name: string) => {
        let values = columns.get(name);
        if (values === undefined) {
          values = catalogue.values(name);
          columns.set(name, values);
        }
        return values;
      };
      let lacks = false;
      // One accessor that moves from row to row, not one a row.
      const row = {
        index: 0,
        number(name: string): number {
          const v = column(name)[row.index];
          if (v === null || Number.isNaN(v)) {
            lacks = true;
            return Number.NaN;
          }
          if (typeof v !== 'number')
            throw new TypeError(`where: column "${name}" holds ${typeof v}, not numbers; use row.value.`);
          return v;
        },
        value(name: string): number | string | boolean | null {
          const v = column(name)[row.index];
          if (v === null || Number.isNaN(v)) lacks = true;
          return v;
        },
      };
      const mask = new Uint8Array(catalogue.rowCount);
      let without = 0;
      for (; row.index < mask.length; row.index++) {
        lacks = false;
        const passes = (test as (row: CatalogueRow) => boolean)(row);
        if (lacks) without++;
        else if (passes) mask[row.index] = 1;
      }
      return { mask, note: withoutValueNote(without, 'a value') };
    },
  } satisfies Cut);
}

function whereColumn(column: string, test: (value: unknown) => boolean, description: string): Cut {
  return Object.freeze({
    description,
    apply(catalogue) {
      const values = catalogue.values(column);
      const mask = new Uint8Array(values.length);
      let without = 0;
      for (let i = 0; i < mask.length; i++) {
        const v = values[i];
        if (v === null || Number.isNaN(v)) without++;
        else if (test(v)) mask[i] = 1;
      }
      return { mask, note: withoutValueNote(without, column) };
    },
  } satisfies Cut);
}
