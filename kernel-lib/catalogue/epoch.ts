import { moveStar } from '../numeric/space-motion-propagation';
import { checkOptions, checkRange } from '../quantity/options';
import type { Catalogue } from './catalogue';
import type { ColumnData } from './columns';
import type { Role } from './roles';

/** Which epochs {@link propagateEpoch} goes between. */
export interface EpochOptions {
  /** Julian epoch of the catalogue, for example 1991.25; 0 to 4000. */
  readonly from: number;
  /** Julian epoch wanted, for example 2016. */
  readonly to: number;
}

const MOVED: readonly Role[] = [
  'rightAscension',
  'declination',
  'parallax',
  'properMotionRa',
  'properMotionDec',
  'radialVelocity',
];

/**
 * The catalogue at another Julian epoch: position, proper motion, and, where known, parallax and radial velocity, along a
 * straight line at constant velocity (The Hipparcos and Tycho Catalogues, ESA SP-1200, Vol. 1, Sect. 1.5.5; Butkevich &
 * Lindegren 2014, A&A 570, A62; both from memory). Light-time terms are left out.
 *
 * Rows without a proper motion keep their position; without a positive parallax or a radial velocity the radial motion is
 * taken as zero. Both are counted in the history. Errors of position grow by the error of the proper motion times the years,
 * without correlations; other errors stay.
 * @param catalogue with the roles rightAscension, declination, properMotionRa, properMotionDec
 * @returns a Catalogue with the same columns at the new epoch
 * @throws Error when a role is missing, RangeError for an epoch outside 0 to 4000
 * @example propagateEpoch(hipparcos, { from: 1991.25, to: 2016 })
 */
export function propagateEpoch(catalogue: Catalogue, options: EpochOptions): Catalogue {
  checkOptions('propagateEpoch', options ?? null, ['from', 'to']);
  checkRange('propagateEpoch', 'from', options.from, 0, 4000);
  checkRange('propagateEpoch', 'to', options.to, 0, 4000);
  const years = options.to - options.from;
  const n = catalogue.rowCount;
  const columns = MOVED.map((role, k) => {
    if (k === 2 || k === 5) return catalogue.has(role) ? catalogue.numbers(role) : new Float64Array(n).fill(Number.NaN);
    return catalogue.numbers(role);
  });
  const moved = columns.map((values) => Float64Array.from(values));
  const star = new Float64Array(6);
  let still = 0;
  let noRadial = 0;
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < 6; k++) star[k] = columns[k][i];
    if (Number.isNaN(star[3]) || Number.isNaN(star[4])) {
      still++;
      continue;
    }
    if (!(star[2] > 0) || Number.isNaN(star[5])) noRadial++;
    moveStar(star, years);
    for (let k = 0; k < 6; k++) moved[k][i] = star[k];
  }
  const changed: ColumnData[] = [];
  MOVED.forEach((role, k) => {
    if (catalogue.has(role)) changed.push(like(catalogue, role, moved[k]));
  });
  for (const [place, motion] of [
    ['rightAscension.error', 'properMotionRa.error'],
    ['declination.error', 'properMotionDec.error'],
  ] as const) {
    if (!catalogue.has(place) || !catalogue.has(motion)) continue;
    const motionError = catalogue.numbers(motion);
    const grown = catalogue
      .numbers(place)
      .map((e, i) => (Number.isNaN(motionError[i]) ? e : Math.hypot(e, motionError[i] * years)));
    changed.push(like(catalogue, place, grown));
  }
  const notes: string[] = [];
  if (still > 0) notes.push(`${still} rows without proper motion kept their position`);
  if (noRadial > 0) notes.push(`${noRadial} rows without parallax or radial velocity: radial motion taken as zero`);
  return catalogue.withColumns(changed, `epoch ${options.from} -> ${options.to}`, { note: notes.join('; ') });
}

function like(catalogue: Catalogue, role: Role, values: Float64Array): ColumnData {
  const name = catalogue.columns.some((c) => c.name === role) ? role : (catalogue.roles[role] as string);
  const info = catalogue.columns.find((c) => c.name === name);
  return { name, values, unit: info?.unit, description: info?.description, ucd: info?.ucd };
}
