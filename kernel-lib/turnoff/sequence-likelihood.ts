import { normalBetween } from '../numeric/normal-distribution';
import type { Sequence } from './sequence';

/** Stars made ready for comparison with sequences. Sorted by magnitude; arrays of shape (count). */
export interface ReadyStars {
  readonly count: number;
  readonly colour: Float64Array;
  readonly magnitude: Float64Array;
  readonly probability: Float64Array;
  /** u = dx * a; v = dy * b + dx * c turn offsets into standard deviations. */
  readonly a: Float64Array;
  readonly b: Float64Array;
  readonly c: Float64Array;
  /** Largest error in magnitude, mag. */
  readonly reach: number;
}

/** Part of the diagram that is compared. Apparent magnitudes and observed colours. */
export interface Region {
  readonly bright: number;
  readonly faint: number;
  readonly blueEdge: number;
  readonly redEdge: number;
  /** Stars redder than `giantColour` and brighter than `giantMagnitude` are left out as giants. */
  readonly giantColour: number;
  readonly giantMagnitude: number;
}

/** Whether a place lies in the region. */
export function isInside(region: Region, colour: number, magnitude: number): boolean {
  return (
    magnitude >= region.bright &&
    magnitude <= region.faint &&
    colour >= region.blueEdge &&
    colour <= region.redEdge &&
    !(colour > region.giantColour && magnitude < region.giantMagnitude)
  );
}

/** Stars of a region, sorted by magnitude, with an error floor in colour added. */
export function readyStars(
  stars: {
    readonly count: number;
    readonly colour: Float64Array;
    readonly magnitude: Float64Array;
    readonly colourError: Float64Array;
    readonly magnitudeError: Float64Array;
    readonly covariance: Float64Array;
    readonly probability: Float64Array;
  },
  region: Region,
  colourFloor: number,
): ReadyStars {
  const rows = Uint32Array.from({ length: stars.count }, (_, i) => i)
    .filter((i) => isInside(region, stars.colour[i], stars.magnitude[i]))
    .sort((p, q) => stars.magnitude[p] - stars.magnitude[q]);
  const take = (v: Float64Array) => Float64Array.from(rows, (i) => v[i]);
  const n = rows.length;
  const a = new Float64Array(n);
  const b = new Float64Array(n);
  const c = new Float64Array(n);
  let reach = 0;
  for (let k = 0; k < n; k++) {
    const i = rows[k];
    const vx = stars.colourError[i] ** 2 + colourFloor ** 2;
    const vy = Math.max(stars.magnitudeError[i] ** 2, 1e-6);
    const cov = stars.covariance[i];
    const rest = Math.sqrt(Math.max(vy - (cov * cov) / vx, 0.01 * vy));
    a[k] = 1 / Math.sqrt(vx);
    b[k] = 1 / rest;
    c[k] = -cov / vx / rest;
    reach = Math.max(reach, Math.sqrt(vy));
  }
  return {
    count: n,
    colour: take(stars.colour),
    magnitude: take(stars.magnitude),
    probability: take(stars.probability),
    a,
    b,
    c,
    reach,
  };
}

/** Shares of binaries and of stars foreign to the sequence that are summed over, all alike beforehand. */
export const BINARY_SHARES: readonly number[] = [0.05, 0.15, 0.25, 0.35, 0.45, 0.55, 0.65, 0.75];
export const FOREIGN_SHARES: readonly number[] = [0.003, 0.01, 0.03, 0.07, 0.15, 0.3, 0.5];

/** Room for `sequenceLogLikelihood` to work in, so that it allocates nothing. */
export interface Workspace {
  readonly singles: Float64Array;
  readonly binaries: Float64Array;
  /** Log-likelihood of every pair of shares, shape (foreign, binary), as the last call left it. */
  readonly cells: Float64Array;
  /** Product over the latest stars, which saves most of the logarithms; shape as cells. */
  readonly products: Float64Array;
}

export function makeWorkspace(count: number): Workspace {
  return {
    singles: new Float64Array(count),
    binaries: new Float64Array(count),
    cells: new Float64Array(BINARY_SHARES.length * FOREIGN_SHARES.length),
    products: new Float64Array(BINARY_SHARES.length * FOREIGN_SHARES.length),
  };
}

/**
 * Log-likelihood of stars on a sequence that is moved by a reddening and a distance, with the shares of binaries and foreign stars summed
 * over. Every segment is integrated in closed form over the star's error ellipse; the density is normalised over the region, so
 * stars that a sequence predicts and that are not there count against it.
 * @param shiftX colour excess, mag
 * @param shiftY distance modulus plus extinction, mag
 */
export function sequenceLogLikelihood(
  stars: ReadyStars,
  sequence: Sequence,
  shiftX: number,
  shiftY: number,
  region: Region,
  work: Workspace,
): number {
  const { singles, binaries } = work;
  singles.fill(0);
  binaries.fill(0);
  const inSingles = addSegments(stars, sequence, 0, sequence.singles, shiftX, shiftY, region, singles);
  const inBinaries = addSegments(stars, sequence, sequence.singles, sequence.count, shiftX, shiftY, region, binaries);
  if (!(inSingles > 1e-12)) return Number.NEGATIVE_INFINITY;
  const area = (region.faint - region.bright) * (region.redEdge - region.blueEdge);
  addShares(stars, 1 / inSingles, inBinaries > 1e-12 ? 1 / inBinaries : 0, 1 / area, work);
  return logMean(work.cells);
}

/** Stars whose densities are multiplied before a logarithm is taken: few enough to stay far from the ends of a double. */
const BATCH = 16;

/** Log-likelihood of all stars for every pair of shares, into `work.cells`. */
function addShares(stars: ReadyStars, perSingle: number, perBinary: number, foreign: number, work: Workspace): void {
  const { singles, binaries, cells, products } = work;
  const nb = BINARY_SHARES.length;
  const nf = FOREIGN_SHARES.length;
  cells.fill(0);
  products.fill(1);
  for (let i = 0; i < stars.count; i++) {
    const s = singles[i] * perSingle;
    const p = binaries[i] * perBinary - s;
    for (let f = 0; f < nf; f++) {
      const member = stars.probability[i] * (1 - FOREIGN_SHARES[f]);
      const rest = (1 - member) * foreign;
      for (let j = 0; j < nb; j++) products[f * nb + j] *= member * (s + BINARY_SHARES[j] * p) + rest;
    }
    if (i % BATCH === BATCH - 1 || i === stars.count - 1) {
      for (let k = 0; k < cells.length; k++) {
        cells[k] += Math.log(products[k]);
        products[k] = 1;
      }
    }
  }
}

function logMean(cells: Float64Array): number {
  let top = Number.NEGATIVE_INFINITY;
  for (let k = 0; k < cells.length; k++) top = Math.max(top, cells[k]);
  let sum = 0;
  for (let k = 0; k < cells.length; k++) sum += Math.exp(cells[k] - top);
  return top + Math.log(sum / cells.length);
}

/** Mean shares of binaries and of foreign stars, by the log-likelihoods that the last call left. */
export function meanShares(work: Workspace): { binary: number; foreign: number } {
  const { cells } = work;
  const nb = BINARY_SHARES.length;
  const top = Math.max(...cells);
  let sum = 0;
  let binary = 0;
  let foreign = 0;
  for (let k = 0; k < cells.length; k++) {
    const weight = Math.exp(cells[k] - top);
    sum += weight;
    binary += weight * BINARY_SHARES[k % nb];
    foreign += weight * FOREIGN_SHARES[Math.floor(k / nb)];
  }
  return { binary: binary / sum, foreign: foreign / sum };
}

/** Squared distance in standard deviations beyond which a star gets nothing from a segment. */
const FAR = 60;
const ROOT_TWO_PI = Math.sqrt(2 * Math.PI);

/** Adds the density of segments at every star; returns the weight that lies in the region. */
function addSegments(
  stars: ReadyStars,
  seq: Sequence,
  from: number,
  to: number,
  shiftX: number,
  shiftY: number,
  region: Region,
  out: Float64Array,
): number {
  const { colour, magnitude, a, b, c, count } = stars;
  const pad = 6 * stars.reach;
  let inside = 0;
  for (let k = from; k < to; k++) {
    const x = seq.x[k] + shiftX;
    const y = seq.y[k] + shiftY;
    const dx = seq.dx[k];
    const dy = seq.dy[k];
    const weight = seq.weight[k];
    const low = dy < 0 ? y + dy : y;
    const high = dy < 0 ? y : y + dy;
    if (high < region.bright || low > region.faint) continue;
    const middle = x + 0.5 * dx;
    const giant = middle > region.giantColour && y + 0.5 * dy < region.giantMagnitude;
    if (giant || middle < region.blueEdge || middle > region.redEdge) continue;
    // Only the part between the magnitude limits counts as seen.
    const span = high - low;
    inside += span > 0 ? (weight * (Math.min(high, region.faint) - Math.max(low, region.bright))) / span : weight;
    let i = firstFrom(magnitude, count, low - pad);
    for (; i < count && magnitude[i] <= high + pad; i++) {
      const ox = x - colour[i];
      const u = ox * a[i];
      const v = (y - magnitude[i]) * b[i] + ox * c[i];
      const du = dx * a[i];
      const dv = dy * b[i] + dx * c[i];
      const d2 = du * du + dv * dv;
      const scale = (weight * a[i] * b[i]) / (2 * Math.PI);
      if (d2 < 0.04) {
        const mu = u + 0.5 * du;
        const mv = v + 0.5 * dv;
        const r2 = mu * mu + mv * mv;
        if (r2 < FAR) out[i] += scale * Math.exp(-0.5 * r2);
        continue;
      }
      const dot = u * du + v * dv;
      const across = u * u + v * v - (dot * dot) / d2;
      if (across > FAR) continue;
      const d = Math.sqrt(d2);
      const start = dot / d;
      if (start > 8 || start + d < -8) continue;
      out[i] += ((scale * ROOT_TWO_PI) / d) * Math.exp(-0.5 * across) * normalBetween(start, start + d);
    }
  }
  return inside;
}

function firstFrom(sorted: Float64Array, count: number, value: number): number {
  let low = 0;
  let high = count;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}
