import { Catalogue } from '../../catalogue/catalogue';
import type { ColumnData } from '../../catalogue/columns';
import type { Band } from '../../quantity/band';
import { checkOptions, describe } from '../../quantity/options';
import { analyticModel } from '../analytic-model';
import type { Isochrone, StellarModel } from '../stellar-model';
import { PLAIN_COLUMNS } from './grid-columns';

/** Options of exportIsochrones. */
export interface ExportIsochronesOptions {
  /** log10 of years, shape (n). */
  readonly logAges: ArrayLike<number>;
  /** [Fe/H], dex, shape (m); default [0]. */
  readonly metallicities?: ArrayLike<number>;
  readonly bands?: readonly Band[];
  /** Points of each isochrone. */
  readonly points?: number;
  /** Default the built-in model. */
  readonly model?: StellarModel;
}

/**
 * Isochrones of a model as one plain table, a row a star: what writeCatalogue can write and isochroneGrid can read back.
 * @param options logAges: log10 of years; metallicities: [Fe/H] in dex (default [0]); bands, points, model
 * @returns a Catalogue with columns log_age, metallicity, initial_mass, mass, log_l, log_teff, log_g, phase and mag_<band>
 * @throws TypeError on an unknown option or band; RangeError when an age or metallicity lies outside the model's range
 * @example exportIsochrones({ logAges: [8, 8.1, 8.2], metallicities: [-0.2, 0], bands: ['B', 'V'] })
 */
export function exportIsochrones(options: ExportIsochronesOptions): Catalogue {
  checkOptions('exportIsochrones', options, ['logAges', 'metallicities', 'bands', 'points', 'model']);
  const { logAges, metallicities = [0], bands, points, model = analyticModel } = options;
  for (const [name, list] of [
    ['logAges', logAges],
    ['metallicities', metallicities],
  ] as const) {
    if (list == null || typeof list !== 'object' || !(list.length > 0)) {
      throw new TypeError(`exportIsochrones: ${name} must be an array of numbers, got ${describe(list)}.`);
    }
  }
  const isochrones: Isochrone[] = [];
  for (let j = 0; j < metallicities.length; j++) {
    for (let i = 0; i < logAges.length; i++) {
      const iso = model.isochrone({ logAge: logAges[i], metallicity: metallicities[j], bands, points });
      if (iso.count === 0) throw new RangeError(`exportIsochrones: ${iso.note}.`);
      isochrones.push(iso);
    }
  }
  const rowCount = isochrones.reduce((sum, iso) => sum + iso.count, 0);
  return new Catalogue({
    source: `isochrones of ${model.name}`,
    rowCount,
    columns: columnsOf(isochrones, rowCount),
    history: [
      {
        action: `exportIsochrones, ${isochrones.length} isochrones of ${model.name}`,
        rowsBefore: 0,
        rowsAfter: rowCount,
        note: '',
      },
    ],
  });
}

function columnsOf(isochrones: readonly Isochrone[], rowCount: number): ColumnData[] {
  const numbers = (
    name: string,
    unit: string,
    description: string,
    from: (iso: Isochrone) => Float64Array | number,
  ): ColumnData => {
    const values = new Float64Array(rowCount);
    let at = 0;
    for (const iso of isochrones) {
      const column = from(iso);
      if (typeof column === 'number') values.fill(column, at, at + iso.count);
      else values.set(column, at);
      at += iso.count;
    }
    return { name, values, unit, description };
  };
  const names = PLAIN_COLUMNS as Readonly<Record<string, string>>;
  return [
    numbers(names.logAge, 'log10(yr)', 'log10 of the age in years', (iso) => iso.logAge),
    numbers(names.metallicity, 'dex', '[Fe/H]', (iso) => iso.metallicity),
    numbers(names.initialMass, 'solMass', 'mass at zero age', (iso) => iso.initialMass),
    numbers(names.mass, 'solMass', 'mass at this age', (iso) => iso.mass),
    numbers(names.logL, 'log10(solLum)', 'log10 of luminosity', (iso) => iso.logL),
    numbers(names.logTeff, 'log10(K)', 'log10 of effective temperature', (iso) => iso.logTeff),
    numbers(names.logGravity, 'log10(cm/s2)', 'log10 of surface gravity', (iso) => iso.logGravity),
    {
      name: names.phase,
      values: isochrones.flatMap((iso) => Array.from(iso.phase, (p) => iso.phaseNames[p] ?? null)),
      description: 'phase of evolution',
    },
    ...isochrones[0].bands.map((band) =>
      numbers(names[band], 'mag', `absolute magnitude in ${band}`, (iso) => iso.magnitudes[band] as Float64Array),
    ),
  ];
}
