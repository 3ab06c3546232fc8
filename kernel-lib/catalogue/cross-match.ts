import { SkyIndex, skyOrder } from '../numeric/sky-index';
import { checkChoice, checkOptions, checkRange, describe } from '../quantity/options';
import { Catalogue } from './catalogue';
import type { ColumnData, ColumnValues } from './columns';
import { takeRows } from './columns';
import { propagateEpoch } from './epoch';
import { localDensity, matchProbabilities } from './match-probability';
import { type Pairs, type SkyPlaces, sigmaDistance2 } from './sky-pairs';

/** How {@link crossMatch} pairs rows. */
export interface CrossMatchOptions {
  /** Greatest separation, arcsec, above 0 to 36000. */
  readonly radiusArcsec: number;
  /**
   * Greatest separation in units of the combined position errors, above 0 to 100, on top of the radius. Needs the roles
   * rightAscension.error and declination.error (mas) on both sides; a pair without errors never matches.
   */
  readonly sigmas?: number;
  /** The nearest, all, or only pairs of which each is the other's nearest. Default 'best'. With sigmas, nearest in sigmas. */
  readonly mode?: 'best' | 'all' | 'symmetric';
  /** Drop or keep left rows without a match. Default 'inner'. */
  readonly join?: 'inner' | 'left';
  /** Julian epochs of both; the side that has proper motions (left first) is moved to the other's epoch to compare. */
  readonly epochs?: { readonly left: number; readonly right: number };
  /** Added to names of right columns that the left has too. Default '_right'. */
  readonly suffix?: string;
}

const KNOWN = ['radiusArcsec', 'sigmas', 'mode', 'join', 'epochs', 'suffix'];
const ARCSEC = 648000 / Math.PI;

/**
 * Pairs the rows of two catalogues by place on the sky.
 *
 * Columns of both, then `separation_arcsec`; `chance_probability`, 1 - exp(-pi density separation^2), that an unrelated
 * right row lies as near; and, where both sides have position errors (else NaN), `match_probability` from the likelihood
 * ratio of de Ruiter, Willis & Arp 1977, A&AS 28, 211 (from memory), see {@link matchProbabilities}. The density is that of
 * the right catalogue around the place. Rows in the order of the left; roles are those of the left.
 * @param left  with the roles rightAscension and declination, deg
 * @param right likewise
 * @throws Error when a role is missing, RangeError for a declination beyond 90 deg or a negative error
 * @example crossMatch(field, photometry, { radiusArcsec: 1, join: 'left' })
 */
export function crossMatch(left: Catalogue, right: Catalogue, options: CrossMatchOptions): Catalogue {
  checkOptions('crossMatch', options ?? null, KNOWN);
  const { radiusArcsec, sigmas, mode = 'best', join = 'inner', epochs, suffix = '_right' } = options;
  checkRange('crossMatch', 'radiusArcsec', radiusArcsec, Number.MIN_VALUE, 36000, 'arcsec');
  if (radiusArcsec < 1e-6) throw new RangeError(`crossMatch: radiusArcsec must be at least 1e-6, got ${radiusArcsec}.`);
  if (sigmas !== undefined) checkRange('crossMatch', 'sigmas', sigmas, 1e-6, 100);
  checkChoice('crossMatch', 'mode', mode, ['best', 'all', 'symmetric']);
  checkChoice('crossMatch', 'join', join, ['inner', 'left']);
  if (typeof suffix !== 'string' || suffix === '') {
    throw new TypeError(`crossMatch: suffix must be a text that is not empty, got ${describe(suffix)}.`);
  }
  const [a, b] = atOneEpoch(left, right, epochs);
  const leftSky = skyOf(a, 'left');
  const rightSky = skyOf(b, 'right');
  if (sigmas !== undefined && !(leftSky.errors && rightSky.errors)) {
    throw new Error(
      `crossMatch: sigmas needs the roles rightAscension.error and declination.error in both catalogues; ` +
        `${leftSky.errors ? 'right' : 'left'} lacks them. Leave sigmas out to match by radius alone.`,
    );
  }
  // Left rows in order of the sky, so that neighbours in time are neighbours in memory.
  const order = skyOrder(leftSky.ra, leftSky.dec, radiusArcsec);
  const pairs = findPairs(leftSky, rightSky, order, radiusArcsec, sigmas, mode, join);
  const density = localDensity(leftSky, rightSky, order, pairs);
  const { match, chance, prior } = matchProbabilities(leftSky, rightSky, pairs, density, radiusArcsec);
  return joined(
    left,
    right,
    suffix,
    pairs,
    { match, chance },
    [
      `${left.rowCount} x ${right.rowCount} rows, ${pairs.matched} left rows matched by ${pairs.count} pairs`,
      join === 'left' ? `${left.rowCount - pairs.matched} unmatched kept` : '',
      `without a position: ${leftSky.missing} left, ${rightSky.missing} right`,
      Number.isNaN(prior) ? '' : `fraction with a true counterpart estimated as ${prior.toFixed(3)}`,
    ],
    `cross-match with ${right.source}: ${mode} within ${radiusArcsec} arcsec${sigmas === undefined ? '' : ` and ${sigmas} sigma`}${
      epochs ? `, epochs ${epochs.left} and ${epochs.right}` : ''
    }`,
  );
}

function findPairs(
  left: SkyPlaces,
  right: SkyPlaces,
  order: Int32Array,
  radius: number,
  sigmas: number | undefined,
  mode: 'best' | 'all' | 'symmetric',
  join: 'inner' | 'left',
): Pairs {
  const nLeft = left.ra.length;
  const index = new SkyIndex(right.ra, right.dec, radius);
  const all = mode === 'all';
  let li = new Int32Array(all ? 1024 : 0);
  let rj = new Int32Array(all ? 1024 : 0);
  let sep = new Float64Array(all ? 1024 : 0);
  let total = 0;
  const hits = new Int32Array(nLeft + 1);
  const best = new Int32Array(all ? 0 : nLeft).fill(-1);
  const bestSeparation = new Float64Array(all ? 0 : nLeft);
  const back = new Int32Array(mode === 'symmetric' ? right.ra.length : 0).fill(-1);
  const backRank = new Float64Array(back.length).fill(Number.POSITIVE_INFINITY);
  for (let k = 0; k < order.length; k++) {
    const i = order[k];
    const n = index.within(left.ra[i], left.dec[i]);
    let lowest = Number.POSITIVE_INFINITY;
    for (let m = 0; m < n; m++) {
      const j = index.found[m];
      let rank = index.chord2[m];
      let separation = -1;
      if (sigmas !== undefined) {
        separation = 2 * Math.asin(Math.sqrt(rank) / 2) * ARCSEC;
        rank = sigmaDistance2(left, right, i, j, separation);
        if (!(rank <= sigmas * sigmas)) continue;
      }
      if (all) {
        if (total === li.length) {
          li = grown(li, new Int32Array(2 * total));
          rj = grown(rj, new Int32Array(2 * total));
          sep = grown(sep, new Float64Array(2 * total));
        }
        li[total] = i;
        rj[total] = j;
        sep[total++] = separation >= 0 ? separation : 2 * Math.asin(Math.sqrt(rank) / 2) * ARCSEC;
        hits[i]++;
        continue;
      }
      if (rank < lowest || (rank === lowest && j < best[i])) {
        lowest = rank;
        best[i] = j;
        bestSeparation[i] = separation >= 0 ? separation : 2 * Math.asin(Math.sqrt(rank) / 2) * ARCSEC;
      }
      if (mode === 'symmetric' && (rank < backRank[j] || (rank === backRank[j] && i < back[j]))) {
        backRank[j] = rank;
        back[j] = i;
      }
    }
  }
  if (!all) {
    for (let i = 0; i < nLeft; i++) {
      if (best[i] >= 0 && mode === 'symmetric' && back[best[i]] !== i) best[i] = -1;
      if (best[i] >= 0) hits[i] = 1;
    }
  }
  let rows = 0;
  let count = 0;
  let matched = 0;
  const start = new Int32Array(nLeft + 1);
  for (let i = 0; i < nLeft; i++) {
    start[i] = rows;
    if (hits[i] > 0) matched++;
    count += hits[i];
    rows += hits[i] > 0 ? hits[i] : join === 'left' ? 1 : 0;
  }
  start[nLeft] = rows;
  const outLeft = new Int32Array(rows);
  const outRight = new Int32Array(rows).fill(-1);
  const outSep = new Float64Array(rows).fill(Number.NaN);
  for (let i = 0; i < nLeft; i++) {
    for (let at = start[i]; at < start[i + 1]; at++) outLeft[at] = i;
    if (!all && hits[i] > 0) {
      outRight[start[i]] = best[i];
      outSep[start[i]] = bestSeparation[i];
    }
  }
  // Within one left row the nearest comes first.
  const filled = new Int32Array(all ? nLeft : 0);
  for (let p = 0; p < total; p++) {
    const i = li[p];
    let at = start[i] + filled[i]++;
    for (; at > start[i]; at--) {
      if (outSep[at - 1] < sep[p] || (outSep[at - 1] === sep[p] && outRight[at - 1] < rj[p])) break;
      outSep[at] = outSep[at - 1];
      outRight[at] = outRight[at - 1];
    }
    outSep[at] = sep[p];
    outRight[at] = rj[p];
  }
  return { left: outLeft, right: outRight, separation: outSep, count, matched };
}

function grown<T extends Int32Array | Float64Array>(from: T, to: T): T {
  to.set(from);
  return to;
}

function atOneEpoch(left: Catalogue, right: Catalogue, epochs: CrossMatchOptions['epochs']): [Catalogue, Catalogue] {
  if (epochs === undefined) return [left, right];
  checkOptions('crossMatch epochs', epochs, ['left', 'right']);
  const moves = (c: Catalogue) => c.has('properMotionRa') && c.has('properMotionDec');
  if (moves(left)) return [propagateEpoch(left, { from: epochs.left, to: epochs.right }), right];
  if (moves(right)) return [left, propagateEpoch(right, { from: epochs.right, to: epochs.left })];
  throw new Error(
    'crossMatch: epochs needs the roles properMotionRa and properMotionDec in one of the catalogues. Leave epochs out to compare places as they are.',
  );
}

function skyOf(catalogue: Catalogue, side: string): SkyPlaces {
  const ra = catalogue.numbers('rightAscension');
  const dec = catalogue.numbers('declination');
  let missing = 0;
  for (let i = 0; i < ra.length; i++) {
    if (!Number.isFinite(ra[i]) || !Number.isFinite(dec[i])) missing++;
    else if (Math.abs(dec[i]) > 90) {
      throw new RangeError(
        `crossMatch: declination of ${side} row ${i} (${catalogue.source}) is ${dec[i]}, outside -90 to 90 deg. Correct or cut it first.`,
      );
    }
  }
  const has = catalogue.has('rightAscension.error') && catalogue.has('declination.error');
  const errors = has
    ? ([catalogue.numbers('rightAscension.error'), catalogue.numbers('declination.error')] as const)
    : null;
  for (const values of errors ?? []) {
    const row = values.findIndex((v) => v < 0);
    if (row >= 0) {
      throw new RangeError(
        `crossMatch: position error of ${side} row ${row} (${catalogue.source}) is ${values[row]} mas; errors must be 0 or more, or missing.`,
      );
    }
  }
  return { ra, dec, errors, missing };
}

function joined(
  left: Catalogue,
  right: Catalogue,
  suffix: string,
  pairs: Pairs,
  probability: { match: Float64Array; chance: Float64Array },
  notes: readonly string[],
  action: string,
): Catalogue {
  const leftRows = new Uint32Array(pairs.left);
  const columns: ColumnData[] = left.columnData().map((c) => ({ ...c, values: takeRows(c.values, leftRows) }));
  const names = new Set(columns.map((c) => c.name));
  const add = (column: ColumnData): void => {
    let name = column.name;
    while (names.has(name)) name += suffix;
    names.add(name);
    columns.push({ ...column, name });
  };
  for (const c of right.columnData()) add({ ...c, values: takeOrMissing(c.values, pairs.right) });
  add({
    name: 'separation_arcsec',
    values: pairs.separation,
    unit: 'arcsec',
    description: 'Separation of the pair on the sky',
    ucd: 'pos.angDistance',
  });
  add({ name: 'chance_probability', values: probability.chance, description: 'Chance of an unrelated row as near' });
  add({ name: 'match_probability', values: probability.match, description: 'Probability that the pair is one star' });
  const rows = pairs.left.length;
  const note = notes.filter((n) => n !== '').join('; ');
  return new Catalogue({
    source: left.source,
    rowCount: rows,
    columns,
    roles: left.roles,
    history: [...left.history, { action, rowsBefore: left.rowCount, rowsAfter: rows, note }],
    warnings: left.warnings,
    meta: left.meta,
  });
}

function takeOrMissing(values: ColumnValues, rows: Int32Array): ColumnValues {
  if (values instanceof Float64Array) {
    const out = new Float64Array(rows.length);
    for (let k = 0; k < rows.length; k++) out[k] = rows[k] < 0 ? Number.NaN : values[rows[k]];
    return out;
  }
  return Array.from(rows, (r) => (r < 0 ? null : values[r])) as ColumnValues;
}
