import type { Band } from '../quantity/band';
import { dwarfColumn, dwarfPoints } from './dwarf-sequence';
import type { DwarfColumn } from './dwarf-table';
import { type BandLight, bandLight, gridLogTeff } from './light-table';

/** A column of the dwarf sequence at every node, held beyond its ends in step with B-V. */
function dwarfNodes(name: DwarfColumn): Float64Array {
  const { logTeff, values } = dwarfPoints(name);
  const last = logTeff.length - 1;
  return gridLogTeff().map((t) => {
    const inside = dwarfColumn(name, Math.min(Math.max(t, logTeff[0]), logTeff[last]));
    return Number.isNaN(inside) ? (t < logTeff[0] ? values[0] : values[last]) : inside;
  });
}

let table: Readonly<Record<Band, BandLight>> | undefined;

/** Bolometric corrections in every band. Built at first use. */
export function compositeLight(): Readonly<Record<Band, BandLight>> {
  table ??= build();
  return table;
}

function build(): Readonly<Record<Band, BandLight>> {
  const column = (name: DwarfColumn) => dwarfNodes(name);
  const bc = column('bcV');
  const zero = new Float64Array(bc.length);
  const less = (a: Float64Array, b: Float64Array) => a.map((v, i) => v - b[i]);
  const plus = (a: Float64Array, b: Float64Array) => a.map((v, i) => v + b[i]);
  const V = bc;
  const B = less(V, column('B-V'));
  const U = less(B, column('U-B'));
  const Ks = plus(V, column('V-Ks'));
  const H = less(Ks, column('H-Ks'));
  const J = less(H, column('J-H'));
  const G = less(V, column('G-V'));
  const RP = plus(G, column('G-RP'));
  const BP = less(RP, column('BP-RP'));
  const nodes = { U, B, V, Rc: plus(V, column('V-Rc')), Ic: plus(V, column('V-Ic')), J, H, Ks, G, BP, RP, Hp: V };
  return Object.fromEntries(
    Object.entries(nodes).map(([band, level]) => [
      band,
      bandLight({ terms: [level, zero, zero, zero, zero, zero], low: 3.377, lowGiant: 3.377, high: 4.76 }),
    ]),
  ) as Record<Band, BandLight>;
}
