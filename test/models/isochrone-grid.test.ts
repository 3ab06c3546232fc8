import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { exportIsochrones } from '../../kernel-lib/models/grid/export-isochrones';
import { isochroneGrid } from '../../kernel-lib/models/grid/isochrone-grid';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { turnoffTable } from '../../kernel-lib/models/isochrone-turnoff';
import type { Isochrone } from '../../kernel-lib/models/stellar-model';

const bands = ['B', 'V'] as const;
const logAges = Array.from({ length: 9 }, (_, i) => 9 + 0.05 * i);
const table = exportIsochrones({ logAges, metallicities: [-0.2, -0.1, 0, 0.1], bands });
const grid = isochroneGrid(table);

/** Largest distance of the points of a curve from another curve in (log Teff x 8, log L), phase by phase. */
function farthest(a: Isochrone, b: Isochrone): number {
  let worst = 0;
  for (let i = 0; i < a.count; i++) {
    let best = Number.POSITIVE_INFINITY;
    for (let j = 0; j + 1 < b.count; j++) {
      const dx = 8 * (b.logTeff[j + 1] - b.logTeff[j]);
      const dy = b.logL[j + 1] - b.logL[j];
      const px = 8 * (a.logTeff[i] - b.logTeff[j]);
      const py = a.logL[i] - b.logL[j];
      const t = Math.max(0, Math.min(1, (px * dx + py * dy) / (dx * dx + dy * dy || 1)));
      best = Math.min(best, Math.hypot(px - t * dx, py - t * dy));
    }
    worst = Math.max(worst, best);
  }
  return worst;
}

describe('isochroneGrid', () => {
  it('gives back what exportIsochrones wrote', () => {
    expect(grid.isochroneCount).toBe(36);
    expect(grid.rowCount).toBe(36 * 400);
    expect(grid.warnings).toEqual([]);
    for (const [logAge, metallicity] of [
      [9, 0],
      [9.2, -0.1],
      [9.4, 0.1],
    ]) {
      const back = grid.isochrone({ logAge, metallicity });
      const own = isochrone({ logAge, metallicity, bands });
      expect(back.count).toBe(own.count);
      for (let i = 0; i < own.count; i++) {
        expect(back.logL[i]).toBeCloseTo(own.logL[i], 9);
        expect(back.logTeff[i]).toBeCloseTo(own.logTeff[i], 9);
        expect(back.magnitudes.V?.[i]).toBeCloseTo(own.magnitudes.V?.[i] as number, 9);
        expect(back.initialMass[i]).toBeCloseTo(own.initialMass[i], 9);
        expect(back.phase[i]).toBe(own.phase[i]);
      }
      expect(Array.from(back.breaks)).toEqual(Array.from(own.breaks));
    }
  });

  it('interpolates at equal evolutionary points, not across the turnoff', () => {
    // Half-way between nodes, the worst place. A blend at equal mass would be off by the length of the subgiant branch, 0.5.
    for (const [logAge, metallicity] of [
      [9.025, 0],
      [9.325, -0.1],
      [9.325, -0.05],
      [9.375, 0.05],
    ]) {
      const between = grid.isochrone({ logAge, metallicity });
      const own = isochrone({ logAge, metallicity, bands, points: 1500 });
      expect(farthest(between, own), `${logAge} ${metallicity}`).toBeLessThan(0.05);
      expect(Math.abs(between.initialMass[between.count - 1] / own.initialMass[own.count - 1] - 1)).toBeLessThan(2e-3);
    }
  });

  it('works wherever the built-in model does', () => {
    const ages = [9.05, 9.13, 9.31, 9.4];
    const own = turnoffTable({ logAges: ages, colour: 'B-V', magnitude: 'V' });
    const by = turnoffTable({ logAges: ages, colour: 'B-V', magnitude: 'V', model: grid });
    ages.forEach((_, i) => {
      expect(Math.abs(by.colour[i] - own.colour[i])).toBeLessThan(0.004);
      expect(Math.abs(by.magnitude[i] - own.magnitude[i])).toBeLessThan(0.08);
      expect(Math.abs(by.mass[i] / own.mass[i] - 1)).toBeLessThan(0.03);
    });
    const again = exportIsochrones({ logAges: [9.1, 9.2], model: grid, bands });
    expect(isochroneGrid(again).isochroneCount).toBe(2);
  });

  it('takes other numbers of points and a part of the bands', () => {
    const iso = grid.isochrone({ logAge: 9.123, metallicity: 0.03, bands: ['V'], points: 250 });
    expect(iso.count).toBe(250);
    expect(Object.keys(iso.magnitudes)).toEqual(['V']);
    for (let i = 1; i < 250; i++) expect(iso.initialMass[i]).toBeGreaterThanOrEqual(iso.initialMass[i - 1]);
    expect(iso.weight.reduce((a, b) => a + b, 0)).toBeLessThan(iso.initialMass[249]);
    expect(() => grid.isochrone({ logAge: 9.1, bands: ['G'] })).toThrow(/bands must be an array of B, V/);
  });

  it('outside the table is empty and says why', () => {
    expect(grid.isochrone({ logAge: 8.9 }).note).toMatch(/log age 8\.9 lies outside/);
    expect(grid.isochrone({ logAge: 9.1, metallicity: 0.5 }).note).toMatch(/\[Fe\/H\] 0\.5 lies outside the table/);
    expect(grid.isochrone({ logAge: 9.1, z: 0.0188 }).metallicity).toBeCloseTo(0, 12);
  });

  it('shows itself', () => {
    expect(String(grid)).toMatch(/isochrones\s+36/);
    expect(Object.isFrozen(grid)).toBe(true);
  });
});

/** A user's table: other names, other units, rows in disorder, labels of its own. */
function foreign(options: { shuffle?: boolean; drop?: (row: number) => boolean; label?: boolean } = {}): Catalogue {
  const n = table.rowCount;
  let rows = Array.from({ length: n }, (_, i) => i);
  if (options.drop) rows = rows.filter((i) => !options.drop?.(i));
  if (options.shuffle) rows = rows.map((_, k) => rows[(k * 7919) % rows.length]);
  const take = (name: string, f: (x: number) => number = (x) => x) =>
    Float64Array.from(rows, (i) => f(table.numbers(name)[i]));
  const labels = table.values('phase') as readonly string[];
  return new Catalogue({
    source: 'mine.csv',
    rowCount: rows.length,
    columns: [
      { name: 'Mini', values: take('initial_mass') },
      { name: 'Gyr', values: take('log_age', (a) => 10 ** (a - 9)) },
      { name: 'Z', values: take('metallicity', (m) => 0.0188 * 10 ** m) },
      { name: 'T', values: take('log_teff', (t) => 10 ** t) },
      { name: 'lgT', values: take('log_teff') },
      { name: 'lgL', values: take('log_l') },
      { name: 'Bmag', values: take('mag_B') },
      { name: 'Vmag', values: take('mag_V') },
      { name: 'what', values: rows.map((i) => (options.label ? `k${labels[i].slice(0, 3)}` : labels[i])) },
    ],
  });
}

const columns = {
  initialMass: 'Mini',
  age: 'Gyr',
  z: 'Z',
  logTeff: 'lgT',
  logL: 'lgL',
  B: 'Bmag',
  V: 'Vmag',
  phase: 'what',
};

describe('isochroneGrid of a foreign table', () => {
  it('reads other units and names', () => {
    const own = isochroneGrid(foreign(), { columns, name: 'mine' });
    const a = own.isochrone({ logAge: 9.17, metallicity: -0.13 });
    const b = grid.isochrone({ logAge: 9.17, metallicity: -0.13 });
    expect(a.count).toBe(b.count);
    for (let i = 0; i < a.count; i += 7) {
      expect(a.magnitudes.V?.[i]).toBeCloseTo(b.magnitudes.V?.[i] as number, 6);
      expect(a.logGravity[i]).toBeCloseTo(b.logGravity[i], 3);
    }
    expect(a.model).toBe('mine');
  });

  it('sorts rows in disorder and says so', () => {
    const own = isochroneGrid(foreign({ shuffle: true }), { columns });
    expect(own.warnings.join()).toMatch(/36 isochrones were not in order of initial mass/);
    const a = own.isochrone({ logAge: 9.1 });
    expect(a.logL[200]).toBeCloseTo(grid.isochrone({ logAge: 9.1 }).logL[200], 9);
  });

  it('names gaps and rows left out', () => {
    const lacking = foreign({
      drop: (i) => table.numbers('metallicity')[i] > 0.05 && table.numbers('log_age')[i] > 9.38,
    });
    const own = isochroneGrid(lacking, { columns });
    expect(own.warnings.join()).toMatch(/\[Fe\/H\] 0\.100 lacks log age 9\.4/);
    expect(own.isochrone({ logAge: 9.39, metallicity: 0.05 }).note).toMatch(/at \[Fe\/H\] 0\.100/);
    expect(own.isochrone({ logAge: 9.39, metallicity: -0.05 }).count).toBeGreaterThan(0);
    const holes = table.withColumns(
      [{ name: 'mag_V', values: table.numbers('mag_V').map((v, i) => (i % 50 === 7 ? Number.NaN : v)) }],
      'holes',
    );
    expect(isochroneGrid(holes).warnings.join()).toMatch(/288 rows with missing values/);
  });

  it('translates labels, and leaves out those without a translation', () => {
    const labelled = foreign({ label: true });
    expect(() => isochroneGrid(labelled, { columns })).toThrow(/phase labels "kmai".* are not known.*phases:/);
    const phases = { kmai: 'main sequence', kHer: 'Hertzsprung gap', kfir: 'first giant branch' };
    const own = isochroneGrid(labelled, { columns, phases });
    const a = own.isochrone({ logAge: 9.1 });
    expect(Math.max(...a.phase)).toBe(2);
    expect(own.warnings.join()).toMatch(/without a phase/);
    expect(() => isochroneGrid(labelled, { columns, phases: { kmai: 'main sequense' } })).toThrow(
      /Did you mean "main sequence"/,
    );
  });

  it('finds its way without labels and without luminosities', () => {
    const { phase, ...unlabelled } = columns;
    expect(phase).toBe('what');
    const own = isochroneGrid(foreign(), { columns: unlabelled });
    const whole = isochrone({ logAge: 9.325, bands, points: 1500 });
    expect(farthest(own.isochrone({ logAge: 9.325 }), whole)).toBeLessThan(0.25);
    const { logL, logTeff, ...light } = columns;
    expect([logL, logTeff]).toEqual(['lgL', 'lgT']);
    const magnitudes = isochroneGrid(foreign(), { columns: light }).isochrone({ logAge: 9.325 });
    expect(magnitudes.logL[0]).toBeNaN();
    expect(magnitudes.magnitudes.V?.every(Number.isFinite)).toBe(true);
  });

  it('takes several tables', () => {
    const one = exportIsochrones({ logAges: [9, 9.1], metallicities: [0], bands });
    const two = exportIsochrones({ logAges: [9.2, 9.3], metallicities: [0], bands });
    const own = isochroneGrid([one, two]);
    expect(own.isochroneCount).toBe(4);
    expect(own.isochrone({ logAge: 9.15 }).count).toBeGreaterThan(300);
    expect(isochroneGrid([one, one]).warnings.join()).toMatch(/comes twice/);
  });

  it('refuses what can be no such table, naming table, column and row', () => {
    const t = foreign();
    expect(() => isochroneGrid(t, { columns: { ...columns, logTeff: 'T' } })).toThrow(
      /mine\.csv, column "T", row 1: .* log10 of K/,
    );
    expect(() => isochroneGrid(t, { columns: { ...columns, age: undefined, logAge: 'Gyr' } })).toThrow(
      /A column in Gyr goes under age/,
    );
    expect(() => isochroneGrid(t, { columns: { ...columns, z: undefined } })).toThrow(/no metallicity/);
    expect(() => isochroneGrid(t, { columns: { ...columns, z: undefined, metallicity: 'Gyr' } })).toThrow(/dex/);
    expect(() => isochroneGrid(t, { columns: { ...columns, age: undefined } })).toThrow(/name the column of age once/);
    expect(() => isochroneGrid(t, { columns: { ...columns, initialMass: undefined } })).toThrow(
      /column of initial mass/,
    );
    expect(() => isochroneGrid(t, { columns: { ...columns, Vmag: 'Vmag' } as never })).toThrow(/unknown option "Vmag"/);
    expect(() => isochroneGrid(t, { columns: { ...columns, V: 'nope' } })).toThrow(/no column or role "nope"/);
    expect(() => isochroneGrid({} as never)).toThrow(/give a Catalogue/);
    expect(() => exportIsochrones({ logAges: [12] })).toThrow(/log age 12 lies outside/);
  });
});
