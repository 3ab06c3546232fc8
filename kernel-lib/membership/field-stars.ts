import { KMS_PER_AU_PER_YEAR } from '../quantity/constants';
import type { Stars } from './stars';

/**
 * The field: Gaussians in motion and parallax, widened star by star by the errors, over a thin uniform layer that takes
 * gross outliers. The shares differ from one class of error size to the next. Immutable.
 */
export interface FieldModel {
  readonly components: number;
  /** shape (components, 3) */
  readonly means: Float64Array;
  /** Covariances before errors, packed 00 01 02 11 12 22; shape (components, 6). */
  readonly covariances: Float64Array;
  /**
   * Shares by class: shape (classes, components + 2), the last two the uniform layer and the cluster; each class sums to 1.
   */
  readonly shares: Float64Array;
}

/** Sums over the stars that the next field follows from. */
export interface FieldSums {
  readonly logLikelihood: number;
  /** Sum of responsibilities by class, shape (classes, components + 2). */
  readonly counts: Float64Array;
  /** Sum of r T^-1 (x - mean), shape (components, 3); T = covariance + errors. */
  readonly pulls: Float64Array;
  /** Sum of r (T^-1 - y y^T), y = T^-1 (x - mean), packed; shape (components, 6). */
  readonly tightness: Float64Array;
}

/**
 * Field stars at one distance differ in velocity by far more than a cluster's do: a field component narrower than this would
 * pass for a cluster. km/s; the least dispersion of young disc stars is about 10 (common practice, no source).
 */
const LEAST_FIELD_DISPERSION = 7;
/** A floor for distant stars, as a share of the spread of all stars; the second holds where parallax says nothing. */
const LEAST_MOTION_SPREAD = 0.1;
const LEAST_SPREAD_WITHOUT_PARALLAX = 0.3;
/** A cap on that floor, as a share of the extent of all stars: a field that was cut in motion is as narrow as the cut. */
const MOST_MOTION_FLOOR = 0.6;
const LEAST_PARALLAX_SPREAD = 0.03;
/** Stars that a class's share is drawn toward the overall share with. More than about one biases the count where the
 * cluster's magnitudes are not the field's. */
const CLASS_SHRINKAGE = 0.5;
const NORM = (2 * Math.PI) ** -1.5;

/**
 * One pass over the stars: each star's probability of belonging to the cluster, and the sums for the next field.
 * @param clusterDensity shape (count), or null where there is no cluster
 * @param probability    filled here, shape (count)
 */
export function fieldPass(
  stars: Stars,
  field: FieldModel,
  clusterDensity: Float64Array | null,
  probability: Float64Array,
): FieldSums {
  const { count, values, covariance, errorClass, classes, uniformDensity } = stars;
  const { components, means, covariances, shares } = field;
  const width = components + 2;
  const counts = new Float64Array(classes * width);
  const pulls = new Float64Array(components * 3);
  const tightness = new Float64Array(components * 6);
  // Per component: density, then the inverse (6) and y (3), kept between the two uses.
  const kept = new Float64Array(components * 10);
  let logLikelihood = 0;
  for (let i = 0; i < count; i++) {
    const v = 3 * i;
    const s = 6 * i;
    const x0 = values[v];
    const x1 = values[v + 1];
    const x2 = values[v + 2];
    const s00 = covariance[s];
    const s01 = covariance[s + 1];
    const s02 = covariance[s + 2];
    const s11 = covariance[s + 3];
    const s12 = covariance[s + 4];
    const s22 = covariance[s + 5];
    const row = errorClass[i] * width;
    const uniform = shares[row + components] * uniformDensity;
    const cluster = clusterDensity === null ? 0 : shares[row + components + 1] * clusterDensity[i];
    let total = uniform + cluster;
    for (let k = 0; k < components; k++) {
      const c = 6 * k;
      const m = 3 * k;
      const a = covariances[c] + s00;
      const b = covariances[c + 1] + s01;
      const d = covariances[c + 2] + s02;
      const e = covariances[c + 3] + s11;
      const f = covariances[c + 4] + s12;
      const g = covariances[c + 5] + s22;
      const c00 = e * g - f * f;
      const c01 = d * f - b * g;
      const c02 = b * f - d * e;
      const inverse = 1 / (a * c00 + b * c01 + d * c02);
      const i00 = c00 * inverse;
      const i01 = c01 * inverse;
      const i02 = c02 * inverse;
      const i11 = (a * g - d * d) * inverse;
      const i12 = (b * d - a * f) * inverse;
      const i22 = (a * e - b * b) * inverse;
      const d0 = x0 - means[m];
      const d1 = x1 - means[m + 1];
      const d2 = x2 - means[m + 2];
      const y0 = i00 * d0 + i01 * d1 + i02 * d2;
      const y1 = i01 * d0 + i11 * d1 + i12 * d2;
      const y2 = i02 * d0 + i12 * d1 + i22 * d2;
      const density = shares[row + k] * NORM * Math.sqrt(inverse) * Math.exp(-0.5 * (d0 * y0 + d1 * y1 + d2 * y2));
      total += density;
      const t = 10 * k;
      kept[t] = density;
      kept[t + 1] = i00;
      kept[t + 2] = i01;
      kept[t + 3] = i02;
      kept[t + 4] = i11;
      kept[t + 5] = i12;
      kept[t + 6] = i22;
      kept[t + 7] = y0;
      kept[t + 8] = y1;
      kept[t + 9] = y2;
    }
    logLikelihood += Math.log(total);
    const scale = 1 / total;
    const p = cluster * scale;
    probability[i] = p;
    counts[row + components] += uniform * scale;
    counts[row + components + 1] += p;
    for (let k = 0; k < components; k++) {
      const t = 10 * k;
      const r = kept[t] * scale;
      if (r < 1e-9) continue;
      counts[row + k] += r;
      const y0 = kept[t + 7];
      const y1 = kept[t + 8];
      const y2 = kept[t + 9];
      const m = 3 * k;
      pulls[m] += r * y0;
      pulls[m + 1] += r * y1;
      pulls[m + 2] += r * y2;
      const c = 6 * k;
      tightness[c] += r * (kept[t + 1] - y0 * y0);
      tightness[c + 1] += r * (kept[t + 2] - y0 * y1);
      tightness[c + 2] += r * (kept[t + 3] - y0 * y2);
      tightness[c + 3] += r * (kept[t + 4] - y1 * y1);
      tightness[c + 4] += r * (kept[t + 5] - y1 * y2);
      tightness[c + 5] += r * (kept[t + 6] - y2 * y2);
    }
  }
  return { logLikelihood, counts, pulls, tightness };
}

/**
 * The field that follows from the sums of a pass.
 * Source: Bovy, Hogg & Roweis 2011, Ann. Appl. Stat. 5, 1657, Eqs 14-16 (the same sums, arranged so that the star-by-star
 * part needs no matrix product); shares by class drawn to the overall share with the weight of a few stars.
 */
export function improveField(stars: Stars, field: FieldModel, sums: FieldSums): FieldModel {
  const { components } = field;
  const width = components + 2;
  const means = Float64Array.from(field.means);
  const covariances = Float64Array.from(field.covariances);
  const delta = new Float64Array(3);
  const packed = new Float64Array(6);
  for (let k = 0; k < components; k++) {
    let weight = 0;
    for (let c = 0; c < stars.classes; c++) weight += sums.counts[c * width + k];
    // A component that has lost its stars stays where it is with next to no share.
    if (weight < 1e-3) continue;
    gaussianUpdate(field.covariances, 6 * k, sums.pulls, 3 * k, sums.tightness, 6 * k, weight, delta, packed);
    if (!stars.useParallax) {
      delta[2] = 0;
      packed[2] = 0;
      packed[4] = 0;
      packed[5] = 0;
    }
    for (let d = 0; d < 3; d++) means[3 * k + d] += delta[d];
    widen(packed, stars, means[3 * k + 2]);
    covariances.set(packed, 6 * k);
  }
  return { components, means, covariances, shares: classShares(stars, sums.counts, width) };
}

/**
 * New mean shift and covariance of a Gaussian observed with errors: shift = C pulls / w, covariance = C - C A C / w - shift
 * shift^T, where C is the present covariance and A the tightness.
 */
export function gaussianUpdate(
  covariances: Float64Array,
  at: number,
  pulls: Float64Array,
  pullAt: number,
  tightness: Float64Array,
  tightAt: number,
  weight: number,
  shift: Float64Array,
  packed: Float64Array,
): void {
  const c = unpack(covariances, at);
  const a = unpack(tightness, tightAt);
  for (let i = 0; i < 3; i++) {
    shift[i] =
      (c[3 * i] * pulls[pullAt] + c[3 * i + 1] * pulls[pullAt + 1] + c[3 * i + 2] * pulls[pullAt + 2]) / weight;
  }
  let at6 = 0;
  for (let i = 0; i < 3; i++) {
    for (let j = i; j < 3; j++) {
      let sum = 0;
      for (let k = 0; k < 3; k++) for (let l = 0; l < 3; l++) sum += c[3 * i + k] * a[3 * k + l] * c[3 * l + j];
      packed[at6++] = c[3 * i + j] - sum / weight - shift[i] * shift[j];
    }
  }
}

function unpack(packed: Float64Array, at: number): number[] {
  const [a, b, c, d, e, f] = packed.subarray(at, at + 6);
  return [a, b, c, b, d, e, c, e, f];
}

/** Keeps a component wide enough in motion not to pass for a cluster, and positive definite in parallax. */
function widen(packed: Float64Array, stars: Stars, parallax: number): void {
  const physical = (LEAST_FIELD_DISPERSION * Math.max(0, parallax)) / KMS_PER_AU_PER_YEAR;
  const share = stars.useParallax && stars.centre[2] > 0 ? LEAST_MOTION_SPREAD : LEAST_SPREAD_WITHOUT_PARALLAX;
  const relative = share * Math.min(stars.spread[0], stars.spread[1]);
  const cap = MOST_MOTION_FLOOR * Math.min(stars.extent[0], stars.extent[1]);
  const floor = Math.min(cap, Math.max(relative, physical)) ** 2;
  const half = (packed[0] + packed[3]) / 2;
  const least = half - Math.hypot((packed[0] - packed[3]) / 2, packed[1]);
  if (least < floor) {
    packed[0] += floor - least;
    packed[3] += floor - least;
  }
  if (stars.useParallax) {
    const lowest = (LEAST_PARALLAX_SPREAD * stars.spread[2]) ** 2;
    // Variance of parallax at given motion.
    const det = packed[0] * packed[3] - packed[1] * packed[1];
    const explained =
      (packed[2] * packed[2] * packed[3] - 2 * packed[1] * packed[2] * packed[4] + packed[4] * packed[4] * packed[0]) /
      det;
    packed[5] = Math.max(packed[5], explained + lowest);
  }
}

/** Shares of every class, drawn toward the overall shares; none falls to zero for good but the cluster's when absent. */
function classShares(stars: Stars, counts: Float64Array, width: number): Float64Array {
  const { classes } = stars;
  const overall = new Float64Array(width);
  const sizes = new Float64Array(classes);
  let all = 0;
  for (let c = 0; c < classes; c++) {
    for (let k = 0; k < width; k++) {
      overall[k] += counts[c * width + k];
      sizes[c] += counts[c * width + k];
    }
    all += sizes[c];
  }
  // The uniform layer always keeps half a star, so that no star is ever impossible.
  overall[width - 2] = Math.max(overall[width - 2], 0.5);
  const shares = new Float64Array(classes * width);
  for (let c = 0; c < classes; c++) {
    let sum = 0;
    for (let k = 0; k < width; k++) {
      const share = overall[k] / all;
      const value =
        share === 0 ? 0 : (share * (counts[c * width + k] + CLASS_SHRINKAGE)) / (share * sizes[c] + CLASS_SHRINKAGE);
      shares[c * width + k] = value;
      sum += value;
    }
    for (let k = 0; k < width; k++) shares[c * width + k] /= sum;
  }
  return shares;
}

/** A field of one Gaussian about the middle of all stars. */
export function firstField(stars: Stars): FieldModel {
  const width = 3;
  const covariances = new Float64Array(6);
  covariances[0] = stars.spread[0] ** 2;
  covariances[3] = stars.spread[1] ** 2;
  covariances[5] = stars.useParallax ? stars.spread[2] ** 2 : 0;
  const shares = new Float64Array(stars.classes * width);
  for (let c = 0; c < stars.classes; c++) shares.set([0.99, 0.01, 0], c * width);
  return { components: 1, means: Float64Array.from(stars.centre), covariances, shares };
}

/**
 * The field with one component more: component k gives way to two halves, of other width or at other parallax.
 * @param how 'width' one narrower and one wider at the same place; 'parallax' one nearer and one farther
 */
export function splitField(stars: Stars, field: FieldModel, k: number, how: 'width' | 'parallax'): FieldModel {
  const components = field.components + 1;
  const means = new Float64Array(3 * components);
  const covariances = new Float64Array(6 * components);
  means.set(field.means);
  covariances.set(field.covariances);
  means.copyWithin(3 * (components - 1), 3 * k, 3 * k + 3);
  covariances.copyWithin(6 * (components - 1), 6 * k, 6 * k + 6);
  if (how === 'width' || !stars.useParallax) {
    for (let d = 0; d < 6; d++) {
      covariances[6 * k + d] *= 0.4;
      covariances[6 * (components - 1) + d] *= 2;
    }
  } else {
    const sd = Math.sqrt(covariances[6 * k + 5]);
    means[3 * k + 2] -= 0.5 * sd;
    means[3 * (components - 1) + 2] += sd;
  }
  const old = field.components + 2;
  const width = components + 2;
  const shares = new Float64Array(stars.classes * width);
  for (let c = 0; c < stars.classes; c++) {
    for (let j = 0; j < field.components; j++) shares[c * width + j] = field.shares[c * old + j];
    const half = shares[c * width + k] / 2;
    shares[c * width + k] = half;
    shares[c * width + components - 1] = half;
    shares[c * width + components] = field.shares[c * old + old - 2];
    shares[c * width + components + 1] = field.shares[c * old + old - 1];
  }
  return { components, means, covariances, shares };
}

/** The field with room made for a cluster that takes the given share of every class. */
export function withClusterShare(stars: Stars, field: FieldModel, share: number): FieldModel {
  const width = field.components + 2;
  const shares = Float64Array.from(field.shares);
  for (let c = 0; c < stars.classes; c++) {
    const others = 1 - shares[c * width + width - 1];
    for (let k = 0; k < width - 1; k++) shares[c * width + k] *= (1 - share) / others;
    shares[c * width + width - 1] = share;
  }
  return { ...field, shares };
}
