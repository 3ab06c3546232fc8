import type { Catalogue } from '../catalogue/catalogue';
import type { Role } from '../catalogue/roles';
import { RADIANS_PER_DEGREE } from '../quantity/constants';
import { sortedQuantile } from '../quantity/measured';
import type { Stars } from './stars';

/** One error for all stars, where the catalogue has no column for it. */
export interface ConstantErrors {
  /** mas/yr, for both directions */
  properMotion?: number;
  /** mas */
  parallax?: number;
}

/** Names of the columns that hold the correlation coefficients of a star's errors, -1 to 1. */
export interface CorrelationColumns {
  properMotions?: string;
  parallaxProperMotionRa?: string;
  parallaxProperMotionDec?: string;
}

/** What was read, and which rows of the catalogue it came from. */
export interface Astrometry {
  readonly stars: Stars;
  /** Row in the catalogue of each star. */
  readonly rows: Uint32Array;
  /** Things a reader should know, one sentence each. */
  readonly notes: readonly string[];
}

/** Column names under which published astrometry carries its correlations. */
const USUAL_CORRELATIONS: Required<CorrelationColumns> = {
  properMotions: 'pmra_pmdec_corr',
  parallaxProperMotionRa: 'parallax_pmra_corr',
  parallaxProperMotionDec: 'parallax_pmdec_corr',
};

/** Stars in a class of error size, at least; and classes at most. */
const STARS_PER_CLASS = 500;
const MOST_CLASSES = 8;

/**
 * Reads motion, parallax, errors, correlations and, when asked for, positions and radial velocities by role.
 * @throws Error when a role is missing, with how to name it
 */
export function readAstrometry(
  caller: string,
  catalogue: Catalogue,
  options: { useParallax: boolean; positions: boolean; errors?: ConstantErrors; correlations?: CorrelationColumns },
): Astrometry {
  const { useParallax } = options;
  const n = catalogue.rowCount;
  const notes: string[] = [];
  const pmRa = column(caller, catalogue, 'properMotionRa');
  const pmDec = column(caller, catalogue, 'properMotionDec');
  const parallax = useParallax ? column(caller, catalogue, 'parallax') : null;
  const pmRaError = errorColumn(caller, catalogue, 'properMotionRa', options.errors?.properMotion, 'properMotion');
  const pmDecError = errorColumn(caller, catalogue, 'properMotionDec', options.errors?.properMotion, 'properMotion');
  const parallaxError = useParallax
    ? errorColumn(caller, catalogue, 'parallax', options.errors?.parallax, 'parallax')
    : null;
  const ra = options.positions ? column(caller, catalogue, 'rightAscension') : null;
  const dec = options.positions ? column(caller, catalogue, 'declination') : null;
  const names = { ...USUAL_CORRELATIONS, ...options.correlations };
  const given = options.correlations ?? {};
  const correlation = (key: keyof CorrelationColumns): Float64Array | null => {
    if (!catalogue.has(names[key])) {
      if (given[key] === undefined) return null;
      throw new Error(`${caller}: correlations.${key} names column "${names[key]}", which ${catalogue.source} lacks.`);
    }
    return catalogue.numbers(names[key]);
  };
  const corrMotion = correlation('properMotions');
  const corrRa = useParallax ? correlation('parallaxProperMotionRa') : null;
  const corrDec = useParallax ? correlation('parallaxProperMotionDec') : null;
  const used = [corrMotion, corrRa, corrDec].filter((c) => c !== null).length;
  notes.push(
    used === 0
      ? 'Errors of a star taken as independent: the catalogue has no columns of their correlations.'
      : `Correlations of a star's errors used: ${used} of ${useParallax ? 3 : 1}.`,
  );

  const rows = new Uint32Array(n);
  let count = 0;
  let noValue = 0;
  let badError = 0;
  for (let i = 0; i < n; i++) {
    let sum = pmRa[i] + pmDec[i];
    if (parallax !== null) sum += parallax[i];
    if (ra !== null && dec !== null) sum += ra[i] + dec[i];
    const e = parallaxError === null ? 0 : parallaxError[i];
    if (!Number.isFinite(sum)) noValue++;
    else if (!(valid(pmRaError[i]) && valid(pmDecError[i]) && valid(e))) badError++;
    else rows[count++] = i;
  }
  if (noValue > 0) notes.push(`${noValue} of ${n} rows lack a value that the fit needs: their probability is missing.`);
  if (badError > 0) {
    notes.push(`${badError} of ${n} rows have a missing, negative or infinite error: their probability is missing.`);
  }
  const kept = rows.slice(0, count);
  const values = new Float64Array(3 * count);
  const covariance = new Float64Array(6 * count);
  const size = new Float64Array(count);
  let mended = 0;
  for (let k = 0; k < count; k++) {
    const i = kept[k];
    values[3 * k] = pmRa[i];
    values[3 * k + 1] = pmDec[i];
    values[3 * k + 2] = parallax === null ? 0 : parallax[i];
    const a = pmRaError[i];
    const b = pmDecError[i];
    const c = parallaxError === null ? 1 : parallaxError[i];
    let r01 = corrMotion === null ? 0 : corrMotion[i];
    let r02 = corrRa === null ? 0 : corrRa[i];
    let r12 = corrDec === null ? 0 : corrDec[i];
    // A correlation that is missing or impossible is not known: independent errors are the honest stand-in.
    if (!(1 + 2 * r01 * r02 * r12 - r01 * r01 - r02 * r02 - r12 * r12 > 1e-9 && Math.abs(r01) < 1)) {
      r01 = 0;
      r02 = 0;
      r12 = 0;
      mended++;
    }
    covariance[6 * k] = a * a;
    covariance[6 * k + 1] = r01 * a * b;
    covariance[6 * k + 2] = r02 * a * c;
    covariance[6 * k + 3] = b * b;
    covariance[6 * k + 4] = r12 * b * c;
    covariance[6 * k + 5] = c * c;
    size[k] = a * b * c;
  }
  if (mended > 0)
    notes.push(`${mended} rows have missing or impossible correlations: errors taken as independent there.`);

  const centre = new Float64Array(3);
  const spread = new Float64Array(3);
  const extent = new Float64Array(3);
  const width = new Float64Array(3);
  for (let d = 0; d < (useParallax ? 3 : 2); d++) {
    const sorted = new Float64Array(count);
    for (let k = 0; k < count; k++) sorted[k] = values[3 * k + d];
    sorted.sort();
    centre[d] = sortedQuantile(sorted, 0.5);
    spread[d] = (sortedQuantile(sorted, 0.95) - sortedQuantile(sorted, 0.05)) / (2 * 1.6448536);
    extent[d] = (sortedQuantile(sorted, 0.99) - sortedQuantile(sorted, 0.01)) / Math.sqrt(12);
    // A tenth more than what was seen: the next star may lie just outside.
    width[d] = count > 0 ? 1.1 * (sorted[count - 1] - sorted[0]) : 0;
  }
  if (useParallax && centre[2] < 0) {
    notes.push('More than half of the parallaxes are negative: look at their unit, sign and zero point.');
  }
  const { errorClass, classes } = errorClasses(size);
  const uniformDensity = 1 / (width[0] * width[1] * (useParallax ? width[2] : Math.sqrt(2 * Math.PI)));
  return {
    stars: {
      count,
      values,
      covariance,
      useParallax,
      errorClass,
      classes,
      uniformDensity,
      centre,
      spread,
      extent,
      basis: ra === null || dec === null ? null : skyBasis(ra, dec, kept),
      radialVelocity: options.positions ? radialVelocities(catalogue, kept, notes) : null,
    },
    rows: kept,
    notes,
  };
}

function valid(error: number): boolean {
  return error >= 0 && error < 1e150;
}

function column(caller: string, catalogue: Catalogue, role: Role): Float64Array {
  if (catalogue.has(role)) return catalogue.numbers(role);
  const names = catalogue.columns.map((c) => c.name);
  throw new Error(
    `${caller}: ${catalogue.source} has no column for ${role}. Name it when reading: roles: { "${role}": "column" }. ` +
      `Columns: ${names.slice(0, 30).join(', ')}${names.length > 30 ? ', ...' : ''}.`,
  );
}

function errorColumn(
  caller: string,
  catalogue: Catalogue,
  of: 'properMotionRa' | 'properMotionDec' | 'parallax',
  constant: number | undefined,
  key: keyof ConstantErrors,
): Float64Array {
  const role: Role = `${of}.error`;
  if (catalogue.has(role)) return catalogue.numbers(role);
  if (constant !== undefined) {
    if (!valid(constant)) throw new RangeError(`${caller}: errors.${key} must be 0 or more, got ${constant}.`);
    return new Float64Array(catalogue.rowCount).fill(constant);
  }
  throw new Error(
    `${caller}: ${catalogue.source} has no standard errors of ${of}. Name their column when reading: ` +
      `roles: { "${role}": "column" }, or give one error for all stars: errors: { ${key}: 0.1 }.`,
  );
}

/** Radial velocities with a usable error, or null when there are none. */
function radialVelocities(catalogue: Catalogue, rows: Uint32Array, notes: string[]): Stars['radialVelocity'] {
  if (!catalogue.has('radialVelocity') || !catalogue.has('radialVelocity.error')) return null;
  const allValues = catalogue.numbers('radialVelocity');
  const allErrors = catalogue.numbers('radialVelocity.error');
  const value = new Float64Array(rows.length).fill(Number.NaN);
  const error = new Float64Array(rows.length).fill(Number.NaN);
  let used = 0;
  for (let k = 0; k < rows.length; k++) {
    const v = allValues[rows[k]];
    const e = allErrors[rows[k]];
    if (!Number.isFinite(v) || !(e > 0 && Number.isFinite(e))) continue;
    value[k] = v;
    error[k] = e;
    used++;
  }
  if (used === 0) return null;
  notes.push(`Radial velocities used for ${used} of ${rows.length} stars.`);
  const sorted = value.filter((v) => !Number.isNaN(v)).sort();
  const fieldSpread = (sortedQuantile(sorted, 0.95) - sortedQuantile(sorted, 0.05)) / (2 * 1.6448536);
  return { value, error, fieldMean: sortedQuantile(sorted, 0.5), fieldSpread: Math.max(fieldSpread, 5) };
}

/** Unit vectors east, north and away from us at each of the rows. */
function skyBasis(ra: Float64Array, dec: Float64Array, rows: Uint32Array): Float64Array {
  const basis = new Float64Array(9 * rows.length);
  for (let k = 0; k < rows.length; k++) {
    const a = ra[rows[k]] * RADIANS_PER_DEGREE;
    const d = dec[rows[k]] * RADIANS_PER_DEGREE;
    basis[9 * k] = -Math.sin(a);
    basis[9 * k + 1] = Math.cos(a);
    basis[9 * k + 3] = -Math.sin(d) * Math.cos(a);
    basis[9 * k + 4] = -Math.sin(d) * Math.sin(a);
    basis[9 * k + 5] = Math.cos(d);
    basis[9 * k + 6] = Math.cos(d) * Math.cos(a);
    basis[9 * k + 7] = Math.cos(d) * Math.sin(a);
    basis[9 * k + 8] = Math.sin(d);
  }
  return basis;
}

/** Stars in classes of equal number by the size of their errors. */
function errorClasses(size: Float64Array): { errorClass: Uint8Array; classes: number } {
  const n = size.length;
  const errorClass = new Uint8Array(n);
  const wanted = Math.max(1, Math.min(MOST_CLASSES, Math.floor(n / STARS_PER_CLASS)));
  const sorted = Float64Array.from(size).sort();
  const edges: number[] = [];
  for (let c = 1; c < wanted; c++) {
    const edge = sorted[Math.floor((c * n) / wanted)];
    // Equal errors fall into one class.
    if (edge > (edges.at(-1) ?? sorted[0])) edges.push(edge);
  }
  for (let i = 0; i < n; i++) {
    let c = 0;
    while (c < edges.length && size[i] >= edges[c]) c++;
    errorClass[i] = c;
  }
  return { errorClass, classes: edges.length + 1 };
}
