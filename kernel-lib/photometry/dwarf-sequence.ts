import { monotoneCubic } from '../numeric/monotone-cubic';
import { DWARF_COLUMNS, DWARF_ROWS, type DwarfColumn } from './dwarf-table';

/** A column of the dwarf sequence with its log temperatures, cool to hot, empty cells left out. */
export interface DwarfPoints {
  readonly logTeff: Float64Array;
  readonly values: Float64Array;
}

/**
 * The given cells of a column of the dwarf sequence.
 * @param name    a column of DWARF_COLUMNS
 * @param through types to keep, all by default; later types than this one are left out
 * @returns shape (n) each, cool to hot
 * @example dwarfPoints('B-V').values.length // => 86
 */
export function dwarfPoints(name: DwarfColumn): DwarfPoints {
  const k = DWARF_COLUMNS.indexOf(name) + 1;
  const rows = DWARF_ROWS.filter((row) => !Number.isNaN(row[k] as number));
  rows.reverse();
  return {
    logTeff: Float64Array.from(rows, (row) => Math.log10(row[1])),
    values: Float64Array.from(rows, (row) => row[k] as number),
  };
}

const curves = new Map<DwarfColumn, (logTeff: number) => number>();

/**
 * A column of the dwarf sequence at any temperature, by monotone cubic interpolation in log temperature.
 * @param name    a column of DWARF_COLUMNS
 * @param logTeff log10 of K
 * @returns NaN outside the given cells of the column
 * @example dwarfColumn('B-V', Math.log10(5770)) // => 0.65
 * Source: Pecaut & Mamajek 2013, ApJS 208, 9, on-line version 2024.05.15.
 */
export function dwarfColumn(name: DwarfColumn, logTeff: number): number {
  let curve = curves.get(name);
  if (curve === undefined) {
    const points = dwarfPoints(name);
    curve = monotoneCubic(points.logTeff, points.values);
    curves.set(name, curve);
  }
  return curve(logTeff);
}
