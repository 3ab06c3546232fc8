import type { Band } from '../quantity/band';
import { dwarfColumn, dwarfPoints } from './dwarf-sequence';
import type { DwarfColumn } from './dwarf-table';
import { hipparcosMinusV } from './hipparcos-magnitude';

/** Columns of the dwarf sequence that lead from V to a band: V - band is the sum of the terms. */
const FROM_V: Readonly<Record<Band, readonly (readonly [DwarfColumn, 1 | -1])[]>> = {
  U: [
    ['B-V', -1],
    ['U-B', -1],
  ],
  B: [['B-V', -1]],
  V: [],
  Rc: [['V-Rc', 1]],
  Ic: [['V-Ic', 1]],
  J: [
    ['V-Ks', 1],
    ['H-Ks', -1],
    ['J-H', -1],
  ],
  H: [
    ['V-Ks', 1],
    ['H-Ks', -1],
  ],
  Ks: [['V-Ks', 1]],
  G: [['G-V', -1]],
  BP: [
    ['G-V', -1],
    ['G-RP', 1],
    ['BP-RP', -1],
  ],
  RP: [
    ['G-V', -1],
    ['G-RP', 1],
  ],
  Hp: [],
};

/**
 * Bolometric correction in a band by the dwarf sequence itself, point by point.
 * @returns mag; NaN where a column that leads to the band is empty
 * Source: Pecaut & Mamajek 2013; Hp by hipparcosMinusV.
 */
export function tableCorrection(band: Band, logTeff: number): number {
  let bc = dwarfColumn('bcV', logTeff);
  for (const [column, sign] of FROM_V[band]) bc += sign * dwarfColumn(column, logTeff);
  return band === 'Hp' ? bc - hipparcosMinusV(dwarfColumn('B-V', logTeff)) : bc;
}

/** Least and greatest log Teff at which a band has a value. */
export function tableRange(band: Band): readonly [number, number] {
  const columns: DwarfColumn[] = ['bcV', ...FROM_V[band].map(([c]) => c), ...(band === 'Hp' ? (['B-V'] as const) : [])];
  let low = Number.NEGATIVE_INFINITY;
  let high = Number.POSITIVE_INFINITY;
  for (const name of columns) {
    const { logTeff } = dwarfPoints(name);
    low = Math.max(low, logTeff[0]);
    high = Math.min(high, logTeff[logTeff.length - 1]);
  }
  return [low, high];
}
