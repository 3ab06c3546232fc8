import { Catalogue } from '../../catalogue/catalogue';
import { absoluteMagnitudes } from '../../photometry/absolute-magnitudes';
import { BAND_NAMES, type Band } from '../../quantity/band';
import { checkOptions, checkRange, describe } from '../../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../../quantity/present';
import { massSpans } from '../curve';
import { checkBands, whyNotAge } from '../isochrone';
import { emptyIsochrone, finishIsochrone, type IsochroneSetting } from '../isochrone-result';
import { metallicityOf, SOLAR_Z } from '../metallicity';
import type { Isochrone, IsochroneOptions, StellarModel } from '../stellar-model';
import {
  COLUMN_KEYS,
  type GridColumns,
  type GridRows,
  type PhaseLabels,
  PLAIN_COLUMNS,
  readRows,
} from './grid-columns';
import { addPlaces, FIXED_COLUMNS, type GridCurve, makeCurve } from './grid-curve';

/** A user's own isochrones, usable wherever the built-in model is. */
export interface IsochroneGrid extends StellarModel {
  /** Rising [Fe/H], and under each its rising log ages. */
  readonly metallicities: readonly number[];
  readonly logAges: readonly (readonly number[])[];
  /** Number of isochrones and of rows used. */
  readonly isochroneCount: number;
  readonly rowCount: number;
  /** What a reader should know about the table: rows left out, gaps, disorder. */
  readonly warnings: readonly string[];
}

/** Options of isochroneGrid. */
export interface IsochroneGridOptions {
  /** Which column holds what; without it the names that exportIsochrones writes. */
  readonly columns?: GridColumns;
  /** Translation of the table's phase labels to Coeval's phase names; labels left out are left out of the grid. */
  readonly phases?: PhaseLabels;
  /** [Fe/H] of a table that has no column for it, dex. */
  readonly metallicity?: number;
  /** Name for results; default the source of the table. */
  readonly name?: string;
}

/**
 * A stellar model from a table of isochrones, or from several tables, each with any number of ages and metallicities.
 * Between ages and metallicities it interpolates at equal evolutionary points: along the main sequence at equal shares of
 * the turnoff's mass (equal shares of life), later at equal shares of each phase's path, never across the turnoff.
 * @param catalogue what readCatalogue gave, or an array of such
 * @param options columns: { initialMass, logAge or age, metallicity or z, mass, logL, logTeff, logGravity, phase, and bands by
 *   their name }, each naming a column; phases: { label: phase name }; metallicity: [Fe/H] of a table without that column; name
 * @returns a frozen StellarModel with `warnings`; its isochrones take points (default: as many as the tables hold)
 * @throws TypeError on an unknown option or column key, missing columns or unknown phase labels; RangeError on values that
 *   cannot be what the column is said to hold; the message names table, column and row
 * @example isochroneGrid(table, { columns: { initialMass: 'Mini', age: 'Gyr', z: 'Z', G: 'Gmag', BP: 'BPmag', RP: 'RPmag' } })
 */
export function isochroneGrid(
  catalogue: Catalogue | readonly Catalogue[],
  options: IsochroneGridOptions = {},
): IsochroneGrid {
  checkOptions('isochroneGrid', options, ['columns', 'phases', 'metallicity', 'name']);
  const tables = Array.isArray(catalogue) ? (catalogue as readonly Catalogue[]) : [catalogue as Catalogue];
  if (tables.length === 0 || !tables.every((t) => t instanceof Catalogue)) {
    throw new TypeError(`isochroneGrid: give a Catalogue or an array of them, got ${describe(catalogue)}.`);
  }
  if (options.columns !== undefined) checkOptions('isochroneGrid, columns', options.columns, COLUMN_KEYS);
  const warnings: string[] = [];
  const curves: GridCurve[] = [];
  let bands: readonly Band[] | null = null;
  for (const table of tables) {
    const columns = options.columns ?? plainColumnsOf(table);
    const rows = readRows(table, columns, options.phases, options.metallicity);
    if (bands !== null && bands.join() !== rows.bands.join()) {
      throw new TypeError(
        `isochroneGrid: ${table.source} holds bands ${rows.bands.join(' ')}, an earlier table ${bands.join(' ')}.`,
      );
    }
    bands = rows.bands;
    curves.push(...cutIntoCurves(table.source, rows, warnings));
  }
  if (curves.length === 0)
    throw new RangeError(`isochroneGrid: ${tables[0].source} holds no isochrone of 10 points or more.`);
  return finish(curves, bands ?? [], options.name ?? tables[0].source, warnings);
}

function plainColumnsOf(table: Catalogue): GridColumns {
  return Object.fromEntries(
    Object.entries(PLAIN_COLUMNS).filter(([, name]) => table.has(name as string)),
  ) as GridColumns;
}

/** Groups the rows by metallicity and age, leaves out what is incomplete and puts each group into order of mass. */
function cutIntoCurves(source: string, rows: GridRows, warnings: string[]): GridCurve[] {
  const groups = new Map<string, number[]>();
  let incomplete = 0;
  for (let i = 0; i < rows.count; i++) {
    if (!isComplete(rows, i)) {
      incomplete++;
      continue;
    }
    // Ages and metallicities are compared after rounding, as tables hold them with few digits.
    const key = `${rows.metallicity[i].toFixed(5)} ${rows.logAge[i].toFixed(5)}`;
    const group = groups.get(key);
    if (group === undefined) groups.set(key, [i]);
    else group.push(i);
  }
  if (incomplete > 0)
    warnings.push(`${source}: ${incomplete} rows with missing values or without a phase are left out`);
  const out: GridCurve[] = [];
  let disordered = 0;
  for (const [key, group] of groups) {
    if (group.length < 10) {
      warnings.push(`${source}: [Fe/H] and log age ${key} has only ${group.length} rows and is left out`);
      continue;
    }
    const sorted = group.every((row, k) => k === 0 || rows.initialMass[row] >= rows.initialMass[group[k - 1]]);
    if (!sorted) {
      disordered++;
      group.sort((a, b) => rows.initialMass[a] - rows.initialMass[b] || a - b);
    }
    out.push(makeCurve(rows, Uint32Array.from(group), rows.bands));
  }
  if (disordered > 0)
    warnings.push(`${source}: ${disordered} isochrones were not in order of initial mass and have been sorted`);
  return out;
}

function isComplete(rows: GridRows, i: number): boolean {
  if (Number.isNaN(rows.initialMass[i] + rows.logAge[i] + rows.metallicity[i] + rows.mass[i])) return false;
  if (rows.logL !== null && Number.isNaN(rows.logL[i])) return false;
  if (rows.logTeff !== null && Number.isNaN(rows.logTeff[i])) return false;
  if (rows.phase !== null && rows.phase[i] === 255) return false;
  return rows.bands.every((b) => !Number.isNaN((rows.magnitudes[b] as Float64Array)[i]));
}

function finish(curves: GridCurve[], tableBands: readonly Band[], name: string, warnings: string[]): IsochroneGrid {
  curves.sort((a, b) => a.metallicity - b.metallicity || a.logAge - b.logAge);
  const rowsOf: GridCurve[][] = [];
  for (const curve of curves) {
    const row = rowsOf[rowsOf.length - 1];
    const before = row?.[row.length - 1];
    if (before === undefined || Math.abs(before.metallicity - curve.metallicity) > 1e-5) rowsOf.push([curve]);
    else if (Math.abs(before.logAge - curve.logAge) > 1e-5) row.push(curve);
    else
      warnings.push(
        `[Fe/H] ${curve.metallicity.toFixed(3)}, log age ${curve.logAge.toFixed(4)} comes twice; the first is used`,
      );
  }
  const metallicities = rowsOf.map((row) => row[0].metallicity);
  const logAges = rowsOf.map((row) => Object.freeze(row.map((c) => c.logAge)));
  nameGaps(rowsOf, warnings);
  const bands = tableBands.length > 0 ? tableBands : BAND_NAMES;
  const all = logAges.flat();
  const used = rowsOf.flat();
  const rowCount = used.reduce((sum, c) => sum + c.count, 0);
  const hasLight = used.every((c) => !Number.isNaN(c.columns[2][0]));
  if (tableBands.length === 0)
    warnings.push('the table holds no magnitudes; they are worked out from log L, log Teff and gravity');
  const grid: IsochroneGrid = {
    name,
    description: `Isochrone table: ${used.length} isochrones, ${rowCount} rows, [Fe/H] ${span(metallicities)}, log age ${span(all)}; bands ${bands.join(' ')}`,
    logAgeRange: Object.freeze([Math.min(...all), Math.max(...all)] as [number, number]),
    metallicityRange: Object.freeze([metallicities[0], metallicities[metallicities.length - 1]] as [number, number]),
    bands: Object.freeze([...bands]),
    metallicities: Object.freeze(metallicities),
    logAges: Object.freeze(logAges),
    isochroneCount: used.length,
    rowCount,
    warnings: Object.freeze(warnings),
    isochrone: (o) => interpolate(grid, rowsOf, tableBands, hasLight, o),
  };
  const lines = () => [
    ['isochrones', String(grid.isochroneCount)],
    ['rows', String(rowCount)],
    ['[Fe/H]', metallicities.map((m) => m.toFixed(2)).join(' ')],
    ['log age', span(all)],
    ['bands', bands.join(' ')],
    ...warnings.map((w) => ['warning', w]),
  ];
  return presentable(grid, {
    text: () => `Isochrone grid "${name}"\n${textTable(['', ''], lines()).replace(/^\s*\n/, '')}`,
    html: () => htmlTable(['', escapeHtml(name)], lines(), { caption: 'Isochrone grid' }),
  });
}

function span(values: readonly number[]): string {
  const low = Math.min(...values);
  const high = Math.max(...values);
  return low === high ? low.toFixed(3) : `${low.toFixed(3)} to ${high.toFixed(3)}`;
}

/** Ages that one metallicity has and another lacks within its own range. */
function nameGaps(rowsOf: readonly (readonly GridCurve[])[], warnings: string[]): void {
  const all = [...new Set(rowsOf.flat().map((c) => c.logAge.toFixed(4)))].map(Number).sort((a, b) => a - b);
  for (const row of rowsOf) {
    const own = new Set(row.map((c) => c.logAge.toFixed(4)));
    const missing = all.filter((age) => !own.has(age.toFixed(4)));
    if (missing.length === 0) continue;
    const shown = missing.slice(0, 6).join(', ');
    warnings.push(
      `[Fe/H] ${row[0].metallicity.toFixed(3)} lacks log age ${shown}${missing.length > 6 ? `, ... (${missing.length} in all)` : ''}`,
    );
  }
}

interface Corner {
  readonly curve: GridCurve;
  readonly weight: number;
}

function interpolate(
  grid: IsochroneGrid,
  rowsOf: readonly (readonly GridCurve[])[],
  tableBands: readonly Band[],
  hasLight: boolean,
  options: IsochroneOptions,
): Isochrone {
  checkOptions('isochrone', options, ['logAge', 'metallicity', 'z', 'bands', 'points']);
  const { logAge, z, bands = grid.bands } = options;
  if (typeof logAge !== 'number') {
    throw new TypeError(`isochrone: logAge must be a number (log10 of years), got ${describe(logAge)}.`);
  }
  checkBands('isochrone', bands, grid.bands);
  if (options.points !== undefined) checkRange('isochrone', 'points', options.points, 60, 5000);
  if (z !== undefined && options.metallicity !== undefined) {
    throw new TypeError('isochrone: give metallicity ([Fe/H]) or z (mass fraction), not both.');
  }
  const metallicity = z === undefined ? (options.metallicity ?? 0) : metallicityOf(z);
  const setting: IsochroneSetting = {
    model: grid.name,
    logAge,
    metallicity,
    z: SOLAR_Z * 10 ** metallicity,
    bands,
    massLoss: 'as in the table',
  };
  const [least, greatest] = grid.metallicityRange;
  if (!(metallicity >= least - 1e-5 && metallicity <= greatest + 1e-5)) {
    return emptyIsochrone(setting, `[Fe/H] ${metallicity} lies outside the table, ${least} to ${greatest}`);
  }
  const corners: Corner[] = [];
  for (const [row, weight] of bracket(rowsOf, (r) => r[0].metallicity, metallicity)) {
    const range: [number, number] = [row[0].logAge, row[row.length - 1].logAge];
    const why = whyNotAge(logAge, range);
    if (why !== '') return emptyIsochrone(setting, `${why}, at [Fe/H] ${row[0].metallicity.toFixed(3)}`);
    for (const [curve, share] of bracket(row, (c) => c.logAge, logAge)) corners.push({ curve, weight: weight * share });
  }
  return blend(setting, corners, tableBands, hasLight, options.points);
}

/** The entries on both sides of a value with their weights; one entry where the value is met exactly. */
function bracket<T>(entries: readonly T[], at: (entry: T) => number, value: number): [T, number][] {
  let i = 0;
  while (i < entries.length - 2 && at(entries[i + 1]) <= value) i++;
  const low = entries[i];
  const high = entries[Math.min(i + 1, entries.length - 1)];
  const width = at(high) - at(low);
  const t = width > 0 ? (value - at(low)) / width : 0;
  if (t <= 1e-9) return [[low, 1]];
  if (t >= 1 - 1e-9) return [[high, 1]];
  return [
    [low, 1 - t],
    [high, t],
  ];
}

type Span = { readonly phase: number; readonly first: number; readonly last: number };

function blend(
  setting: IsochroneSetting,
  corners: readonly Corner[],
  tableBands: readonly Band[],
  hasLight: boolean,
  points: number | undefined,
): Isochrone {
  // The order of phases of the corner that counts most; phases that it lacks and another has are put in by their number.
  const sequence = phaseSequence(corners.map((c) => c.curve));
  const places = corners.map(({ curve }) => spansFor(curve, sequence));
  const sizes = sequence.map((_, k) =>
    Math.max(2, ...places.map((spans) => spans[k].last - spans[k].first + (spans[k].last > spans[k].first ? 1 : 0))),
  );
  const total = sizes.reduce((a, b) => a + b, 0);
  const counts = points === undefined ? sizes : shareOut(sizes, total, points);
  const n = counts.reduce((a, b) => a + b, 0);
  const out = Array.from({ length: FIXED_COLUMNS + tableBands.length }, () => new Float64Array(n));
  const phase = new Uint8Array(n);
  let at = 0;
  for (let k = 0; k < sequence.length; k++) {
    const heaviest = corners.reduce((best, c, i) => (c.weight > corners[best].weight ? i : best), 0);
    const shares = placesIn(corners[heaviest].curve, places[heaviest][k], counts[k]);
    corners.forEach(({ curve, weight }, i) => {
      addPlaces(curve, places[i][k], shares, weight, out, at);
    });
    phase.fill(sequence[k], at, at + counts[k]);
    at += counts[k];
  }
  const initialMass = out[0].map(Math.exp);
  // Rounding must not make the masses fall.
  for (let i = 1; i < n; i++) if (initialMass[i] < initialMass[i - 1]) initialMass[i] = initialMass[i - 1];
  const breaks = breaksOf(out, phase, counts, hasLight);
  const [logL, logTeff, logGravity] = [out[2], out[3], out[4]];
  const magnitudes: Partial<Record<Band, Float64Array>> = {};
  if (tableBands.length > 0) for (const b of setting.bands) magnitudes[b] = out[FIXED_COLUMNS + tableBands.indexOf(b)];
  else
    Object.assign(
      magnitudes,
      absoluteMagnitudes({ logL, logTeff, logGravity, metallicity: setting.metallicity, bands: setting.bands }),
    );
  return finishIsochrone(
    setting,
    {
      initialMass,
      mass: out[1].map(Math.exp),
      logL,
      logTeff,
      logGravity,
      phase,
      weight: massSpans(initialMass, breaks),
      breaks,
      magnitudes,
    },
    '',
  );
}

/** All phases of the corners in order of evolution; a repeated phase counts once. */
function phaseSequence(curves: readonly GridCurve[]): number[] {
  const all = new Set<number>();
  for (const curve of curves) for (const { phase } of curve.phases) all.add(phase);
  return [...all].sort((a, b) => a - b);
}

/** The run of every phase of the sequence in a curve; a phase that it lacks shrinks to the end of the one before. */
function spansFor(curve: GridCurve, sequence: readonly number[]): Span[] {
  let previous = curve.phases[0].first;
  return sequence.map((phase) => {
    const runs = curve.phases.filter((s) => s.phase === phase);
    if (runs.length === 0) return { phase, first: previous, last: previous };
    const longest = runs.reduce((best, s) => (s.last - s.first > best.last - best.first ? s : best));
    previous = longest.last;
    return longest;
  });
}

function shareOut(sizes: readonly number[], total: number, points: number): number[] {
  const free = points - 2 * sizes.length;
  let given = 0;
  let passed = 0;
  return sizes.map((size) => {
    passed += size;
    const upTo = Math.round((free * passed) / total);
    const own = 2 + upTo - given;
    given = upTo;
    return own;
  });
}

/** Places at which the points of a phase are put: those of the curve itself, thinned or filled evenly by rank. */
function placesIn(curve: GridCurve, span: Span, count: number): Float64Array {
  const out = new Float64Array(count);
  const last = span.last - span.first;
  for (let k = 0; k < count; k++) {
    if (last < 1) {
      out[k] = count > 1 ? k / (count - 1) : 0;
      continue;
    }
    const rank = (k * last) / Math.max(1, count - 1);
    const i = Math.min(last - 1, Math.floor(rank));
    const low = curve.share[span.first + i];
    out[k] = low + (rank - i) * (curve.share[span.first + i + 1] - low);
  }
  return out;
}

/** Breaks where two phases do not meet on the diagram, as at the helium flash. */
function breaksOf(
  out: readonly Float64Array[],
  phase: Uint8Array,
  counts: readonly number[],
  hasLight: boolean,
): Uint32Array {
  const breaks = [0];
  let at = 0;
  for (let k = 0; k + 1 < counts.length; k++) {
    at += counts[k];
    const [x, y] = hasLight ? [out[3], out[2]] : [out[FIXED_COLUMNS], out[FIXED_COLUMNS + 1]];
    const scale = hasLight ? 1 : 0.4;
    const jump = Math.max(4 * scale * Math.abs(x[at] - x[at - 1]), scale * Math.abs(y[at] - y[at - 1]));
    if (jump > 0.25 && phase[at] > phase[at - 1]) breaks.push(at);
  }
  return Uint32Array.from(breaks);
}
