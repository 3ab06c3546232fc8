import { BAND_NAMES, type Band } from '../../quantity/band';
import { HIPPARCOS_RANGE, hipparcosMinusV } from '../hipparcos-magnitude';
import { type BandLight, bandLight, GRID_START, GRID_STEP, gridLogTeff } from '../light-table';
import { blend } from './blend';
import { type Colours, corrections, mapColours } from './colours';
import { dwarfLevel } from './dwarf-level';
import { COOLEST_GIANT, giantLevel } from './giant-level';
import { dwarfMetallicity, giantMetallicity } from './metallicity-terms';
import { supergiantDifference } from './supergiant-difference';

/** Hottest star of the dwarf sequence, O3, is 45,900 K; above, all goes on straight to 75,000 K, the hottest stars that models make. */
const HOTTEST = 4.876;
/**
 * Coolest dwarf of each band: where the table's column ends; for G, BP, RP and Rc where the colour turns back. U-B, which ends at M6 (2810 K),
 * goes on straight to 2570 K.
 */
const COOLEST: Readonly<Record<Band, number>> = {
  U: Math.log10(2570),
  B: Math.log10(2380),
  V: Math.log10(2380),
  Rc: Math.log10(2570),
  Ic: Math.log10(2380),
  J: Math.log10(2380),
  H: Math.log10(2380),
  Ks: Math.log10(2380),
  G: Math.log10(2570),
  BP: Math.log10(2570),
  RP: Math.log10(2570),
  Hp: 3.62,
};
const COOLEST_GIANT_IN: Readonly<Partial<Record<Band, number>>> = { Hp: Math.log10(4350) };

/** Metallicities at which the terms are met exactly: the nearly quadratic relations differ from them by less than 0.01 mag between. */
const EXACT = [-2, -0.6];

let table: Readonly<Record<Band, BandLight>> | undefined;

/**
 * Bolometric corrections in every band as a function of temperature, gravity and metallicity. Made at first use, from relations that
 * are smoothed and blended so that an isochrone has no kink.
 */
export function compositeLight(): Readonly<Record<Band, BandLight>> {
  table ??= build();
  return table;
}

/** Linear and quadratic term of a change that is nought at solar metallicity. */
function terms(change: (f: number) => Colours): [Colours, Colours] {
  const [a, b] = EXACT;
  const atA = change(a);
  const atB = change(b);
  const quadratic = mapColours((x, y) => (x / a - y / b) / (a - b), atA, atB);
  return [mapColours((x, q) => x / a - q * a, atA, quadratic), quadratic];
}

function build(): Readonly<Record<Band, BandLight>> {
  const dwarfs = dwarfLevel();
  const giants = giantLevel();
  const supergiants = supergiantDifference(dwarfs);
  const add = (a: Colours, b: Colours) => mapColours((x, y) => x + y, a, b);
  const rows = Array.from(gridLogTeff(), (t) => {
    const dwarf = dwarfs(t);
    const [d1, d2] = terms((f) => dwarfMetallicity(t, f));
    const hot = blend(t, 3.7, 3.85);
    const none = mapColours(() => 0, dwarf, dwarf);
    const giant = hot < 1 ? mapColours((g, d) => (1 - hot) * (g - d), giants(t), dwarf) : none;
    const [g1, g2] = terms((f) =>
      mapColours((g, d) => (1 - hot) * (g - d), giantMetallicity(t, f), dwarfMetallicity(t, f)),
    );
    const supergiant = hot > 0 ? mapColours((s) => hot * s, supergiants(t), dwarf) : none;
    return [dwarf, d1, d2, add(giant, supergiant), g1, g2];
  });
  const corrected = rows.map((row) => row.map(corrections));
  return Object.freeze(
    Object.fromEntries(
      BAND_NAMES.map((band) => {
        const nodes =
          band === 'Hp' ? hipparcosNodes(rows) : [0, 1, 2, 3, 4, 5].map((k) => corrected.map((row) => row[k][band]));
        const low = COOLEST[band];
        const lowGiant = COOLEST_GIANT_IN[band] ?? COOLEST_GIANT;
        const terms = nodes.map((values, k) => filled(values, k < 3 ? low : lowGiant));
        return [band, bandLight({ terms, low, lowGiant, high: HOTTEST })];
      }),
    ) as Record<Band, BandLight>,
  );
}

/** Hp follows V and B-V. */
function hipparcosNodes(rows: readonly (readonly Colours[])[]): number[][] {
  const hold = (bv: number) => Math.min(Math.max(bv, HIPPARCOS_RANGE[0]), HIPPARCOS_RANGE[1]);
  const hp = (bv: number) => hipparcosMinusV(hold(bv));
  const slope = (bv: number) => (hp(bv + 0.01) - hp(bv - 0.01)) / 0.02;
  return [0, 1, 2, 3, 4, 5].map((k) =>
    rows.map((row) => {
      const c = row[k];
      if (k === 0) return c.bcV - hp(c.bv);
      if (k === 3) return c.bcV - (hp(row[0].bv + c.bv) - hp(row[0].bv));
      // The terms in [Fe/H] move B-V a little: to first order along the curve.
      return c.bcV - slope(row[0].bv) * c.bv;
    }),
  );
}

/** Nodes below the range of a band, where relations may have no value, held at the first of the range: splines need a number in each. */
function filled(values: readonly number[], low: number): number[] {
  // Four knots reach into the range from below.
  const first = Math.max(0, Math.floor((low - GRID_START) / GRID_STEP) - 4);
  const held = values.map((v, i) => (i < first || Number.isNaN(v) ? Number.NaN : v));
  const start = held.findIndex((v) => !Number.isNaN(v));
  if (start > first + 4 || held.slice(start).some(Number.isNaN)) {
    throw new Error('compositeLight: a relation has no value inside the range of its band.');
  }
  return held.map((v, i) => (i < start ? held[start] : v));
}
